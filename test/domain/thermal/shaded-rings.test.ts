import { describe, expect, it } from 'vitest';
import { emissionIntervals } from '../../../domain/thermal/emission.js';
import { prepareInclusionHeat } from '../../../domain/thermal/inclusion-heat.js';
import { shadedRings } from '../../../domain/thermal/shaded-rings.js';
import { blood, dermis } from './media.js';

const areaMean = (rings: ArrayLike<number>) => {
  let sum = 0;
  for (let ring = 0; ring < rings.length; ring++) sum += rings[ring]! * (2 * ring + 1);
  return sum / rings.length ** 2;
};

// Share of isotropic light on a cylinder's surface that its chords take up, summed on a plain grid.
function absorbedShare(tau: number): number {
  let taken = 0;
  let all = 0;
  for (let i = 0; i < 400; i++) {
    const theta = ((i + 0.5) / 400) * (Math.PI / 2);
    for (let j = 0; j < 400; j++) {
      const phi = ((j + 0.5) / 400) * (Math.PI / 2);
      const weight = Math.sin(theta) ** 2 * Math.cos(phi);
      taken += weight * -Math.expm1((-2 * tau * Math.cos(phi)) / Math.sin(theta));
      all += weight;
    }
  }
  return taken / all;
}

describe('shaded rings of a vessel', () => {
  it('are all 1 in clear blood', () => {
    for (const ring of shadedRings(0, 50, 6)) expect(ring).toBeCloseTo(1, 6);
  });

  it.each([0.05, 0.5, 1, 3])('take up together what the chords of the cylinder do, mu_a R = %d', (tau) => {
    const rings = shadedRings(tau / 0.005, 50, 24);
    expect((areaMean(rings) * 2 * tau) / absorbedShare(tau)).toBeCloseTo(1, 2);
  });

  it('grow outward, the more so the darker the blood', () => {
    const [light, dark] = [shadedRings(20, 50, 6), shadedRings(400, 50, 6)];
    for (const rings of [light, dark]) expect([...rings]).toEqual([...rings].sort((a, b) => a - b));
    expect(dark[5]! / dark[0]!).toBeGreaterThan(2 * (light[5]! / light[0]!));
  });

  it('heat the wall sooner than even heat of the same amount', () => {
    const timesS = [1e-4, 1e-3, 1e-2];
    const heat = prepareInclusionHeat({
      geometry: 'cylinder',
      radiusUm: 50,
      inside: blood,
      outside: dermis,
      emission: emissionIntervals({ durationS: 1e-4 }),
      timesS,
      placesRadiusUm: [0, 50],
      rings: 6,
    });
    const rings = shadedRings(400, 50, 6);
    const total = (i: number) => heat.ringsK.reduce((sum, ring, r) => sum + (ring[i]! * rings[r]!) / areaMean(rings), 0);
    expect(total(3)).toBeGreaterThan(1.3 * heat.excessK[3]!);
    expect(total(0)).toBeLessThan(heat.excessK[0]!);
    const even = (i: number) => heat.ringsK.reduce((sum, ring) => sum + ring[i]!, 0);
    for (let i = 0; i < 6; i++) expect(even(i)).toBeCloseTo(heat.excessK[i]!, 10);
    expect(total(5) / heat.excessK[5]!).toBeLessThan(1.2);
  });
});
