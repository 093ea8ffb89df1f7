import { describe, expect, it } from 'vitest';
import { findRoot } from '../../../domain/numeric/roots.js';

describe('bracketed root search', () => {
  it.each([
    ['cosine', (x: number) => Math.cos(x) - x, 0, 1, 0.7390851332151607],
    ['steep exponential', (x: number) => Math.exp(50 * x) - 2, -1, 1, Math.log(2) / 50],
    ['flat power', (x: number) => (x - 0.3) ** 9, 0, 1, 0.3],
    ['step', (x: number) => (x < 0.25 ? -1 : 1), 0, 1, 0.25],
    ['pole-like', (x: number) => 1 / (x + 1e-3) - 500, 0, 1, 1e-3],
  ])('finds the root of a %s', (_, f, low, high, root) => {
    expect(findRoot(f, low, high)).toBeCloseTo(root, 9);
    expect(findRoot(f, high, low)).toBeCloseTo(root, 9);
  });

  it('needs far fewer evaluations than bisection for a smooth function', () => {
    let calls = 0;
    findRoot(
      (x) => {
        calls++;
        return Math.exp(x) - 3;
      },
      0,
      10,
    );
    expect(calls).toBeLessThan(16);
  });

  it('returns an end that is a root, and refuses a bracket without a change of sign', () => {
    expect(findRoot((x) => x, 0, 1)).toBe(0);
    expect(() => findRoot((x) => x * x + 1, -1, 1)).toThrowError(expect.objectContaining({ code: 'no-solution' }));
    expect(() => findRoot(() => Number.NaN, -1, 1)).toThrowError(expect.objectContaining({ code: 'no-solution' }));
  });
});
