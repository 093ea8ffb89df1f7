import { describe, expect, it } from 'vitest';
import { gaussLegendre, integrate } from '../../../domain/numeric/quadrature.js';

describe('Gauss-Legendre quadrature', () => {
  it.each([1, 2, 3, 8, 17, 64])('with %d points integrates every even power up to its degree', (count) => {
    const { nodes, weights } = gaussLegendre(count);
    for (let power = 0; power <= 2 * count - 1; power++) {
      let sum = 0;
      for (let i = 0; i < count; i++) sum += weights[i]! * nodes[i]! ** power;
      expect(sum).toBeCloseTo(power % 2 === 0 ? 2 / (power + 1) : 0, 13);
    }
  });

  it('fails beyond its degree', () => {
    const { nodes, weights } = gaussLegendre(2);
    const sum = weights.reduce((total, w, i) => total + w * nodes[i]! ** 4, 0);
    expect(Math.abs(sum - 2 / 5)).toBeGreaterThan(0.1);
  });

  it('integrates over any interval', () => {
    expect(integrate(Math.exp, -1, 2, 12)).toBeCloseTo(Math.exp(2) - Math.exp(-1), 12);
  });
});
