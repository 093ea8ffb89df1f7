import type { Tally } from '../../../domain/transport/tally.js';
import type { Db } from '../../db/database.js';
import type { RunState } from '../../workers/pursue-run.js';

export type RunStatus = 'queued' | 'running' | 'done' | 'failed' | 'cancelled';

export interface StoredRun {
  readonly id: string;
  readonly clinicId: string | null;
  readonly createdAt: string;
  readonly finishedAt: string | null;
  readonly status: RunStatus;
  readonly progressFraction: number;
  readonly chunks: number;
  readonly plan: string;
  readonly engine: number;
  readonly result: string | null;
  readonly failure: string | null;
}

const columns = `id, clinic_id AS clinicId, created_at AS createdAt, finished_at AS finishedAt, status,
  progress_fraction AS progressFraction, chunks, plan, engine, result, failure`;

export function insertRun(
  db: Db,
  run: { id: string; clinicId: string | null; createdAt: string; plan: string; engine: number },
): void {
  db.prepare(
    `INSERT INTO reference_runs (id, clinic_id, created_at, status, plan, engine)
     VALUES (@id, @clinicId, @createdAt, 'queued', @plan, @engine)`,
  ).run(run);
}

export function findRun(db: Db, clinicId: string | null, id: string): StoredRun | undefined {
  return db.prepare(`SELECT ${columns} FROM reference_runs WHERE id = ? AND clinic_id IS ?`).get(id, clinicId) as
    | StoredRun
    | undefined;
}

/** Newest first. */
export function listRuns(db: Db, clinicId: string | null, before: string | null, limit: number): StoredRun[] {
  return db
    .prepare(`SELECT ${columns} FROM reference_runs WHERE clinic_id IS ? AND id < ? ORDER BY id DESC LIMIT ?`)
    .all(clinicId, before ?? '~', limit) as StoredRun[];
}

/** Runs that a process left unfinished, oldest first. */
export function unfinishedRunIds(db: Db): string[] {
  return db.prepare(`SELECT id FROM reference_runs WHERE status IN ('queued', 'running') ORDER BY id`).pluck().all() as string[];
}

/** The run to work on, with what it has so far; undefined when it is finished or cancelled. */
export function takeRun(db: Db, id: string): { run: StoredRun; state: RunState | null } | undefined {
  const row = db
    .prepare(
      `UPDATE reference_runs SET status = 'running' WHERE id = ? AND status IN ('queued', 'running') RETURNING ${columns}, tally, elapsed_s AS elapsedS`,
    )
    .get(id) as (StoredRun & { tally: Buffer | null; elapsedS: number }) | undefined;
  if (!row) return undefined;
  return { run: row, state: row.tally ? { tally: readTally(row.chunks, row.tally), elapsedS: row.elapsedS } : null };
}

export function saveRunState(db: Db, id: string, { tally, elapsedS }: RunState, progressFraction: number): void {
  db.prepare(
    `UPDATE reference_runs SET chunks = ?, tally = ?, elapsed_s = ?, progress_fraction = ? WHERE id = ? AND status = 'running'`,
  ).run(tally.chunks, writeTally(tally), elapsedS, progressFraction, id);
}

export function forgetRunState(db: Db, id: string, engine: number): void {
  db.prepare(`UPDATE reference_runs SET chunks = 0, tally = NULL, elapsed_s = 0, engine = ? WHERE id = ?`).run(engine, id);
}

/** Ends a run that is not ended yet; false when it was. */
export function endRun(
  db: Db,
  id: string,
  end: { status: 'done' | 'failed' | 'cancelled'; finishedAt: string; result?: string; failure?: string },
): boolean {
  const progress = end.status === 'done' ? ', progress_fraction = 1' : '';
  const { changes } = db
    .prepare(
      `UPDATE reference_runs SET status = ?, finished_at = ?, result = ?, failure = ?, tally = NULL${progress}
       WHERE id = ? AND status IN ('queued', 'running')`,
    )
    .run(end.status, end.finishedAt, end.result ?? null, end.failure ?? null, id);
  return changes === 1;
}

function writeTally({ means, scatters }: Tally): Buffer {
  const both = new Float64Array(2 * means.length);
  both.set(means);
  both.set(scatters, means.length);
  return Buffer.from(both.buffer);
}

function readTally(chunks: number, bytes: Buffer): Tally {
  const both = new Float64Array(new Uint8Array(bytes).buffer);
  const half = both.length / 2;
  return { chunks, means: both.slice(0, half), scatters: both.slice(half) };
}
