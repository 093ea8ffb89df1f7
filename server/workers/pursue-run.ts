import { setMaxListeners } from 'node:events';
import { figureCount, planRun, type RunQuestion, worstRelativeError } from '../../domain/transport/monte-carlo.js';
import { addChunk, emptyTally, type Tally } from '../../domain/transport/tally.js';
import type { PhotonPool } from './pool.js';

export interface RunOrder {
  readonly question: RunQuestion;
  readonly seed: number;
  readonly photonsPerChunk: number;
  readonly chunkLimit: number;
  /** Relative standard error at which every fluence ratio is good enough; null runs to the limit. */
  readonly standardErrorTarget: number | null;
  readonly maxSeconds: number;
}

export type StopReason = 'photons' | 'standard-error' | 'time';

export interface RunState {
  readonly tally: Tally;
  readonly elapsedS: number;
}

const leastChunks = 50; // below, the standard error itself is known to worse than 10 %
const leastChunksInTime = 10; // to 24 %: poor, but the time is up

/** The time was up before there was an answer with an error to state; its message is for the user. */
export class OutOfTimeError extends Error {}

/** Walks chunks on the pool and adds them by number, so that the sum does not depend on the number of threads.
 *  Goes on from `start`; `onChunk` sees each state in order. Rejects when aborted, leaving the last state seen valid. */
export async function pursueRun(
  order: RunOrder,
  start: RunState | null,
  pool: PhotonPool,
  signal: AbortSignal,
  onChunk: (state: RunState) => void,
): Promise<{ state: RunState; stoppedBy: StopReason }> {
  const plan = planRun(order.question);
  const runKey = JSON.stringify(order.question);
  const before = start?.elapsedS ?? 0;
  const startedMs = performance.now();
  let state: RunState = start ?? { tally: emptyTally(figureCount(plan)), elapsedS: 0 };
  const ahead = new AbortController();
  const either = AbortSignal.any([signal, ahead.signal]);
  setMaxListeners(0, either);
  const waiting = new Map<number, Promise<Float64Array>>();
  let next = state.tally.chunks;
  const launch = () => {
    const { seed, photonsPerChunk: photons } = order;
    const walk = pool.walkChunk({ runKey, question: order.question, seed, chunk: next, photons }, either);
    walk.catch(() => {});
    waiting.set(next++, walk);
  };
  const stoppedBy = (): StopReason | null => {
    const { chunks } = state.tally;
    if (chunks >= order.chunkLimit) return 'photons';
    const { standardErrorTarget, maxSeconds } = order;
    if (standardErrorTarget !== null && chunks >= leastChunks && worstRelativeError(plan, state.tally) <= standardErrorTarget) {
      return 'standard-error';
    }
    if (state.elapsedS < maxSeconds) return null;
    if (chunks >= leastChunksInTime) return 'time';
    throw new OutOfTimeError(
      `Only ${chunks * order.photonsPerChunk} photons could be followed in ${maxSeconds} s, too few to state an error; raise maxSeconds or take less scattering layers.`,
    );
  };
  try {
    for (;;) {
      signal.throwIfAborted();
      const reason = stoppedBy();
      if (reason) return { state, stoppedBy: reason };
      while (waiting.size < 2 * pool.threads && next < order.chunkLimit) launch();
      const { chunks } = state.tally;
      const figures = await waiting.get(chunks)!;
      waiting.delete(chunks);
      state = { tally: addChunk(state.tally, figures), elapsedS: before + (performance.now() - startedMs) / 1000 };
      onChunk(state);
    }
  } finally {
    ahead.abort();
  }
}

/** How near a run is to its stop, 0 to 1, by whichever rule will end it first. */
export function progressFraction(order: RunOrder, state: RunState): number {
  const { tally, elapsedS } = state;
  const parts = [tally.chunks / order.chunkLimit, elapsedS / order.maxSeconds];
  if (order.standardErrorTarget !== null && tally.chunks >= 2) {
    const worst = worstRelativeError(planRun(order.question), tally);
    parts.push((order.standardErrorTarget / worst) ** 2);
  }
  return Math.min(1, Math.max(...parts));
}
