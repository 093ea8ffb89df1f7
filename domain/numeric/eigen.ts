import { DomainError } from '../quantities/errors.js';

/** Eigenvalues in ascending order; `vectors[k * size + i]` is component i of the unit vector that belongs to `values[k]`. */
export interface EigenSystem {
  readonly size: number;
  readonly values: Float64Array;
  readonly vectors: Float64Array;
}

/** All eigenvalues and orthonormal eigenvectors of a real symmetric tridiagonal matrix, by QL steps with implicit shifts.
 *  Shape: diagonal n, offDiagonal n - 1. Errors of the values are of the order of the machine precision times the largest one.
 *  Throws: not-converged (iterations). @source GolubVanLoan2013 sec. 8.3 */
export function symmetricTridiagonalEigen(diagonal: ArrayLike<number>, offDiagonal: ArrayLike<number>): EigenSystem {
  const size = diagonal.length;
  const d = Float64Array.from(diagonal);
  const e = new Float64Array(size);
  for (let i = 0; i < size - 1; i++) e[i] = offDiagonal[i]!;
  const z = new Float64Array(size * size);
  for (let i = 0; i < size; i++) z[i * size + i] = 1;
  for (let low = 0; low < size; low++) deflate(d, e, z, size, low);
  return sortedAscending(d, z, size);
}

function deflate(d: Float64Array, e: Float64Array, z: Float64Array, size: number, low: number): void {
  const maxIterations = 60;
  for (let iteration = 0; ; iteration++) {
    const split = firstNegligible(d, e, size, low);
    if (split === low) return;
    if (iteration === maxIterations) {
      throw new DomainError('not-converged', 'the eigenvalue iteration did not converge', { iterations: maxIterations });
    }
    implicitStep(d, e, z, size, low, split);
  }
}

function firstNegligible(d: Float64Array, e: Float64Array, size: number, low: number): number {
  for (let m = low; m < size - 1; m++) {
    const scale = Math.abs(d[m]!) + Math.abs(d[m + 1]!);
    if (Math.abs(e[m]!) <= Number.EPSILON * scale) return m;
  }
  return size - 1;
}

// One QL step with Wilkinson's shift on rows low..high; the same rotations turn the rows of z.
function implicitStep(d: Float64Array, e: Float64Array, z: Float64Array, size: number, low: number, high: number): void {
  let g = (d[low + 1]! - d[low]!) / (2 * e[low]!);
  let r = Math.hypot(g, 1);
  g = d[high]! - d[low]! + e[low]! / (g + (g >= 0 ? r : -r));
  let s = 1;
  let c = 1;
  let p = 0;
  for (let i = high - 1; i >= low; i--) {
    const f = s * e[i]!;
    const b = c * e[i]!;
    r = Math.sqrt(f * f + g * g);
    e[i + 1] = r;
    if (r === 0) {
      d[i + 1] = d[i + 1]! - p;
      e[high] = 0;
      return;
    }
    s = f / r;
    c = g / r;
    g = d[i + 1]! - p;
    r = (d[i]! - g) * s + 2 * c * b;
    p = s * r;
    d[i + 1] = g + p;
    g = c * r - b;
    rotateRows(z, i * size, (i + 1) * size, size, s, c);
  }
  d[low] = d[low]! - p;
  e[low] = g;
  e[high] = 0;
}

function rotateRows(z: Float64Array, upper: number, lower: number, size: number, s: number, c: number): void {
  for (let k = 0; k < size; k++) {
    const a = z[upper + k]!;
    const b = z[lower + k]!;
    z[lower + k] = s * a + c * b;
    z[upper + k] = c * a - s * b;
  }
}

function sortedAscending(d: Float64Array, z: Float64Array, size: number): EigenSystem {
  const order = Array.from(d, (_, k) => k).sort((a, b) => d[a]! - d[b]!);
  const values = new Float64Array(size);
  const vectors = new Float64Array(size * size);
  order.forEach((from, to) => {
    values[to] = d[from]!;
    vectors.set(z.subarray(from * size, (from + 1) * size), to * size);
  });
  return { size, values, vectors };
}
