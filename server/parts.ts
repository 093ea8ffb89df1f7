import { createHash } from 'node:crypto';
import type { FastifyBaseLogger } from 'fastify';
import { Registry } from 'prom-client';
import type { ReferenceData } from '../domain/reference/reference-data.js';
import { type LightFields, makeLightFields } from '../domain/transport/light-field.js';
import { type AccessLog, openAccessLog } from './audit/access-log.js';
import { type Ledger, openLedger } from './audit/with-audit.js';
import type { Config } from './config.js';
import { type Db, openDatabase } from './db/database.js';
import { loadReferenceData } from './reference/load.js';

/** What every room is built from. */
export interface Parts {
  readonly config: Config;
  readonly log: FastifyBaseLogger;
  readonly db: Db;
  readonly reference: ReferenceData;
  readonly dataVersion: { readonly name: string; readonly version: string; readonly sha256: string };
  readonly now: () => Date;
  /** The one way to change a clinic's records. */
  readonly ledger: Ledger;
  /** Notes who reads what of people. */
  readonly access: AccessLog;
  readonly metrics: Registry;
  /** Solved light fields, kept by their optics. */
  readonly lightFields: LightFields;
  /** Run at the end, last opened first. */
  readonly closing: (() => void | Promise<void>)[];
}

const keptLightFields = 400; // about 0.1 MB each: more than two rankings of 141 wavelengths

/** Opens database and reference data. Throws errors whose message is one clear line. */
export function openParts(options: {
  readonly config: Config;
  readonly log: FastifyBaseLogger;
  readonly dataFolder: string;
  readonly now: () => Date;
}): Parts {
  const { config, log, now } = options;
  const reference = loadReferenceData(options.dataFolder);
  const db = openDatabase(config.databaseFile, now);
  const all = createHash('sha256')
    .update(reference.files.map((file) => `${file.name} ${file.sha256}\n`).join(''))
    .digest('hex');
  const version = [...reference.files.map((file) => file.version)].sort().at(-1) ?? '';
  const ledger = openLedger(db, now);
  const access = openAccessLog(ledger, now, (error) => log.error({ err: error }, 'access log could not be written'));
  return {
    config,
    log,
    db,
    ledger,
    access,
    reference,
    dataVersion: { name: 'reference-data', version, sha256: all },
    now,
    metrics: new Registry(),
    lightFields: makeLightFields(keptLightFields),
    closing: [() => void db.close(), () => access.close()],
  };
}

export async function closeParts(parts: Parts): Promise<void> {
  for (const close of [...parts.closing].reverse()) await close();
}
