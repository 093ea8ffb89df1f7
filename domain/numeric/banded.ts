import { DomainError } from '../quantities/errors.js';

/** Square matrix whose entries vanish outside `below` sub- and `above` superdiagonals; room is kept for pivoting.
 *  Shape: row-major, row i holds columns i - below .. i + above + below. */
export interface BandedMatrix {
  readonly size: number;
  readonly below: number;
  readonly above: number;
  readonly values: Float64Array;
}

export function makeBanded(size: number, below: number, above: number): BandedMatrix {
  return { size, below, above, values: new Float64Array(size * (2 * below + above + 1)) };
}

/** Position of entry (row, column) in `values`; the entry must lie within the band. */
export function bandedPosition(matrix: BandedMatrix, row: number, column: number): number {
  return row * (2 * matrix.below + matrix.above + 1) + column - row + matrix.below;
}

/** Solves matrix x = right by Gaussian elimination with row pivoting; `matrix` is spent and `right` becomes x.
 *  Throws: no-solution when a pivot vanishes. @source GolubVanLoan2013 section 4.3 */
export function solveBanded(matrix: BandedMatrix, right: Float64Array): Float64Array {
  const { size, below, above, values } = matrix;
  const width = 2 * below + above + 1;
  for (let i = 0; i < size; i++) {
    const lastRow = Math.min(size - 1, i + below);
    const lastColumn = Math.min(size - 1, i + above + below);
    let pivotRow = i;
    let largest = 0;
    for (let r = i; r <= lastRow; r++) {
      const magnitude = Math.abs(values[r * width + i - r + below]!);
      if (magnitude > largest) {
        largest = magnitude;
        pivotRow = r;
      }
    }
    if (!(largest > 0)) throw new DomainError('no-solution', 'a linear system is singular', { row: i });
    const base = i * width - i + below;
    if (pivotRow !== i) {
      const other = pivotRow * width - pivotRow + below;
      for (let c = i; c <= lastColumn; c++) {
        const kept = values[base + c]!;
        values[base + c] = values[other + c]!;
        values[other + c] = kept;
      }
      const kept = right[i]!;
      right[i] = right[pivotRow]!;
      right[pivotRow] = kept;
    }
    const inverse = 1 / values[base + i]!;
    for (let r = i + 1; r <= lastRow; r++) {
      const rowBase = r * width - r + below;
      const factor = values[rowBase + i]! * inverse;
      if (factor === 0) continue;
      for (let c = i + 1; c <= lastColumn; c++) values[rowBase + c]! -= factor * values[base + c]!;
      right[r]! -= factor * right[i]!;
    }
  }
  for (let i = size - 1; i >= 0; i--) {
    const base = i * width - i + below;
    const lastColumn = Math.min(size - 1, i + above + below);
    let sum = right[i]!;
    for (let c = i + 1; c <= lastColumn; c++) sum -= values[base + c]! * right[c]!;
    right[i] = sum / values[base + i]!;
  }
  return right;
}
