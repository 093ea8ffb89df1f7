import { setImmediate as breathe } from 'node:timers/promises';
import { chainOf, entriesAfter, type StoredEntry, sealedRows } from '../../audit/audit.store.js';
import { type AuditedTable, auditedTableNames, auditedTables } from '../../audit/audited-tables.js';
import type { ChainState } from '../../audit/chain.js';
import { type Checkpoint, makeCheckpoint, storedCheckpoints, storedKeys } from '../../audit/checkpoint.js';
import { type Verification, verifyChain } from '../../audit/verify.js';
import type { Actor } from '../../http/actor.js';
import { RequestError } from '../../http/request-error.js';
import type { Parts } from '../../parts.js';

export function listEntries({ db, access }: Parts, { clinicId }: Actor, after: number, count: number): StoredEntry[] {
  access.flush();
  return entriesAfter(db, chainOf(clinicId), after, count);
}

export function verify({ db, access }: Parts, { clinicId }: Actor, kept: readonly ChainState[]): Promise<Verification> {
  access.flush();
  return verifyChain(db, clinicId, kept);
}

export type PublishedCheckpoint = Checkpoint & { readonly publicKey: string };

export function checkpointNow({ db, access, now }: Parts, { clinicId }: Actor): PublishedCheckpoint {
  access.flush();
  const checkpoint = makeCheckpoint(db, clinicId, now);
  if (!checkpoint) throw new RequestError('conflict', 'The chain is empty; there is nothing to sign yet.');
  return published(checkpoint, keysById(db));
}

export function listCheckpoints({ db }: Parts, { clinicId }: Actor, after: number, count: number): PublishedCheckpoint[] {
  const keys = keysById(db);
  return storedCheckpoints(db, chainOf(clinicId), after, count).map((checkpoint) => published(checkpoint, keys));
}

const keysById = (db: Parts['db']) => new Map(storedKeys(db).map(({ id, publicPem }) => [id, publicPem]));

function published(checkpoint: Checkpoint, keys: ReadonlyMap<string, string>): PublishedCheckpoint {
  return { ...checkpoint, publicKey: keys.get(checkpoint.keyId) ?? '' };
}

export const exportVersion = 1;

/** The chain as lines: a header, each entry with the rows it seals behind it, then the checkpoints and their keys. */
export async function* auditLines({ db, access }: Parts, { clinicId }: Actor, withRows: boolean): AsyncGenerator<string> {
  access.flush();
  const chain = chainOf(clinicId);
  yield `${JSON.stringify({ audit: { version: exportVersion, chain, tables: auditedTables } })}\n`;
  const afterRow = new Map<AuditedTable, number>();
  for (let after = 0; ; ) {
    const page = entriesAfter(db, chain, after, 100);
    for (const { rowHashes, ...entry } of page) {
      let lines = `${JSON.stringify({ entry })}\n`;
      for (const { table, count } of withRows ? entry.body.rows : []) {
        const name = auditedTableNames.find((known) => known === table);
        if (!name) continue;
        const range = { clinicId, afterRow: afterRow.get(name) ?? 0, upToSeq: entry.seq, count };
        const rows = sealedRows(db, name, auditedTables[name], range);
        afterRow.set(name, Number(rows[rows.length - 1]?.[0] ?? range.afterRow));
        lines += rows.map(([, , ...cells]) => `${JSON.stringify({ row: [name, ...cells] })}\n`).join('');
      }
      yield lines;
    }
    const last = page[page.length - 1];
    if (!last || page.length < 100) break;
    after = last.seq;
    await breathe();
  }
  for (const key of storedKeys(db)) yield `${JSON.stringify({ key })}\n`;
  for (const checkpoint of storedCheckpoints(db, chain)) yield `${JSON.stringify({ checkpoint })}\n`;
}
