import { describe, expect, it } from 'vitest';
import { hankelWeights } from '../../../domain/numeric/hankel.js';
import { besselJ0 } from '../../../domain/numeric/special.js';

describe('Hankel weights on a logarithmic grid', () => {
  const grid = Float64Array.from({ length: 20 }, (_, i) => 0.05 * 2e4 ** (i / 19));
  const onAxis = (transform: (k: number) => number, weights: Float64Array): number =>
    weights.reduce((sum, weight, i) => sum + weight * transform(grid[i]!), 0);

  // potential of a charged disk on its axis: integral of a J1(k a) exp(-k z) dk = 1 - z / sqrt(z^2 + a^2)
  it.each([0.05, 0.1, 0.3, 0.5, 1])('give the closed form of a disk of radius %d', (radius) => {
    const weights = hankelWeights(grid, (k) => 1 - besselJ0(k * radius), radius);
    for (const z of [0.01, 0.03, 0.1, 0.3]) {
      expect(Math.abs(onAxis((k) => Math.exp(-k * z), weights) - (1 - z / Math.hypot(z, radius)))).toBeLessThan(5e-4);
    }
  });

  it('give the closed form of a Gaussian beam under a Gaussian spread', () => {
    const radius = 0.2;
    const weights = hankelWeights(grid, (k) => -Math.expm1((-k * k * radius * radius) / 8), radius);
    for (const spread of [0.05, 0.1, 0.3]) {
      const expected = radius ** 2 / 8 / (radius ** 2 / 8 + spread ** 2 / 2);
      expect(Math.abs(onAxis((k) => Math.exp((-k * k * spread * spread) / 2), weights) - expected)).toBeLessThan(2e-3);
    }
  });

  it('return a constant unchanged', () => {
    const weights = hankelWeights(grid, (k) => 1 - besselJ0(k * 0.3), 0.3);
    expect(weights.reduce((sum, weight) => sum + weight, 0)).toBeCloseTo(1, 12);
  });
});
