import { describe, expect, it } from 'vitest';
import { placeWeights } from '../../../domain/thermal/place.js';

const faces = Float64Array.of(0, 2, 6, 8);
const centers = Float64Array.of(1, 4, 7);
const conductivity = [1, 3, 3];
const half = (cell: number, face: number) => conductivity[cell]! / Math.abs(faces[face]! - centers[cell]!);
const at = (place: number, values: number[]) => {
  const { cell, weight, nextWeight } = placeWeights(place, faces, centers, half);
  return weight * values[cell]! + nextWeight * values[cell + 1]!;
};

describe('temperature at a place between cells', () => {
  it('has the same flux on both sides of a face between unlike materials', () => {
    const values = [10, 20, 30];
    const face = at(2, values);
    expect((1 * (face - 10)) / 1).toBeCloseTo((3 * (20 - face)) / 2, 12);
    expect(at(1.5, values)).toBeCloseTo((10 + face) / 2, 12);
    expect(at(3, values)).toBeCloseTo((20 + face) / 2, 12);
  });

  it('is linear within one material and constant beyond the outer centers', () => {
    const values = [0, 4, 7];
    expect(at(5, values)).toBeCloseTo(5, 12);
    expect(at(6.5, values)).toBeCloseTo(6.5, 12);
    expect(at(0, values)).toBe(0);
    expect(at(9, values)).toBe(7);
  });
});
