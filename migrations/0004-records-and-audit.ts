import type { Migration } from './migration.js';

const recordTables = [
  'clinic_versions',
  'devices',
  'meters',
  'calibrations',
  'checks',
  'services',
  'protocols',
  'approvals',
  'courses',
  'corrections',
  'acknowledgments',
];

const recordTable = (name: string) => `
    CREATE TABLE ${name} (
      row_no INTEGER PRIMARY KEY,
      clinic_id TEXT REFERENCES clinics (id),
      entry_seq INTEGER NOT NULL,
      id TEXT NOT NULL,
      version INTEGER NOT NULL,
      parent_id TEXT,
      at_ms INTEGER,
      recorded_at TEXT NOT NULL,
      content TEXT NOT NULL,
      UNIQUE (id, version)
    ) STRICT;
    CREATE INDEX ${name}_by_clinic ON ${name} (clinic_id, id, version);
    CREATE INDEX ${name}_by_parent ON ${name} (parent_id, at_ms, id) WHERE parent_id IS NOT NULL;`;

const appendOnly = (name: string) => `
    CREATE TRIGGER ${name}_never_changed BEFORE UPDATE ON ${name} BEGIN SELECT RAISE(ABORT, '${name} is append-only'); END;
    CREATE TRIGGER ${name}_never_deleted BEFORE DELETE ON ${name} BEGIN SELECT RAISE(ABORT, '${name} is append-only'); END;`;

export const recordsAndAudit: Migration = {
  id: 4,
  name: 'records-and-audit',
  sql: `
    CREATE TABLE audit_entries (
      chain TEXT NOT NULL,
      seq INTEGER NOT NULL,
      at TEXT NOT NULL,
      actor TEXT NOT NULL,
      kind TEXT NOT NULL,
      subject TEXT NOT NULL,
      body TEXT NOT NULL,
      prev_hash TEXT NOT NULL,
      hash TEXT NOT NULL,
      row_hashes BLOB,
      PRIMARY KEY (chain, seq)
    ) STRICT;
    CREATE TABLE audit_heads (
      chain TEXT PRIMARY KEY,
      seq INTEGER NOT NULL,
      hash TEXT NOT NULL
    ) STRICT, WITHOUT ROWID;
    CREATE TABLE audit_checkpoints (
      chain TEXT NOT NULL,
      seq INTEGER NOT NULL,
      hash TEXT NOT NULL,
      at TEXT NOT NULL,
      key_id TEXT NOT NULL,
      signature TEXT NOT NULL,
      PRIMARY KEY (chain, seq)
    ) STRICT, WITHOUT ROWID;
    CREATE TABLE signing_keys (
      id TEXT PRIMARY KEY,
      public_pem TEXT NOT NULL,
      private_pem TEXT NOT NULL,
      created_at TEXT NOT NULL
    ) STRICT;
    ${recordTables.map(recordTable).join('')}
    CREATE UNIQUE INDEX acknowledgments_once ON acknowledgments (parent_id);
    CREATE TABLE exposures (
      row_no INTEGER PRIMARY KEY,
      clinic_id TEXT NOT NULL REFERENCES clinics (id),
      entry_seq INTEGER NOT NULL,
      id TEXT NOT NULL UNIQUE,
      device_id TEXT NOT NULL,
      external_id TEXT NOT NULL,
      at_ms INTEGER NOT NULL,
      course_id TEXT,
      site TEXT,
      recorded_at TEXT NOT NULL,
      content TEXT NOT NULL,
      delivered_fluence_j_per_cm2 REAL NOT NULL,
      low_j_per_cm2 REAL NOT NULL,
      high_j_per_cm2 REAL NOT NULL,
      calibration_ids TEXT NOT NULL,
      model TEXT NOT NULL,
      UNIQUE (device_id, external_id)
    ) STRICT;
    CREATE INDEX exposures_by_time ON exposures (clinic_id, at_ms, row_no);
    CREATE INDEX exposures_by_device ON exposures (device_id, at_ms, row_no);
    CREATE INDEX exposures_by_course ON exposures (course_id, at_ms, row_no) WHERE course_id IS NOT NULL;
    CREATE TABLE alerts (
      row_no INTEGER PRIMARY KEY,
      clinic_id TEXT NOT NULL REFERENCES clinics (id),
      entry_seq INTEGER NOT NULL,
      id TEXT NOT NULL UNIQUE,
      rule TEXT NOT NULL,
      severity TEXT NOT NULL CHECK (severity IN ('low', 'moderate', 'high')),
      device_id TEXT NOT NULL,
      exposure_id TEXT,
      course_id TEXT,
      at_ms INTEGER NOT NULL,
      recorded_at TEXT NOT NULL,
      content TEXT NOT NULL
    ) STRICT;
    CREATE INDEX alerts_by_clinic ON alerts (clinic_id, id);
    CREATE INDEX alerts_by_rule ON alerts (clinic_id, rule, id);
    CREATE INDEX alerts_by_device ON alerts (device_id, id);
    CREATE INDEX alerts_by_exposure ON alerts (exposure_id, id) WHERE exposure_id IS NOT NULL;
    CREATE TABLE open_alerts (
      clinic_id TEXT NOT NULL,
      alert_id TEXT NOT NULL,
      PRIMARY KEY (clinic_id, alert_id)
    ) STRICT, WITHOUT ROWID;
    CREATE TABLE outbox (
      id INTEGER PRIMARY KEY,
      clinic_id TEXT NOT NULL,
      topic TEXT NOT NULL,
      subject_id TEXT NOT NULL,
      created_at TEXT NOT NULL,
      attempts INTEGER NOT NULL DEFAULT 0,
      next_attempt_at TEXT,
      settled_at TEXT
    ) STRICT;
    CREATE INDEX outbox_unsettled ON outbox (next_attempt_at, id) WHERE settled_at IS NULL;
    ${[...recordTables, 'audit_entries', 'audit_checkpoints', 'exposures', 'alerts'].map(appendOnly).join('')}
  `,
};
