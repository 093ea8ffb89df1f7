import { gaussLegendre } from './quadrature.js';

/** Weights W such that the integral over k of F dC equals sum W_i F(k_i), for a function F given on a grid that is even in ln k.
 *  F is the cubic spline in ln k through its samples (flat at both ends), constant below the grid; above it F falls to zero so slowly that C counts as 1.
 *  `powerBelow` is C(k): the part of a beam's on-axis transform below spatial frequency k, rising from 0 towards 1
 *  (1 - J0(k a) for a flat round beam). Integrated by parts, so that only C itself is needed.
 *  Shape: one weight per grid point. `largestPhase` bounds the oscillation of C: it varies like cos(k largestPhase). */
export function hankelWeights(grid: Float64Array, powerBelow: (k: number) => number, largestPhase: number): Float64Array {
  const count = grid.length;
  const step = Math.log(grid[1]! / grid[0]!);
  const valueParts = new Float64Array(count);
  const slopeParts = new Float64Array(count);
  for (let i = 0; i + 1 < count; i++) {
    const phase = (grid[i + 1]! - grid[i]!) * largestPhase;
    const points = Math.min(400, 8 + 2 * Math.ceil(phase / 2));
    const { nodes, weights } = gaussLegendre(points);
    for (let q = 0; q < points; q++) {
      const x = (nodes[q]! + 1) / 2;
      const c = (powerBelow(grid[i]! * Math.exp(x * step)) * weights[q]!) / 2;
      // derivatives of the cubic Hermite functions, sign turned by the integration by parts
      const rise = 6 * x * (1 - x);
      valueParts[i]! += c * rise;
      valueParts[i + 1]! -= c * rise;
      slopeParts[i]! -= c * (1 - 4 * x + 3 * x * x);
      slopeParts[i + 1]! -= c * (3 * x * x - 2 * x);
    }
  }
  valueParts[count - 1]! += 1;
  addSlopes(valueParts, slopeParts);
  return valueParts;
}

/** Folds weights on a spline's slopes into weights on its values: slopes solve m_{i-1} + 4 m_i + m_{i+1} = 3 (f_{i+1} - f_{i-1}),
 *  with zero slope at both ends; this applies the transposed solution. */
function addSlopes(values: Float64Array, slopes: Float64Array): void {
  const last = values.length - 1;
  const diagonal = new Float64Array(last + 1);
  for (let i = 1; i < last; i++) {
    const factor = i > 1 ? 1 / diagonal[i - 1]! : 0;
    diagonal[i] = 4 - factor;
    if (i > 1) slopes[i]! -= factor * slopes[i - 1]!;
  }
  for (let i = last - 1; i >= 1; i--) {
    slopes[i] = (slopes[i]! - (i + 1 < last ? slopes[i + 1]! : 0)) / diagonal[i]!;
    values[i + 1]! += 3 * slopes[i]!;
    values[i - 1]! -= 3 * slopes[i]!;
  }
}
