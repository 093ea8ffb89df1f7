import { DomainError } from '../quantities/errors.js';

export interface RootOptions {
  /** Relative width of the bracket at which to stop; default 1e-10. */
  readonly relativeTolerance?: number;
  readonly maxIterations?: number;
}

/** Root of a continuous function between two arguments at which it has opposite signs: inverse quadratic interpolation or secant
 *  where they help, bisection where they do not.
 *  Throws: no-solution when the signs agree, not-converged. @source Brent1973 ch. 4 */
export function findRoot(f: (x: number) => number, low: number, high: number, options: RootOptions = {}): number {
  const { relativeTolerance = 1e-10, maxIterations = 200 } = options;
  let [a, b] = [low, high];
  let [fa, fb] = [f(a), f(b)];
  if (fa === 0) return a;
  if (fb === 0) return b;
  if (!(fa < 0 !== fb < 0))
    throw new DomainError('no-solution', 'the function does not change sign in the bracket', { low, high });
  let [c, fc] = [a, fa];
  let step = b - a;
  let previousStep = step;
  for (let iteration = 0; iteration < maxIterations; iteration++) {
    if (fb < 0 === fc < 0) {
      [c, fc] = [a, fa];
      step = b - a;
      previousStep = step;
    }
    if (Math.abs(fc) < Math.abs(fb)) {
      [a, b, c] = [b, c, b];
      [fa, fb, fc] = [fb, fc, fb];
    }
    const tolerance = 0.5 * relativeTolerance * Math.abs(b) + 2 * Number.MIN_VALUE;
    const middle = 0.5 * (c - b);
    if (Math.abs(middle) <= tolerance || fb === 0) return b;
    const trial = Math.abs(previousStep) >= tolerance && Math.abs(fa) > Math.abs(fb) ? interpolated(a, b, c, fa, fb, fc) : null;
    if (
      trial !== null &&
      Math.abs(trial) < Math.min(1.5 * Math.abs(middle), 0.5 * Math.abs(previousStep)) &&
      trial * middle > 0
    ) {
      previousStep = step;
      step = trial;
    } else {
      step = middle;
      previousStep = middle;
    }
    [a, fa] = [b, fb];
    b += Math.abs(step) > tolerance ? step : Math.sign(middle) * tolerance;
    fb = f(b);
  }
  throw new DomainError('not-converged', 'the root search did not converge', { iterations: maxIterations });
}

// Step from b to the root of the inverse parabola through three points, or of the secant when two of them coincide.
function interpolated(a: number, b: number, c: number, fa: number, fb: number, fc: number): number {
  const s = fb / fa;
  if (a === c) return ((b - c) * s) / (1 - s);
  const q = fa / fc;
  const r = fb / fc;
  const p = s * ((c - b) * q * (q - r) - (b - a) * (r - 1));
  return -p / ((q - 1) * (r - 1) * (s - 1));
}
