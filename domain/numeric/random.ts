/** A stream of seeded random numbers. Two streams with the same seed and stream number give the same numbers anywhere. */
export interface RandomStream {
  /** 32 random bits as an integer, 0 to 2^32 - 1. */
  readonly uint32: () => number;
  /** Uniform on the open interval (0, 1), 53 bits: the odd multiples of 2^-54, so that neither end is ever drawn. */
  readonly uniform: () => number;
  /** Integer from 0 to count - 1, each equally likely. Valid: 1 <= count <= 2^32. */
  readonly integerBelow: (count: number) => number;
}

const word64 = (1n << 64n) - 1n;

/** SplitMix64's output mixer (variant 13 of Stafford): a bijection of 64-bit words in which every input bit reaches every output bit.
 *  @source Steele2014 fig. 14 */
function mix64(word: bigint): bigint {
  let z = word & word64;
  z = ((z ^ (z >> 30n)) * 0xbf58476d1ce4e5b9n) & word64;
  z = ((z ^ (z >> 27n)) * 0x94d049bb133111ebn) & word64;
  return z ^ (z >> 31n);
}

/** Starting state of one of the independent streams of a seed, for loops that keep the generator in local variables.
 *  Shape: four 32-bit words. Valid: seed and stream are integers from 0 to 2^53 - 1.
 *  The words are SplitMix64 outputs started at a hash of seed and stream, as the generator's authors advise. A million streams of
 *  10^12 numbers each share a stretch of the period of 2^128 - 1 with a probability below 10^-14.
 *  @source Blackman2021 section 5.5; Steele2014 */
export function streamState(seed: number, stream: number): Int32Array {
  const golden = 0x9e3779b97f4a7c15n;
  const start = mix64(mix64(BigInt(seed) + golden) ^ (BigInt(stream) * 0xd1342543de82ef95n));
  const words = [mix64(start + golden), mix64(start + 2n * golden)];
  const state = new Int32Array(4);
  words.forEach((word, i) => {
    state[2 * i] = Number(word & 0xffffffffn);
    state[2 * i + 1] = Number(word >> 32n);
  });
  if (state.every((word) => word === 0)) state[0] = 1;
  return state;
}

/** One step of xoshiro128++ on a state in an array; gives a signed 32-bit word.
 *  @source Blackman2021 section 4 and table 2 (32-bit engine, a = 9, b = 11, scrambler constant 7) */
export function nextWord(state: Int32Array): number {
  const s0 = state[0]!;
  const sum = (s0 + state[3]!) | 0;
  const result = (((sum << 7) | (sum >>> 25)) + s0) | 0;
  const shifted = state[1]! << 9;
  state[2]! ^= s0;
  state[3]! ^= state[1]!;
  state[1]! ^= state[2]!;
  state[0]! ^= state[3]!;
  state[2]! ^= shifted;
  state[3] = (state[3]! << 11) | (state[3]! >>> 21);
  return result;
}

/** Seeded generator xoshiro128++ with independent streams: equal seed and stream, equal numbers, on any machine.
 *  Valid: seed and stream are integers from 0 to 2^53 - 1.
 *  @source Blackman2021 section 4 */
export function randomStream(seed: number, stream = 0): RandomStream {
  const state = streamState(seed, stream);
  const uint32 = () => nextWord(state) >>> 0;
  return {
    uint32,
    uniform: () => (uint32() * 2 ** 21 + (uint32() >>> 11) + 0.5) * 2 ** -53,
    integerBelow: (count) => {
      const limit = 2 ** 32 - (2 ** 32 % count);
      let word = uint32();
      while (word >= limit) word = uint32();
      return word % count;
    },
  };
}
