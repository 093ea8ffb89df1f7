import { describe, expect, it } from 'vitest';
import { sobolMaxDimensions, sobolPoints } from '../../../domain/numeric/low-discrepancy.js';

/** How many points fall in each of the 2^m cells of an elementary box partition of two dimensions. */
function cellCounts(points: Float64Array, dimensions: number, [x, y]: [number, number], xBits: number, yBits: number): number[] {
  const cells = new Array<number>(2 ** (xBits + yBits)).fill(0);
  for (let i = 0; i < points.length; i += dimensions) {
    cells[Math.floor(points[i + x]! * 2 ** xBits) * 2 ** yBits + Math.floor(points[i + y]! * 2 ** yBits)]! += 1;
  }
  return cells;
}

describe('low-discrepancy points', () => {
  it('[Joe2008] unscrambled points are the published sequence (three dimensions, first eight points, exact binary fractions)', () => {
    const points = sobolPoints(8, 3, null);
    const eighths = Array.from(points, (value) => Math.floor(value * 8));
    // In Gray code order: 0; 1/2; 3/4, 1/4, 1/4; 1/4, 3/4, 3/4; 3/8, 3/8, 5/8; 7/8, 7/8, 1/8; 5/8, 1/8, 7/8; 1/8, 5/8, 3/8.
    expect(eighths).toEqual([0, 0, 0, 4, 4, 4, 6, 2, 2, 2, 6, 6, 3, 3, 5, 7, 7, 1, 5, 1, 7, 1, 5, 3]);
  });

  it.each([null, 1, 2, 99])('every dimension has one of 256 points in each of 256 strips, scramble %s', (seed) => {
    const points = sobolPoints(256, sobolMaxDimensions, seed);
    for (let d = 0; d < sobolMaxDimensions; d++) {
      const strips = new Set(Array.from({ length: 256 }, (_, i) => Math.floor(points[i * sobolMaxDimensions + d]! * 256)));
      expect(strips.size).toBe(256);
    }
  });

  it('the first two dimensions keep one point in every elementary box after scrambling, as a (0, 8, 2) net must', () => {
    const points = sobolPoints(256, 2, 5);
    for (let xBits = 0; xBits <= 8; xBits++)
      expect(new Set(cellCounts(points, 2, [0, 1], xBits, 8 - xBits))).toEqual(new Set([1]));
  });

  it('integrates a smooth product of eight factors far better than random points would', () => {
    const dimensions = 8;
    const n = 1024;
    const errors = [1, 2, 3, 4].map((seed) => {
      const points = sobolPoints(n, dimensions, seed);
      let sum = 0;
      for (let i = 0; i < n; i++) {
        let product = 1;
        for (let d = 0; d < dimensions; d++) product *= 1 + (points[i * dimensions + d]! - 0.5) / (d + 1);
        sum += product;
      }
      return Math.abs(sum / n - 1);
    });
    // Random points: standard error about 0.36 / sqrt(1024) = 0.011.
    expect(Math.max(...errors)).toBeLessThan(0.0015);
  });

  it('repeats for a seed, differs between seeds, and refuses too many dimensions', () => {
    expect(sobolPoints(16, 3, 4)).toEqual(sobolPoints(16, 3, 4));
    expect(sobolPoints(16, 3, 4)).not.toEqual(sobolPoints(16, 3, 5));
    expect(() => sobolPoints(16, sobolMaxDimensions + 1, 1)).toThrow(/dimensions is 33/);
  });
});
