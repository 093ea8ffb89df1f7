import { fc, test } from '@fast-check/vitest';
import { describe, expect, it } from 'vitest';
import { choleskyInPlace, solveDenseInPlace, symmetricEigenInPlace } from '../../../domain/numeric/dense.js';
import { DomainError } from '../../../domain/quantities/errors.js';

const symmetric = fc.integer({ min: 1, max: 9 }).chain((size) =>
  fc.array(fc.integer({ min: -1000, max: 1000 }), { minLength: size * size, maxLength: size * size }).map((numbers) => {
    const matrix = new Float64Array(size * size);
    for (let i = 0; i < size; i++) {
      for (let j = 0; j <= i; j++) matrix[i * size + j] = matrix[j * size + i] = numbers[i * size + j]! / 1000;
    }
    return { size, matrix };
  }),
);

describe('dense symmetric matrices', () => {
  test.prop([symmetric])('are rebuilt from their eigenvectors, which are orthonormal', ({ size, matrix }) => {
    const vectors = matrix.slice();
    const values = new Float64Array(size);
    symmetricEigenInPlace(vectors, size, values, new Float64Array(size));
    for (let i = 0; i < size; i++) {
      for (let j = 0; j < size; j++) {
        let rebuilt = 0;
        let overlap = 0;
        for (let k = 0; k < size; k++) {
          rebuilt += vectors[i * size + k]! * values[k]! * vectors[j * size + k]!;
          overlap += vectors[k * size + i]! * vectors[k * size + j]!;
        }
        expect(rebuilt).toBeCloseTo(matrix[i * size + j]!, 12);
        expect(overlap).toBeCloseTo(i === j ? 1 : 0, 12);
      }
    }
  });

  test.prop([symmetric])('solve a system that they multiply back to', ({ size, matrix }) => {
    const shifted = matrix.map((value, i) => (i % (size + 1) === 0 ? value + 10 : value));
    const right = Float64Array.from({ length: size }, (_, i) => i - 1.5);
    const x = right.slice();
    solveDenseInPlace(shifted.slice(), x);
    for (let i = 0; i < size; i++) {
      let product = 0;
      for (let j = 0; j < size; j++) product += shifted[i * size + j]! * x[j]!;
      expect(product).toBeCloseTo(right[i]!, 10);
    }
    expect(() => solveDenseInPlace(new Float64Array(4), new Float64Array(2))).toThrow(DomainError);
  });

  it('have a Cholesky factor when positive definite, and are refused otherwise', () => {
    const matrix = Float64Array.of(4, 2, 2, 5);
    choleskyInPlace(matrix, 2);
    expect([...matrix]).toEqual([2, 0, 1, 2]);
    expect(() => choleskyInPlace(Float64Array.of(1, 2, 2, 1), 2)).toThrow(DomainError);
  });
});
