import { DomainError } from '../quantities/errors.js';

/** Lower Cholesky factor G of a symmetric positive definite matrix, P = G G^T, written over its lower triangle.
 *  Shape: row-major, size x size; the upper triangle is set to zero. Throws: no-solution when not positive definite.
 *  @source GolubVanLoan2013 section 4.2 */
export function choleskyInPlace(matrix: Float64Array, size: number): void {
  for (let i = 0; i < size; i++) {
    for (let j = 0; j <= i; j++) {
      let sum = matrix[i * size + j]!;
      for (let k = 0; k < j; k++) sum -= matrix[i * size + k]! * matrix[j * size + k]!;
      if (i === j) {
        if (!(sum > 0)) throw new DomainError('no-solution', 'a matrix is not positive definite', { row: i });
        matrix[i * size + i] = Math.sqrt(sum);
      } else {
        matrix[i * size + j] = sum / matrix[j * size + j]!;
        matrix[j * size + i] = 0;
      }
    }
  }
}

/** Solves matrix x = right by Gaussian elimination with row pivoting; `matrix` is spent and `right` becomes x.
 *  Shape: row-major. Throws: no-solution when a pivot vanishes. @source GolubVanLoan2013 section 3.4 */
export function solveDenseInPlace(matrix: Float64Array, right: Float64Array): void {
  const size = right.length;
  for (let i = 0; i < size; i++) {
    let pivot = i;
    for (let r = i + 1; r < size; r++) {
      if (Math.abs(matrix[r * size + i]!) > Math.abs(matrix[pivot * size + i]!)) pivot = r;
    }
    if (matrix[pivot * size + i] === 0) throw new DomainError('no-solution', 'a linear system is singular', { row: i });
    if (pivot !== i) {
      for (let c = i; c < size; c++) {
        const kept = matrix[i * size + c]!;
        matrix[i * size + c] = matrix[pivot * size + c]!;
        matrix[pivot * size + c] = kept;
      }
      const kept = right[i]!;
      right[i] = right[pivot]!;
      right[pivot] = kept;
    }
    for (let r = i + 1; r < size; r++) {
      const factor = matrix[r * size + i]! / matrix[i * size + i]!;
      if (factor === 0) continue;
      for (let c = i + 1; c < size; c++) matrix[r * size + c]! -= factor * matrix[i * size + c]!;
      right[r]! -= factor * right[i]!;
    }
  }
  for (let i = size - 1; i >= 0; i--) {
    let sum = right[i]!;
    for (let c = i + 1; c < size; c++) sum -= matrix[i * size + c]! * right[c]!;
    right[i] = sum / matrix[i * size + i]!;
  }
}

/** Eigenvalues and orthonormal eigenvectors of a small symmetric matrix.
 *  Shape: row-major; on return `matrix` holds eigenvectors in its columns, `eigenvalues` their values, unsorted.
 *  Householder reduction to tridiagonal form, then implicit QL. Throws: not-converged.
 *  @source GolubVanLoan2013 section 8.3; MartinReinschWilkinson1968 (tred2); MartinWilkinson1968 (imtql2) */
export function symmetricEigenInPlace(matrix: Float64Array, size: number, eigenvalues: Float64Array, work: Float64Array): void {
  tridiagonalize(matrix, size, eigenvalues, work);
  diagonalize(matrix, size, eigenvalues, work);
}

function tridiagonalize(a: Float64Array, n: number, d: Float64Array, e: Float64Array): void {
  for (let i = n - 1; i > 0; i--) {
    let h = 0;
    let scale = 0;
    for (let k = 0; k < i; k++) scale += Math.abs(a[i * n + k]!);
    if (i === 1 || scale === 0) {
      e[i] = a[i * n + i - 1]!;
    } else {
      for (let k = 0; k < i; k++) {
        a[i * n + k]! /= scale;
        h += a[i * n + k]! * a[i * n + k]!;
      }
      const f = a[i * n + i - 1]!;
      const g = f >= 0 ? -Math.sqrt(h) : Math.sqrt(h);
      e[i] = scale * g;
      h -= f * g;
      a[i * n + i - 1] = f - g;
      let sum = 0;
      for (let j = 0; j < i; j++) {
        a[j * n + i] = a[i * n + j]! / h;
        let product = 0;
        for (let k = 0; k <= j; k++) product += a[j * n + k]! * a[i * n + k]!;
        for (let k = j + 1; k < i; k++) product += a[k * n + j]! * a[i * n + k]!;
        e[j] = product / h;
        sum += e[j]! * a[i * n + j]!;
      }
      const half = sum / (h + h);
      for (let j = 0; j < i; j++) {
        const fj = a[i * n + j]!;
        const gj = e[j]! - half * fj;
        e[j] = gj;
        for (let k = 0; k <= j; k++) a[j * n + k]! -= fj * e[k]! + gj * a[i * n + k]!;
      }
    }
    d[i] = h;
  }
  d[0] = 0;
  e[0] = 0;
  for (let i = 0; i < n; i++) {
    if (d[i] !== 0) {
      for (let j = 0; j < i; j++) {
        let product = 0;
        for (let k = 0; k < i; k++) product += a[i * n + k]! * a[k * n + j]!;
        for (let k = 0; k < i; k++) a[k * n + j]! -= product * a[k * n + i]!;
      }
    }
    d[i] = a[i * n + i]!;
    a[i * n + i] = 1;
    for (let j = 0; j < i; j++) {
      a[j * n + i] = 0;
      a[i * n + j] = 0;
    }
  }
}

const smallest = 1e-150; // squares of less vanish

function diagonalize(z: Float64Array, n: number, d: Float64Array, e: Float64Array): void {
  for (let i = 1; i < n; i++) e[i - 1] = e[i]!;
  e[n - 1] = 0;
  for (let l = 0; l < n; l++) {
    for (let iteration = 0; ; iteration++) {
      let m = l;
      for (; m < n - 1; m++) {
        const size = Math.abs(d[m]!) + Math.abs(d[m + 1]!);
        if (Math.abs(e[m]!) <= Number.EPSILON * size + smallest) break;
      }
      if (m === l) break;
      if (iteration === 60) {
        throw new DomainError('not-converged', 'an eigenvalue did not settle', { iterations: 60, residual: Math.abs(e[l]!) });
      }
      let g = (d[l + 1]! - d[l]!) / (2 * e[l]!);
      let r = Math.sqrt(g * g + 1);
      g = d[m]! - d[l]! + e[l]! / (g + (g >= 0 ? r : -r));
      let s = 1;
      let c = 1;
      let p = 0;
      let i = m - 1;
      for (; i >= l; i--) {
        let f = s * e[i]!;
        const b = c * e[i]!;
        r = Math.sqrt(f * f + g * g);
        e[i + 1] = r;
        if (r === 0) {
          d[i + 1]! -= p;
          e[m] = 0;
          break;
        }
        s = f / r;
        c = g / r;
        g = d[i + 1]! - p;
        r = (d[i]! - g) * s + 2 * c * b;
        p = s * r;
        d[i + 1] = g + p;
        g = c * r - b;
        for (let k = 0; k < n; k++) {
          f = z[k * n + i + 1]!;
          z[k * n + i + 1] = s * z[k * n + i]! + c * f;
          z[k * n + i] = c * z[k * n + i]! - s * f;
        }
      }
      if (r === 0 && i >= l) continue;
      d[l]! -= p;
      e[l] = g;
      e[m] = 0;
    }
  }
}
