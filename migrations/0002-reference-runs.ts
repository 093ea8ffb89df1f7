import type { Migration } from './migration.js';

export const referenceRuns: Migration = {
  id: 2,
  name: 'reference-runs',
  sql: `
    CREATE TABLE reference_runs (
      id TEXT PRIMARY KEY,
      clinic_id TEXT REFERENCES clinics (id),
      created_at TEXT NOT NULL,
      status TEXT NOT NULL CHECK (status IN ('queued', 'running', 'done', 'failed', 'cancelled')),
      plan TEXT NOT NULL,
      engine INTEGER NOT NULL,
      chunks INTEGER NOT NULL DEFAULT 0,
      tally BLOB,
      elapsed_s REAL NOT NULL DEFAULT 0,
      progress_fraction REAL NOT NULL DEFAULT 0,
      finished_at TEXT,
      result TEXT,
      failure TEXT
    ) STRICT;
    CREATE INDEX reference_runs_by_clinic ON reference_runs (clinic_id, id);
    CREATE INDEX reference_runs_unfinished ON reference_runs (id) WHERE status IN ('queued', 'running');
  `,
};
