import { keysAndClinics } from './0001-keys-and-clinics.js';
import { referenceRuns } from './0002-reference-runs.js';
import { ownChromophores } from './0003-own-chromophores.js';
import { recordsAndAudit } from './0004-records-and-audit.js';
import type { Migration } from './migration.js';

/** Every step, in order. */
export const migrations: readonly Migration[] = [keysAndClinics, referenceRuns, ownChromophores, recordsAndAudit];
