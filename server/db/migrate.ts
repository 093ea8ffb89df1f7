import type Database from 'better-sqlite3';
import { migrations } from '../../migrations/index.js';
import { DatabaseError } from './database-error.js';

/** Applies the steps that are missing, each in its own transaction. Refuses a database made by a newer program. */
export function migrate(db: Database.Database, now: () => Date): void {
  db.exec(
    'CREATE TABLE IF NOT EXISTS schema_steps (id INTEGER PRIMARY KEY, name TEXT NOT NULL, applied_at TEXT NOT NULL) STRICT',
  );
  const applied = db.prepare('SELECT max(id) AS last FROM schema_steps').get() as { last: number | null };
  const last = applied.last ?? 0;
  const newest = migrations[migrations.length - 1]!.id;
  if (last > newest) {
    throw new DatabaseError(
      `the database was made by a newer program (step ${last}, this program knows ${newest}); use that program or a backup`,
    );
  }
  const record = db.prepare('INSERT INTO schema_steps (id, name, applied_at) VALUES (?, ?, ?)');
  for (const step of migrations) {
    if (step.id <= last) continue;
    db.transaction(() => {
      db.exec(step.sql);
      record.run(step.id, step.name, now().toISOString());
    }).immediate();
  }
}
