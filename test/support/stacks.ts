import type { OpticalLayer } from '../../domain/tissue/optical-layer.js';

/** One layer in short: thickness in um, absorption and scattering per cm, anisotropy, index. */
export function layer(
  thicknessUm: number,
  absorptionPerCm: number,
  scatteringPerCm: number,
  anisotropy: number,
  refractiveIndex: number,
): OpticalLayer {
  return { name: 'layer', thicknessUm, absorptionPerCm, scatteringPerCm, anisotropy, refractiveIndex };
}

/** Light skin at a green line, dark skin in the red, and skin where water absorbs as much as it scatters; one index each. */
export const skinLikeStacks: readonly { name: string; layers: readonly OpticalLayer[] }[] = [
  { name: 'light skin, green', layers: [layer(60, 20, 400, 0.8, 1.4), layer(20_000, 1, 200, 0.8, 1.4)] },
  {
    name: 'dark skin, red',
    layers: [layer(80, 40, 240, 0.82, 1.4), layer(1800, 0.3, 150, 0.82, 1.4), layer(20_000, 0.6, 80, 0.82, 1.4)],
  },
  {
    name: 'water band',
    layers: [layer(80, 19, 255, 0.91, 1.4), layer(1800, 20, 160, 0.91, 1.4), layer(20_000, 4, 104, 0.91, 1.4)],
  },
];
