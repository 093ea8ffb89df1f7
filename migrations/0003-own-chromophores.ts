import type { Migration } from './migration.js';

export const ownChromophores: Migration = {
  id: 3,
  name: 'own-chromophores',
  sql: `
    CREATE TABLE own_chromophores (
      row_no INTEGER PRIMARY KEY,
      clinic_id TEXT NOT NULL REFERENCES clinics (id),
      entry_seq INTEGER NOT NULL,
      id TEXT NOT NULL,
      version INTEGER NOT NULL,
      parent_id TEXT,
      at_ms INTEGER,
      recorded_at TEXT NOT NULL,
      content TEXT NOT NULL,
      UNIQUE (id, version)
    ) STRICT;
    CREATE INDEX own_chromophores_by_clinic ON own_chromophores (clinic_id, id, version);
    CREATE TRIGGER own_chromophores_never_changed BEFORE UPDATE ON own_chromophores
      BEGIN SELECT RAISE(ABORT, 'own_chromophores is append-only'); END;
    CREATE TRIGGER own_chromophores_never_deleted BEFORE DELETE ON own_chromophores
      BEGIN SELECT RAISE(ABORT, 'own_chromophores is append-only'); END;
  `,
};
