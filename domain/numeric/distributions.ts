import { assertWithin, DomainError } from '../quantities/errors.js';

/** Rational approximations PPND16, about 16 digits: numerator and denominator by rising powers,
 *  rounded to doubles.
 *  @source Wichura1988 algorithm AS 241 */
const center = {
  over: [
    3.3871328727963665, 133.14166789178438, 1971.5909503065513, 13731.69376550946, 45921.95393154987, 67265.7709270087,
    33430.57558358813, 2509.0809287301227,
  ],
  under: [
    1, 42.31333070160091, 687.1870074920579, 5394.196021424751, 21213.794301586597, 39307.89580009271, 28729.085735721943,
    5226.495278852854,
  ],
};
const shoulder = {
  over: [
    1.4234371107496835, 4.630337846156546, 5.769497221460691, 3.6478483247632045, 1.2704582524523684, 0.2417807251774506,
    0.022723844989269184, 0.0007745450142783414,
  ],
  under: [
    1, 2.053191626637759, 1.6763848301838038, 0.6897673349851, 0.14810397642748008, 0.015198666563616457, 0.0005475938084995345,
    1.0507500716444169e-9,
  ],
};
const tail = {
  over: [
    6.657904643501103, 5.463784911164114, 1.7848265399172913, 0.29656057182850487, 0.026532189526576124, 0.0012426609473880784,
    0.000027115555687434876, 2.0103343992922881e-7,
  ],
  under: [
    1, 0.599832206555888, 0.1369298809227358, 0.014875361290850615, 0.0007868691311456133, 0.000018463183175100548,
    1.421511758316446e-7, 2.0442631033899397e-15,
  ],
};

function rational({ over, under }: typeof center, r: number): number {
  return over.reduceRight((sum, c) => sum * r + c, 0) / under.reduceRight((sum, c) => sum * r + c, 0);
}

/** Value that a standard normal variable stays under with the given probability: the inverse of its distribution function.
 *  Shape: scalar. Valid: 0 < probability < 1. Throws: out-of-range. @source Wichura1988 algorithm AS 241 (PPND16) */
export function standardNormalQuantile(probability: number): number {
  if (!(probability > 0 && probability < 1)) {
    throw new DomainError('out-of-range', `probability is ${probability}; it must lie inside 0 to 1, ends excluded`, {
      quantity: 'probability',
      value: Number.isFinite(probability) ? probability : String(probability),
      min: 0,
      max: 1,
    });
  }
  const q = probability - 0.5;
  if (Math.abs(q) <= 0.425) return q * rational(center, 0.180625 - q * q);
  const r = Math.sqrt(-Math.log(Math.min(probability, 1 - probability)));
  return Math.sign(q) * (r <= 5 ? rational(shoulder, r - 1.6) : rational(tail, r - 5));
}

/** Quantile of a normal variable. Valid: 0 < probability < 1, standardDeviation >= 0. Throws: out-of-range. */
export function normalQuantile(probability: number, mean: number, standardDeviation: number): number {
  return mean + standardDeviation * standardNormalQuantile(probability);
}

/** Quantile of a lognormal variable of the given median; `spreadFactor` is the ratio of its 84.13 % quantile to the median, that is
 *  exp(sigma). Valid: 0 < probability < 1, median > 0, spreadFactor >= 1. Throws: out-of-range. */
export function lognormalQuantile(probability: number, median: number, spreadFactor: number): number {
  return median * spreadFactor ** standardNormalQuantile(probability);
}

/** Quantile of the uniform (rectangular) variable on [low, high]. Valid: 0 <= probability <= 1. Throws: out-of-range. */
export function uniformQuantile(probability: number, low: number, high: number): number {
  assertWithin('probability', probability, 0, 1);
  return low + (high - low) * probability;
}

/** Quantile of the triangular variable on [low, high] with its peak at `mode`. Valid: 0 <= probability <= 1, low <= mode <= high.
 *  Throws: out-of-range. @source JCGM101 clause 6.4.5 (symmetric case), here for any mode by inverting the two parabolas */
export function triangularQuantile(probability: number, low: number, mode: number, high: number): number {
  assertWithin('probability', probability, 0, 1);
  assertWithin('mode', mode, low, high);
  const width = high - low;
  if (width === 0) return low;
  return probability * width <= mode - low
    ? low + Math.sqrt(probability * width * (mode - low))
    : high - Math.sqrt((1 - probability) * width * (high - mode));
}

/** Quantile of a sample by linear interpolation between order statistics at (n - 1) p, definition 7 of the nine in use.
 *  `sorted` ascends; infinities may stand at its ends. Valid: at least one value, 0 <= probability <= 1. Throws: out-of-range.
 *  @source Hyndman1996 definition 7 */
export function sampleQuantile(sorted: ArrayLike<number>, probability: number): number {
  assertWithin('sample size', sorted.length, 1, Number.MAX_SAFE_INTEGER);
  assertWithin('probability', probability, 0, 1);
  const position = (sorted.length - 1) * probability;
  const below = Math.floor(position);
  const part = position - below;
  return part === 0 ? sorted[below]! : sorted[below]! * (1 - part) + sorted[below + 1]! * part;
}

/** Mean and standard deviation (n - 1 in the denominator, 0 for one value) of a sample. Throws: out-of-range for an empty one. */
export function sampleMoments(values: ArrayLike<number>): { mean: number; standardDeviation: number } {
  assertWithin('sample size', values.length, 1, Number.MAX_SAFE_INTEGER);
  let mean = 0;
  let squares = 0;
  for (let i = 0; i < values.length; i++) {
    const step = values[i]! - mean;
    mean += step / (i + 1);
    squares += step * (values[i]! - mean);
  }
  return { mean, standardDeviation: values.length > 1 ? Math.sqrt(squares / (values.length - 1)) : 0 };
}
