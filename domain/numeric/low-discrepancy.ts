import { assertWithin } from '../quantities/errors.js';
import { randomStream } from './random.js';

/** Primitive polynomials and initial direction numbers of dimensions 2 to 32: degree s, inner coefficients a, then m_1 to m_s.
 *  Chosen by Joe and Kuo for good two-dimensional projections. @source Joe2008 table new-joe-kuo-6 */
const joeKuo: readonly (readonly number[])[] = [
  [1, 0, 1],
  [2, 1, 1, 3],
  [3, 1, 1, 3, 1],
  [3, 2, 1, 1, 1],
  [4, 1, 1, 1, 3, 3],
  [4, 4, 1, 3, 5, 13],
  [5, 2, 1, 1, 5, 5, 17],
  [5, 4, 1, 1, 5, 5, 5],
  [5, 7, 1, 1, 7, 11, 19],
  [5, 11, 1, 1, 5, 1, 1],
  [5, 13, 1, 1, 1, 3, 11],
  [5, 14, 1, 3, 5, 5, 31],
  [6, 1, 1, 3, 3, 9, 7, 49],
  [6, 13, 1, 1, 1, 15, 21, 21],
  [6, 16, 1, 3, 1, 13, 27, 49],
  [6, 19, 1, 1, 1, 15, 7, 5],
  [6, 22, 1, 3, 1, 15, 13, 25],
  [6, 25, 1, 1, 5, 5, 19, 61],
  [7, 1, 1, 3, 7, 11, 23, 15, 103],
  [7, 4, 1, 3, 7, 13, 13, 15, 69],
  [7, 7, 1, 1, 3, 13, 7, 35, 63],
  [7, 8, 1, 3, 5, 9, 1, 25, 53],
  [7, 14, 1, 3, 1, 13, 9, 35, 107],
  [7, 19, 1, 3, 1, 5, 27, 61, 31],
  [7, 21, 1, 1, 5, 11, 19, 41, 61],
  [7, 28, 1, 3, 5, 3, 3, 13, 69],
  [7, 31, 1, 1, 7, 13, 1, 19, 1],
  [7, 32, 1, 3, 7, 5, 13, 19, 59],
  [7, 37, 1, 1, 3, 9, 25, 29, 41],
  [7, 41, 1, 3, 5, 13, 23, 1, 55],
  [7, 42, 1, 3, 7, 3, 13, 59, 17],
];

/** Most dimensions that `sobolPoints` offers. */
export const sobolMaxDimensions = joeKuo.length + 1;

const bits = 32;

/** Direction numbers v_1 to v_32 of one dimension as 32-bit binary fractions. @source Joe2008 eqs. 2 and 3 */
function directionNumbers(dimension: number): Uint32Array {
  const v = new Uint32Array(bits);
  if (dimension === 0) return v.map((_, i) => 2 ** (bits - 1 - i));
  const [s, a, ...m] = joeKuo[dimension - 1] as [number, number, ...number[]];
  for (let i = 0; i < bits; i++) {
    if (i < s) {
      v[i] = m[i]! * 2 ** (bits - 1 - i);
      continue;
    }
    let word = v[i - s]! ^ (v[i - s]! >>> s);
    for (let k = 1; k < s; k++) if ((a >>> (s - 1 - k)) & 1) word ^= v[i - k]!;
    v[i] = word;
  }
  return v;
}

/** Owen's nested scramble of one binary fraction: each bit is flipped by a hash of the seed and the bits above it.
 *  @source Owen1995 section 3 */
function owenScramble(fraction: number, seed: number): number {
  let scrambled = 0;
  for (let bit = 0; bit < bits; bit++) {
    const above = bit === 0 ? 0 : fraction >>> (bits - bit);
    let hash = Math.imul(above ^ Math.imul(bit + 1, 0x9e3779b1) ^ seed, 0x85ebca6b);
    hash = Math.imul(hash ^ (hash >>> 15), 0x2c1b3c6d);
    hash = Math.imul(hash ^ (hash >>> 12), 0x297a2d39);
    const flip = (hash ^ (hash >>> 15)) & 1;
    scrambled |= (((fraction >>> (bits - 1 - bit)) & 1) ^ flip) << (bits - 1 - bit);
  }
  return scrambled >>> 0;
}

/** Seeded low-discrepancy points in the open unit cube: Sobol's sequence with Owen's nested scramble, one scramble a dimension.
 *  Every point is uniform on the cube by itself, so means are unbiased over seeds; counts that are powers of two balance best.
 *  Shape: row by row, point i in [i * dimensions, (i + 1) * dimensions). Valid: 1 <= dimensions <= 32, 1 <= count <= 2^24.
 *  `seed: null` leaves the sequence unscrambled (its first point is then the half-cell 2^-33 beside the origin).
 *  Throws: out-of-range. @source Joe2008; Owen1995; Antonov1979 (Gray code order) */
export function sobolPoints(count: number, dimensions: number, seed: number | null): Float64Array {
  assertWithin('count', count, 1, 2 ** 24);
  assertWithin('dimensions', dimensions, 1, sobolMaxDimensions);
  const points = new Float64Array(count * dimensions);
  for (let d = 0; d < dimensions; d++) {
    const v = directionNumbers(d);
    const scramble = seed === null ? 0 : randomStream(seed, d).uint32();
    let fraction = 0;
    for (let i = 0; i < count; i++) {
      if (i > 0) fraction = (fraction ^ v[31 - Math.clz32(i & -i)]!) >>> 0;
      const word = seed === null ? fraction : owenScramble(fraction, scramble);
      points[i * dimensions + d] = (word + 0.5) * 2 ** -bits;
    }
  }
  return points;
}
