import { besselJ0 } from '../numeric/special.js';
import type { OpticalLayer } from '../tissue/optical-layer.js';
import { fresnelReflectance } from './fresnel.js';

/** Whether light crosses a layer in straight lines: a window, gel or film. Layers that absorb most of it do not count, nor does any
 *  layer whose scattering matters. */
export function isClear(layer: OpticalLayer): boolean {
  const thicknessCm = layer.thicknessUm * 1e-4;
  return layer.scatteringPerCm * thicknessCm < 0.02 && layer.absorptionPerCm * thicknessCm < 1;
}

/** Reflectance of what lies outside a scattering layer of index `ownIndex`, clear layers and then air, for light of one lateral
 *  frequency that meets it at n sin(theta) = `invariant`. `outward` lists the clear layers from the scattering layer outward.
 *  A ray that is turned back farther out returns displaced by d = sum 2 t tan(theta), which leaves J0(k d) of its part in phase;
 *  the parts that change azimuthal order are left out. Repeated passes add up until they no longer count. */
export function outsideReflectance(ownIndex: number, outward: readonly OpticalLayer[], invariant: number, k: number): number {
  const first = outward[0]?.refractiveIndex ?? 1;
  const direct = reflectanceAt(ownIndex, first, invariant);
  if (outward.length === 0 || direct === 1) return direct;
  let shift = 0;
  let kept = 1;
  let turned = 0;
  for (const [i, layer] of outward.entries()) {
    const index = layer.refractiveIndex;
    const cosine = Math.sqrt(Math.max(1e-12, 1 - (invariant / index) ** 2));
    shift += (2e-4 * layer.thicknessUm * invariant) / (index * cosine);
    kept *= Math.exp((-2e-4 * layer.absorptionPerCm * layer.thicknessUm) / cosine);
    turned = reflectanceAt(index, outward[i + 1]?.refractiveIndex ?? 1, invariant);
    if (turned === 1) break;
  }
  let sum = direct;
  let part = (1 - direct) ** 2 * turned * kept;
  for (let pass = 1; pass < 40 && part > 1e-6; pass++) {
    sum += part * besselJ0(pass * k * shift);
    part *= direct * turned * kept;
  }
  return sum;
}

function reflectanceAt(from: number, to: number, invariant: number): number {
  return invariant >= to ? 1 : fresnelReflectance(from, to, Math.sqrt(Math.max(0, 1 - (invariant / from) ** 2)));
}
