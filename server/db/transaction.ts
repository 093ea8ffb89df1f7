import type { Db } from './database.js';

/** Runs `work` in one immediate transaction: all of it or nothing, on disk when this returns. */
export function immediately<T>(db: Db, work: () => T): T {
  db.exec('BEGIN IMMEDIATE');
  try {
    const result = work();
    db.exec('COMMIT');
    return result;
  } catch (error) {
    if (db.inTransaction) db.exec('ROLLBACK');
    throw error;
  }
}
