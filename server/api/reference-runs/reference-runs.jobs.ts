import { answerRun, planRun } from '../../../domain/transport/monte-carlo.js';
import type { Db } from '../../db/database.js';
import type { JobQueue } from '../../jobs/job-queue.js';
import type { PhotonPool } from '../../workers/pool.js';
import { OutOfTimeError, progressFraction, pursueRun } from '../../workers/pursue-run.js';
import { presentAnswer, type RunPlanRecord } from './reference-runs.present.js';
import { endRun, forgetRunState, saveRunState, takeRun, unfinishedRunIds } from './reference-runs.store.js';

/** Raise it when the walk changes, so that no run mixes photons of two kinds. */
export const engine = 1;

const saveEveryMs = 1000;

export interface RunParts {
  readonly db: Db;
  readonly now: () => Date;
  readonly pool: PhotonPool;
  readonly reportFailure: (id: string, error: unknown) => void;
}

/** Works on one run until it ends or is aborted; an aborted run that nobody cancelled stays unfinished for the next process. */
export async function workOnRun({ db, now, pool, reportFailure }: RunParts, id: string, signal: AbortSignal): Promise<void> {
  let keep = () => {};
  try {
    const taken = takeRun(db, id);
    if (!taken) return;
    const record = JSON.parse(taken.run.plan) as RunPlanRecord;
    const { order } = record;
    let start = taken.state;
    if (taken.run.engine !== engine) {
      forgetRunState(db, id, engine);
      start = null;
    }
    let savedMs = Number.NEGATIVE_INFINITY;
    const { state, stoppedBy } = await pursueRun(order, start, pool, signal, (reached) => {
      keep = () => saveRunState(db, id, reached, progressFraction(order, reached));
      if (performance.now() - savedMs < saveEveryMs) return;
      savedMs = performance.now();
      keep();
    });
    saveRunState(db, id, state, 1);
    const plan = planRun(order.question);
    const answer = answerRun(plan, state.tally, order.photonsPerChunk);
    const result = presentAnswer(record, answer, plan.resolutionsUm, stoppedBy, state.elapsedS);
    endRun(db, id, { status: 'done', finishedAt: now().toISOString(), result: JSON.stringify(result) });
  } catch (error) {
    try {
      if (signal.aborted) {
        keep();
        return;
      }
      const ranOut = error instanceof OutOfTimeError;
      if (!ranOut) reportFailure(id, error);
      const failure = ranOut ? error.message : 'The run broke off inside; the log has the reason. Send the request again.';
      endRun(db, id, { status: 'failed', finishedAt: now().toISOString(), failure });
    } catch (storing) {
      reportFailure(id, storing);
    }
  }
}

/** Queues what an earlier process left unfinished. */
export function resumeRuns(db: Db, queue: JobQueue): void {
  for (const id of unfinishedRunIds(db)) queue.offer(id, true);
}
