import type { Migration } from './migration.js';

export const ownChromophores: Migration = {
  id: 3,
  name: 'own-chromophores',
  sql: `
    CREATE TABLE own_chromophores (
      id TEXT PRIMARY KEY,
      clinic_id TEXT NOT NULL REFERENCES clinics (id),
      created_at TEXT NOT NULL,
      created_by TEXT NOT NULL,
      name TEXT NOT NULL,
      source TEXT NOT NULL,
      measured_at TEXT,
      relative_uncertainty REAL,
      note TEXT NOT NULL,
      wavelengths_nm TEXT NOT NULL,
      absorptions_per_cm TEXT NOT NULL
    ) STRICT;
    CREATE INDEX own_chromophores_by_clinic ON own_chromophores (clinic_id, id);
    CREATE TRIGGER own_chromophores_are_kept BEFORE DELETE ON own_chromophores
      BEGIN SELECT raise(ABORT, 'spectra are never deleted'); END;
    CREATE TRIGGER own_chromophores_stay BEFORE UPDATE ON own_chromophores
      BEGIN SELECT raise(ABORT, 'spectra are never changed'); END;
  `,
};
