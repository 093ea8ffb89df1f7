import { describe, expect, it } from 'vitest';
import {
  lognormalQuantile,
  normalQuantile,
  sampleMoments,
  sampleQuantile,
  standardNormalQuantile,
  triangularQuantile,
  uniformQuantile,
} from '../../../domain/numeric/distributions.js';

/** Standard normal distribution function by Simpson's rule from 0: an independent way back. */
function normalDistribution(x: number): number {
  const n = 2000;
  let sum = 0;
  for (let i = 0; i <= n; i++) sum += (i === 0 || i === n ? 1 : i % 2 ? 4 : 2) * Math.exp(-(((x * i) / n) ** 2) / 2);
  return 0.5 + (sum * x) / (3 * n) / Math.sqrt(2 * Math.PI);
}

describe('distributions', () => {
  it('[Wichura1988] gives the check values of AS 241 (all printed digits; recalled, not re-read)', () => {
    expect(standardNormalQuantile(0.25)).toBeCloseTo(-0.6744897501960817, 14);
    expect(standardNormalQuantile(0.001)).toBeCloseTo(-3.090232306167814, 14);
    expect(standardNormalQuantile(1e-20)).toBeCloseTo(-9.2623400897984, 13);
  });

  it('inverts the normal distribution function to 1e-12', () => {
    for (const p of [0.003, 0.02, 0.0749, 0.0751, 0.2, 0.5, 0.6, 0.9249, 0.9251, 0.98, 0.999]) {
      expect(normalDistribution(standardNormalQuantile(p))).toBeCloseTo(p, 12);
    }
    expect(() => standardNormalQuantile(0)).toThrow(/probability is 0/);
    expect(() => standardNormalQuantile(Number.NaN)).toThrow(/NaN/);
  });

  it('scales to normal and lognormal variables', () => {
    expect(normalQuantile(0.5, 3, 2)).toBe(3);
    expect(lognormalQuantile(0.5, 0.02, 2)).toBe(0.02);
    expect(lognormalQuantile(normalDistribution(1), 0.02, 2)).toBeCloseTo(0.04, 12);
  });

  it('triangular and uniform quantiles meet the areas of their shapes', () => {
    expect(uniformQuantile(0.25, 2, 6)).toBe(3);
    expect(triangularQuantile(0.5, 0, 1, 2)).toBeCloseTo(1, 14);
    expect(triangularQuantile(0.125, 0, 1, 2)).toBeCloseTo(0.5, 14);
    expect(triangularQuantile(0.75, 0, 0, 1)).toBeCloseTo(0.5, 14);
    expect(triangularQuantile(0.3, 4, 4, 4)).toBe(4);
  });

  it('sample quantiles interpolate order statistics and keep infinities at the ends', () => {
    expect(sampleQuantile([1, 2, 3, 4], 0.5)).toBe(2.5);
    expect(sampleQuantile([1, 2, 3, 4], 1)).toBe(4);
    expect(sampleQuantile([1, 2, Number.POSITIVE_INFINITY], 0.5)).toBe(2);
    expect(sampleQuantile([1, 2, Number.POSITIVE_INFINITY], 0.9)).toBe(Number.POSITIVE_INFINITY);
    expect(sampleMoments([1e9 + 1, 1e9 + 2, 1e9 + 3])).toEqual({ mean: 1e9 + 2, standardDeviation: 1 });
  });
});
