import { describe, expect, it } from 'vitest';
import { nextWord, randomStream } from '../../../domain/numeric/random.js';

describe('seeded random streams', () => {
  it('[Blackman2021] steps xoshiro128++ as published: state 1, 2, 3, 4, worked by hand from the definition', () => {
    // rotl(1 + 4, 7) + 1 = 641, exact; the second from the state (7, 0, 1026, 12288): rotl(12295, 7) + 7 = 1573767, exact.
    const state = Int32Array.of(1, 2, 3, 4);
    expect(nextWord(state)).toBe(641);
    expect([...state]).toEqual([7, 0, 1026, 12288]);
    expect(nextWord(state)).toBe(1573767);
  });

  it('gives the same numbers for the same seed and stream, and others for another stream or seed', () => {
    const draw = (seed: number, stream: number) => Array.from({ length: 8 }, randomStream(seed, stream).uint32);
    expect(draw(7, 3)).toEqual(draw(7, 3));
    const firsts = [0, 1, 2, 3].flatMap((seed) => [0, 1, 2, 3].map((stream) => draw(seed, stream)[0]));
    expect(new Set(firsts).size).toBe(16);
  });

  it('has uniform mean, variance and serial correlation, and unrelated neighboring streams (five standard errors)', () => {
    const n = 200_000;
    const [one, two] = [randomStream(11, 0), randomStream(11, 1)];
    let sum = 0;
    let squares = 0;
    let serial = 0;
    let cross = 0;
    let last = 0.5;
    let inside = true;
    for (let i = 0; i < n; i++) {
      const u = one.uniform();
      const v = two.uniform();
      inside &&= u > 0 && u < 1;
      sum += u - 0.5;
      squares += (u - 0.5) ** 2;
      serial += (u - 0.5) * (last - 0.5);
      cross += (u - 0.5) * (v - 0.5);
      last = u;
    }
    expect(inside).toBe(true);
    const error = 1 / Math.sqrt(n);
    expect(Math.abs(sum / n)).toBeLessThan(5 * Math.sqrt(1 / 12) * error);
    expect(Math.abs(squares / n - 1 / 12)).toBeLessThan(5 * Math.sqrt(1 / 180) * error);
    expect(Math.abs(serial / n)).toBeLessThan((5 / 12) * error);
    expect(Math.abs(cross / n)).toBeLessThan((5 / 12) * error);
  });

  it('draws integers below a count evenly (chi-square of 9 cells under 33.7, the 1 in 10 000 point of 8 degrees)', () => {
    const stream = randomStream(5);
    const cells = new Float64Array(9);
    for (let i = 0; i < 90_000; i++) cells[stream.integerBelow(9)]! += 1;
    const chiSquare = cells.reduce((sum, count) => sum + (count - 10_000) ** 2 / 10_000, 0);
    expect(chiSquare).toBeLessThan(33.7);
  });
});
