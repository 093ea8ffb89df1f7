import { hash } from 'node:crypto';
import { setImmediate as breathe } from 'node:timers/promises';
import type { Db } from '../db/database.js';
import { prepared } from '../db/prepared.js';
import { chainOf, entriesAfter, headOf, type StoredEntry, sealedRows } from './audit.store.js';
import { type AuditedTable, auditedTableNames, auditedTables } from './audited-tables.js';
import { type Broken, type Cell, type ChainState, chainStart, checkRows, isBroken, nextLink, rowText } from './chain.js';
import { type Checkpoint, storedCheckpoints, storedKeys, verifyCheckpoint } from './checkpoint.js';

export interface Verification {
  readonly ok: boolean;
  readonly chain: string;
  readonly entries: number;
  readonly rows: number;
  readonly head: ChainState;
  readonly broken: Broken | null;
}

const pageSize = 200;

/** Checks the whole chain of a clinic, every row it seals, its head and its checkpoints. Lets other work through between pages. */
export async function verifyChain(db: Db, clinicId: string | null, kept: readonly ChainState[] = []): Promise<Verification> {
  const chain = chainOf(clinicId);
  const walk = { state: chainStart, rows: 0 };
  let broken: Broken | null;
  try {
    broken = await findBreak(db, clinicId, kept, walk);
  } catch (error) {
    if (!String((error as { code?: string }).code).startsWith('SQLITE_')) throw error;
    const seq = walk.state.seq + 1;
    broken = { seq, defect: 'unreadable', detail: `the database is damaged at or after entry ${seq}` };
  }
  return { ok: broken === null, chain, entries: walk.state.seq, rows: walk.rows, head: walk.state, broken };
}

async function findBreak(
  db: Db,
  clinicId: string | null,
  kept: readonly ChainState[],
  walk: { state: ChainState; rows: number },
): Promise<Broken | null> {
  const chain = chainOf(clinicId);
  const head = headOf(db, chain);
  const late = rowsBeyond(db, clinicId, head.seq);
  const marks = new Map<number, string[]>();
  const checkpoints = storedCheckpoints(db, chain);
  const badSignature = firstBadSignature(db, checkpoints);
  for (const { seq, hash: known } of [...checkpoints, ...kept]) marks.set(seq, [...(marks.get(seq) ?? []), known]);
  const cursors = new Map(auditedTableNames.map((table) => [table, new RowCursor(db, table, clinicId, head.seq)]));
  for (;;) {
    const page = entriesAfter(db, chain, walk.state.seq, pageSize);
    for (const entry of page) {
      if (entry.seq > head.seq) break;
      const next = nextLink(walk.state, entry);
      if (isBroken(next)) return next;
      if (marks.get(next.seq)?.some((known) => known !== next.hash))
        return {
          seq: next.seq,
          defect: 'checkpoint-differs',
          detail: `entry ${next.seq} is not the one that a checkpoint names`,
        };
      const wrong = checkSealed(entry, cursors, walk);
      if (wrong) return wrong;
      walk.state = next;
    }
    if (page.length < pageSize || walk.state.seq >= head.seq) break;
    await breathe();
  }
  const { seq, hash: lastHash } = walk.state;
  if (seq !== head.seq || lastHash !== head.hash)
    return { seq: seq + 1, defect: 'wrong-head', detail: `the chain ends at entry ${seq}, its head says ${head.seq}` };
  const beyond = [...marks.keys()].filter((mark) => mark > seq);
  if (beyond.length > 0)
    return {
      seq: seq + 1,
      defect: 'checkpoint-differs',
      detail: `entry ${seq + 1} is missing: a checkpoint names entry ${Math.max(...beyond)}`,
    };
  return late ?? leftover(cursors) ?? badSignature;
}

function checkSealed(entry: StoredEntry, cursors: Map<AuditedTable, RowCursor>, walk: { rows: number }): Broken | null {
  let offset = 0;
  for (const [table, cursor] of cursors) {
    const { hashes, ids, stray } = cursor.take(entry.seq);
    if (stray !== null) return strayRows(stray, table);
    const seal = entry.body.rows.find((candidate) => candidate.table === table);
    if (!seal && ids.length > 0) return strayRows(entry.seq, table);
    if (!seal) continue;
    const bytes = seal.count * 32;
    const kept = entry.rowHashes?.subarray(offset, offset + bytes) ?? new Uint8Array(0);
    offset += bytes;
    const wrong = checkRows(entry.seq, seal, hashes, kept);
    if (wrong) {
      const rowId = wrong.rowIndex === undefined || wrong.defect !== 'wrong-rows' ? undefined : ids[wrong.rowIndex];
      return rowId === undefined ? wrong : { ...wrong, rowId };
    }
    walk.rows += ids.length;
  }
  return null;
}

const strayRows = (seq: number, table: string): Broken => ({
  seq,
  defect: 'unsealed-rows',
  table,
  detail: `there are rows of ${table} that entry ${seq} does not seal`,
});

/** Walks the rows of one table in the order of storing, entry by entry. */
class RowCursor {
  #page: (string | number | null)[][] = [];
  #at = 0;
  #afterRow = 0;
  #ended = false;

  constructor(
    readonly db: Db,
    readonly table: AuditedTable,
    readonly clinicId: string | null,
    readonly upToSeq: number,
  ) {}

  peek(): (string | number | null)[] | undefined {
    if (this.#at === this.#page.length && !this.#ended) {
      const range = { clinicId: this.clinicId, afterRow: this.#afterRow, upToSeq: this.upToSeq, count: 1000 };
      this.#page = sealedRows(this.db, this.table, auditedTables[this.table], range);
      this.#at = 0;
      this.#ended = this.#page.length < 1000;
      this.#afterRow = Number(this.#page[this.#page.length - 1]?.[0] ?? this.#afterRow);
    }
    return this.#page[this.#at];
  }

  take(seq: number): { hashes: Uint8Array; ids: string[]; stray: number | null } {
    const hashes: string[] = [];
    const ids: string[] = [];
    for (let row = this.peek(); row !== undefined && Number(row[1]) <= seq; row = this.peek()) {
      if (row[1] !== seq) return { hashes: new Uint8Array(0), ids, stray: Number(row[1]) };
      hashes.push(hash('sha256', rowText(this.table, row.slice(2) as Cell[]), 'hex'));
      ids.push(String(row[2]));
      this.#at++;
    }
    return { hashes: Buffer.from(hashes.join(''), 'hex'), ids, stray: null };
  }
}

function leftover(cursors: Map<AuditedTable, RowCursor>): Broken | null {
  for (const [table, cursor] of cursors) {
    const row = cursor.peek();
    if (row) return strayRows(Number(row[1]), table);
  }
  return null;
}

// Rows that name an entry after the head: their entry was cut off.
function rowsBeyond(db: Db, clinicId: string | null, headSeq: number): Broken | null {
  for (const table of auditedTableNames) {
    const sql = `SELECT entry_seq AS seq FROM ${table} WHERE clinic_id IS ? ORDER BY row_no DESC LIMIT 1`;
    const row = prepared(db, sql).get(clinicId) as { seq: number } | undefined;
    if (row && row.seq > headSeq)
      return { ...strayRows(headSeq + 1, table), detail: `entry ${headSeq + 1} is missing: rows of ${table} name it` };
  }
  return null;
}

function firstBadSignature(db: Db, checkpoints: readonly Checkpoint[]): Broken | null {
  const keys = new Map(storedKeys(db).map((key) => [key.id, key.publicPem]));
  const bad = checkpoints.find((checkpoint) => !verifyCheckpoint(checkpoint, keys.get(checkpoint.keyId) ?? ''));
  return bad
    ? { seq: bad.seq, defect: 'wrong-signature', detail: `the checkpoint at entry ${bad.seq} has a wrong signature` }
    : null;
}
