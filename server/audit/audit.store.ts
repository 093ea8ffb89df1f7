import type { Db } from '../db/database.js';
import { prepared } from '../db/prepared.js';
import { type AuditEntry, type ChainState, chainStart } from './chain.js';

/** The chain of what belongs to no clinic. */
export const installationChain = 'installation';

export const chainOf = (clinicId: string | null): string => clinicId ?? installationChain;

export interface StoredEntry extends AuditEntry {
  /** Hashes of the rows of each sealed table, one after another. */
  readonly rowHashes: Uint8Array | null;
}

interface EntryRow {
  readonly chain: string;
  readonly seq: number;
  readonly at: string;
  readonly actor: string;
  readonly kind: string;
  readonly subject: string;
  readonly body: string;
  readonly prevHash: string;
  readonly hash: string;
  readonly rowHashes: Uint8Array | null;
}

const columns = 'chain, seq, at, actor, kind, subject, body, prev_hash AS prevHash, hash, row_hashes AS rowHashes';

export function headOf(db: Db, chain: string): ChainState {
  const sql = 'SELECT seq, hash FROM audit_heads WHERE chain = ?';
  return (prepared(db, sql).get(chain) as ChainState | undefined) ?? chainStart;
}

/** Moves the head from one entry to the next; false when another writer has moved it. */
export function moveHead(db: Db, chain: string, from: ChainState, to: ChainState): boolean {
  if (from.seq === 0) {
    const sql = 'INSERT INTO audit_heads (chain, seq, hash) VALUES (?, ?, ?) ON CONFLICT DO NOTHING';
    return prepared(db, sql).run(chain, to.seq, to.hash).changes === 1;
  }
  const sql = 'UPDATE audit_heads SET seq = ?, hash = ? WHERE chain = ? AND seq = ? AND hash = ?';
  return prepared(db, sql).run(to.seq, to.hash, chain, from.seq, from.hash).changes === 1;
}

export function appendEntry(db: Db, entry: AuditEntry, bodyText: string, rowHashes: Uint8Array | null): void {
  prepared(
    db,
    `INSERT INTO audit_entries (chain, seq, at, actor, kind, subject, body, prev_hash, hash, row_hashes)
     VALUES (?, ?, ?, ?, ?, ?, ?, ?, ?, ?)`,
  ).run(
    entry.chain,
    entry.seq,
    entry.at,
    entry.actor,
    entry.kind,
    entry.subject,
    bodyText,
    entry.prevHash,
    entry.hash,
    rowHashes,
  );
}

export function entriesAfter(db: Db, chain: string, after: number, count: number): StoredEntry[] {
  const sql = `SELECT ${columns} FROM audit_entries WHERE chain = ? AND seq > ? ORDER BY seq LIMIT ?`;
  return (prepared(db, sql).all(chain, after, count) as EntryRow[]).map((row) => ({ ...row, body: readBody(row.body) }));
}

function readBody(text: string): AuditEntry['body'] {
  try {
    return JSON.parse(text) as AuditEntry['body'];
  } catch {
    return { details: text, rows: [] }; // no longer JSON: its hash will not fit
  }
}

/** Cells of sealed rows of one table in the order of storing, after a row and up to an entry. */
export function sealedRows(
  db: Db,
  table: string,
  columnNames: readonly string[],
  range: { readonly clinicId: string | null; readonly afterRow: number; readonly upToSeq: number; readonly count: number },
): (string | number | null)[][] {
  const sql = `SELECT row_no, entry_seq, ${columnNames.join(', ')} FROM ${table}
    WHERE row_no > ? AND clinic_id IS ? AND entry_seq <= ? ORDER BY row_no LIMIT ?`;
  return prepared(db, sql).raw().all(range.afterRow, range.clinicId, range.upToSeq, range.count) as (string | number | null)[][];
}
