import { describe, expect, it } from 'vitest';
import { symmetricTridiagonalEigen } from '../../../domain/numeric/eigen.js';

// Deterministic numbers spread over many decades, as capacities and conductances of a graded grid are.
const graded = (count: number, decades: number, seed: number) =>
  Float64Array.from({ length: count }, (_, i) => 10 ** (decades * Math.sin(seed + 12.9898 * i) ** 2));

describe('symmetric tridiagonal eigenproblem', () => {
  it('gives the closed-form values of the second difference, 2 - 2 cos(k pi / (n + 1))', () => {
    const size = 60;
    const { values } = symmetricTridiagonalEigen(new Float64Array(size).fill(2), new Float64Array(size - 1).fill(-1));
    values.forEach((value, k) => {
      expect(value).toBeCloseTo(2 - 2 * Math.cos(((k + 1) * Math.PI) / (size + 1)), 12);
    });
  });

  it.each([2, 3, 17, 120])('has orthonormal vectors that rebuild a graded matrix of size %i', (size) => {
    const diagonal = graded(size, 6, 1);
    const offDiagonal = graded(size - 1, 5, 2);
    const { values, vectors } = symmetricTridiagonalEigen(diagonal, offDiagonal);
    const largest = Math.max(...values.map(Math.abs));
    for (let row = 0; row < size; row++) {
      for (let column = 0; column < size; column++) {
        let overlap = 0;
        let rebuilt = 0;
        for (let k = 0; k < size; k++) {
          overlap += vectors[row * size + k]! * vectors[column * size + k]!;
          rebuilt += values[k]! * vectors[k * size + row]! * vectors[k * size + column]!;
        }
        const entry = row === column ? diagonal[row]! : Math.abs(row - column) === 1 ? offDiagonal[Math.min(row, column)]! : 0;
        expect(Math.abs(overlap - (row === column ? 1 : 0))).toBeLessThan(1e-12);
        expect(Math.abs(rebuilt - entry)).toBeLessThan(1e-13 * size * largest);
      }
    }
    expect([...values]).toEqual([...values].sort((a, b) => a - b));
  });

  it('takes a matrix that is diagonal already, and one of size 1', () => {
    expect([...symmetricTridiagonalEigen([3, 1, 2], [0, 0]).values]).toEqual([1, 2, 3]);
    expect([...symmetricTridiagonalEigen([5], []).values]).toEqual([5]);
  });

  it('refuses numbers that are none', () => {
    expect(() => symmetricTridiagonalEigen([1, Number.NaN, 1], [1, 1])).toThrowError(/did not converge/);
  });
});
