import { fc, test } from '@fast-check/vitest';
import { describe, expect, it } from 'vitest';
import { bandedPosition, makeBanded, solveBanded } from '../../../domain/numeric/banded.js';
import { DomainError } from '../../../domain/quantities/errors.js';

describe('banded systems', () => {
  test.prop([
    fc.integer({ min: 1, max: 12 }),
    fc.integer({ min: 0, max: 3 }),
    fc.integer({ min: 0, max: 3 }),
    fc.array(fc.double({ min: -1, max: 1, noNaN: true }), { minLength: 200, maxLength: 200 }),
  ])('multiply back to their right-hand side', (size, below, above, numbers) => {
    const matrix = makeBanded(size, below, above);
    const dense = Array.from({ length: size }, () => new Array<number>(size).fill(0));
    let next = 0;
    for (let i = 0; i < size; i++) {
      for (let j = Math.max(0, i - below); j <= Math.min(size - 1, i + above); j++) {
        const value = numbers[next++]! + (i === j ? 4 : 0);
        dense[i]![j] = value;
        matrix.values[bandedPosition(matrix, i, j)] = value;
      }
    }
    const right = Float64Array.from({ length: size }, (_, i) => numbers[199 - i]!);
    const x = solveBanded(matrix, right.slice());
    for (let i = 0; i < size; i++) {
      const product = dense[i]!.reduce((sum, value, j) => sum + value * x[j]!, 0);
      expect(product).toBeCloseTo(right[i]!, 10);
    }
  });

  it('needs pivoting where the diagonal vanishes, and does it', () => {
    const matrix = makeBanded(2, 1, 1);
    matrix.values[bandedPosition(matrix, 0, 1)] = 2;
    matrix.values[bandedPosition(matrix, 1, 0)] = 4;
    expect([...solveBanded(matrix, Float64Array.of(6, 8))]).toEqual([2, 3]);
  });

  it('refuses a singular matrix', () => {
    expect(() => solveBanded(makeBanded(2, 1, 1), new Float64Array(2))).toThrow(DomainError);
  });
});
