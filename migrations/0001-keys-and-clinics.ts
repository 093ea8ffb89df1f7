import type { Migration } from './migration.js';

export const keysAndClinics: Migration = {
  id: 1,
  name: 'keys-and-clinics',
  sql: `
    CREATE TABLE clinics (
      id TEXT PRIMARY KEY,
      name TEXT NOT NULL,
      created_at TEXT NOT NULL,
      version INTEGER NOT NULL DEFAULT 1
    ) STRICT;
    CREATE TABLE api_keys (
      id TEXT PRIMARY KEY,
      clinic_id TEXT REFERENCES clinics (id),
      label TEXT NOT NULL,
      role TEXT NOT NULL CHECK (role IN ('reader', 'operator', 'physicist', 'administrator')),
      secret_sha256 TEXT NOT NULL UNIQUE,
      created_at TEXT NOT NULL,
      revoked_at TEXT
    ) STRICT;
    CREATE INDEX api_keys_by_clinic ON api_keys (clinic_id, id);
    CREATE TABLE idempotent_replies (
      scope TEXT NOT NULL,
      idempotency_key TEXT NOT NULL,
      request_sha256 TEXT NOT NULL,
      status INTEGER,
      headers TEXT,
      body BLOB,
      created_at TEXT NOT NULL,
      PRIMARY KEY (scope, idempotency_key)
    ) STRICT, WITHOUT ROWID;
  `,
};
