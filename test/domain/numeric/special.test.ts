import { describe, expect, it } from 'vitest';
import { besselJ0, besselJ1 } from '../../../domain/numeric/special.js';

describe('Bessel functions', () => {
  // [AbramowitzStegun1964] table 9.1, from memory, 10 decimals
  it.each([
    [0, 1, 0],
    [1, 0.7651976866, 0.4400505857],
    [2, 0.2238907791, 0.5767248078],
    [5, -0.1775967713, -0.3275791376],
    [10, -0.2459357645, 0.0434727462],
  ])('match the printed table at %d', (x, j0, j1) => {
    expect(besselJ0(x)).toBeCloseTo(j0, 10);
    expect(besselJ1(x)).toBeCloseTo(j1, 10);
  });

  it('vanish at their first printed zeros', () => {
    expect(Math.abs(besselJ0(2.404825557695773))).toBeLessThan(1e-15);
    expect(Math.abs(besselJ1(3.831705970207512))).toBeLessThan(1e-15);
  });

  it('satisfy J0 prime = -J1 across every change of method, even and odd in their argument', () => {
    const h = 1e-4;
    for (const x of [0.3, 3.9999, 4.0001, 12, 24.9999, 25.0001, 180]) {
      expect((besselJ0(x + h) - besselJ0(x - h)) / (2 * h)).toBeCloseTo(-besselJ1(x), 8);
      expect(besselJ0(-x)).toBe(besselJ0(x));
      expect(besselJ1(-x)).toBe(-besselJ1(x));
    }
  });
});
