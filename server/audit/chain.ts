import { canonicalJson, sha256Hex } from '../codecs/canonical-json.js';

/** What one entry says of the rows that were stored with it: their table, number and hash. */
export interface RowsSeal {
  readonly table: string;
  readonly count: number;
  /** SHA-256 over the hashes of the rows, 32 bytes each, in the order they were stored. */
  readonly sha256: string;
}

export interface AuditBody {
  readonly details: unknown;
  readonly rows: readonly RowsSeal[];
}

/** One link of a clinic's chain. `hash` covers everything else. */
export interface AuditEntry {
  readonly chain: string;
  readonly seq: number;
  readonly at: string;
  readonly actor: string;
  readonly kind: string;
  readonly subject: string;
  readonly body: AuditBody;
  readonly prevHash: string;
  readonly hash: string;
}

/** Before the first entry. */
export const genesisHash = '0'.repeat(64);

export function entryHash({ chain, seq, at, actor, kind, subject, body, prevHash }: Omit<AuditEntry, 'hash'>): string {
  return sha256Hex(canonicalJson({ chain, seq, at, actor, kind, subject, body, prevHash }));
}

export type Cell = string | number | null;

/** The canonical text of a row: the JSON array of its table and cells. */
export function rowText(table: string, cells: readonly Cell[]): string {
  return JSON.stringify([table, ...cells]);
}

export type Defect =
  | 'malformed-entry'
  | 'wrong-sequence'
  | 'broken-link'
  | 'wrong-hash'
  | 'wrong-rows'
  | 'missing-rows'
  | 'unsealed-rows'
  | 'wrong-head'
  | 'checkpoint-differs'
  | 'wrong-signature'
  | 'unreadable';

/** The first thing found wrong: the entry, the row where it is known, and in words. */
export interface Broken {
  readonly seq: number;
  readonly defect: Defect;
  readonly detail: string;
  readonly table?: string;
  readonly rowIndex?: number;
  readonly rowId?: string;
}

export interface ChainState {
  readonly seq: number;
  readonly hash: string;
}

export const chainStart: ChainState = Object.freeze({ seq: 0, hash: genesisHash });

/** Takes one more entry to a checked chain, or says what is wrong with it. */
export function nextLink(state: ChainState, entry: AuditEntry): ChainState | Broken {
  const seq = state.seq + 1;
  if (!isEntry(entry))
    return { seq, defect: 'malformed-entry', detail: `entry ${seq} lacks fields or has them of the wrong kind` };
  if (entry.seq !== seq)
    return { seq, defect: 'wrong-sequence', detail: `entry ${seq} is missing; entry ${entry.seq} stands in its place` };
  if (entry.prevHash !== state.hash)
    return { seq, defect: 'broken-link', detail: `entry ${seq} does not name the hash of entry ${state.seq}` };
  if (entryHash(entry) !== entry.hash)
    return { seq, defect: 'wrong-hash', detail: `the content of entry ${seq} does not give its hash` };
  return { seq, hash: entry.hash };
}

export function isBroken(result: ChainState | Broken): result is Broken {
  return 'defect' in result;
}

function isEntry(entry: AuditEntry): boolean {
  const texts = [entry.chain, entry.at, entry.actor, entry.kind, entry.subject, entry.prevHash, entry.hash];
  return texts.every((text) => typeof text === 'string') && Number.isSafeInteger(entry.seq) && Array.isArray(entry.body?.rows);
}

/** Checks the rows of one entry by their hashes (32 bytes each). `storedHashes` are those kept beside the entry: they name the row. */
export function checkRows(seq: number, seal: RowsSeal, rowHashes: Uint8Array, storedHashes: Uint8Array | null): Broken | null {
  const { table, count } = seal;
  const found = rowHashes.length / 32;
  const stored = storedHashes !== null && sha256Hex(storedHashes) === seal.sha256 ? storedHashes : null;
  if (sha256Hex(rowHashes) === seal.sha256) {
    if (stored !== null || storedHashes === null) return null;
    return { seq, defect: 'wrong-rows', table, detail: `the row hashes kept with entry ${seq} were changed; its rows are sound` };
  }
  const rowIndex = stored ? firstDifference(rowHashes, stored) : undefined;
  const named = rowIndex === undefined ? {} : { rowIndex };
  if (found < count)
    return {
      seq,
      defect: 'missing-rows',
      table,
      detail: `entry ${seq} sealed ${count} rows of ${table}; ${found} are left`,
      ...named,
    };
  if (found > count)
    return {
      seq,
      defect: 'unsealed-rows',
      table,
      detail: `entry ${seq} sealed ${count} rows of ${table}; there are ${found}`,
      ...named,
    };
  return { seq, defect: 'wrong-rows', table, detail: `a row of ${table} differs from what entry ${seq} sealed`, ...named };
}

function firstDifference(a: Uint8Array, b: Uint8Array): number {
  const most = Math.min(a.length, b.length);
  let i = 0;
  while (i < most && a[i] === b[i]) i++;
  return Math.floor(i / 32);
}
