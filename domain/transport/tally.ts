import { assertWithin } from '../quantities/errors.js';

/** Running mean and scatter of figures that each chunk of a run gives once. Chunks hold equally many photons and are
 *  independent, so the scatter between them gives the standard error of the mean (batch means).
 *  Shape: one entry a figure in both arrays. */
export interface Tally {
  readonly chunks: number;
  readonly means: Float64Array;
  /** Sum over chunks of squared distance from the mean. */
  readonly scatters: Float64Array;
}

/** A tally before the first chunk. */
export function emptyTally(figures: number): Tally {
  return { chunks: 0, means: new Float64Array(figures), scatters: new Float64Array(figures) };
}

/** Adds one chunk. The result depends on the order of chunks in its last bits, so chunks are added by their number.
 *  @source Welford1962 eqs. for the corrected sum of squares */
export function addChunk(tally: Tally, figures: ArrayLike<number>): Tally {
  assertWithin('figures in a chunk', figures.length, tally.means.length, tally.means.length);
  const chunks = tally.chunks + 1;
  const means = tally.means.slice();
  const scatters = tally.scatters.slice();
  for (let i = 0; i < means.length; i++) {
    const step = figures[i]! - means[i]!;
    means[i]! += step / chunks;
    scatters[i]! += step * (figures[i]! - means[i]!);
  }
  return { chunks, means, scatters };
}

/** Standard errors of the means. Shape: one a figure. Throws: out-of-range with fewer than two chunks. */
export function standardErrors(tally: Tally): Float64Array {
  assertWithin('chunks', tally.chunks, 2, Number.MAX_SAFE_INTEGER);
  return tally.scatters.map((scatter) => Math.sqrt(scatter / (tally.chunks - 1) / tally.chunks));
}
