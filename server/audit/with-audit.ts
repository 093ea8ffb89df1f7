import { createHash, hash } from 'node:crypto';
import { canonicalJson } from '../codecs/canonical-json.js';
import type { Db } from '../db/database.js';
import { prepared } from '../db/prepared.js';
import type { Reader } from '../db/reader.js';
import { immediately } from '../db/transaction.js';
import type { Actor } from '../http/actor.js';
import { appendEntry, chainOf, headOf, moveHead } from './audit.store.js';
import { type AuditedTable, auditedTables } from './audited-tables.js';
import { type AuditEntry, type Cell, entryHash, type RowsSeal, rowText } from './chain.js';

/** Writing for one clinic inside one audited change. Only `Ledger.change` makes one, and it is dead once the change is over. */
export interface Writer extends Reader {
  /** When the change happens: `recorded_at` of all its rows. */
  readonly at: string;
  /** Stores a row, cells in the order of its columns, and seals it. False when `onConflict` is ignore and the row is there already. */
  insert(table: AuditedTable, cells: readonly Cell[], onConflict?: 'ignore'): boolean;
  /** Says in the entry what the change is about. */
  note(details: Readonly<Record<string, unknown>>): void;
}

export interface Change {
  readonly clinicId: string | null;
  readonly actor: Pick<Actor, 'keyId'> | 'system';
  readonly kind: string;
  readonly subject: string;
}

export interface Ledger {
  reader(clinicId: string | null): Reader;
  /** Rows and one entry of the chain commit together or not at all. A change that stores and notes nothing leaves no entry. */
  change<T>(change: Change, work: (writer: Writer) => T): T;
}

interface Seal {
  hashes: Buffer;
  count: number;
}

class LiveWriter implements Writer {
  readonly seals = new Map<AuditedTable, Seal>();
  details: Readonly<Record<string, unknown>> | null = null;
  open = true;

  constructor(
    readonly db: Db,
    readonly clinicId: string | null,
    readonly at: string,
    readonly seq: number,
  ) {}

  insert(table: AuditedTable, cells: readonly Cell[], onConflict?: 'ignore'): boolean {
    if (!this.open) throw new Error('the change is over');
    const stored = insertStatement(this.db, table, onConflict === 'ignore').run(this.clinicId, this.seq, cells).changes === 1;
    if (stored) this.#seal(table, cells);
    return stored;
  }

  note(details: Readonly<Record<string, unknown>>): void {
    this.details = { ...this.details, ...details };
  }

  #seal(table: AuditedTable, cells: readonly Cell[]): void {
    let seal = this.seals.get(table);
    if (!seal) {
      seal = { hashes: Buffer.allocUnsafe(1024), count: 0 };
      this.seals.set(table, seal);
    }
    if (seal.hashes.length < (seal.count + 1) * 32) {
      const grown = Buffer.allocUnsafe(seal.hashes.length * 4);
      seal.hashes.copy(grown);
      seal.hashes = grown;
    }
    seal.hashes.write(hash('sha256', rowText(table, cells), 'hex'), seal.count * 32, 'hex');
    seal.count++;
  }
}

function insertStatement(db: Db, table: AuditedTable, ignore: boolean) {
  return prepared(db, (ignore ? ignoringTexts : insertTexts)[table]);
}

const textsOf = (suffix: string) =>
  Object.fromEntries(
    Object.entries(auditedTables).map(([table, columns]) => [
      table,
      `INSERT INTO ${table} (clinic_id, entry_seq, ${columns.join(', ')}) VALUES (?, ?, ${columns.map(() => '?').join(', ')})${suffix}`,
    ]),
  ) as Record<AuditedTable, string>;

const insertTexts = textsOf('');
const ignoringTexts = textsOf(' ON CONFLICT DO NOTHING');

/** The one maker of Writers. */
export function openLedger(db: Db, now: () => Date): Ledger {
  return {
    reader: (clinicId) => ({ db, clinicId }),
    change: ({ clinicId, actor, kind, subject }, work) =>
      immediately(db, () => {
        const chain = chainOf(clinicId);
        const head = headOf(db, chain);
        const writer = new LiveWriter(db, clinicId, now().toISOString(), head.seq + 1);
        const result = work(writer);
        writer.open = false;
        if (writer.seals.size === 0 && writer.details === null) return result;
        const { rows, rowHashes } = sealsOf(writer);
        const body = { details: writer.details, rows };
        const open = {
          chain,
          seq: writer.seq,
          at: writer.at,
          actor: actor === 'system' ? actor : actor.keyId,
          kind,
          subject,
          body,
        };
        const entry: AuditEntry = { ...open, prevHash: head.hash, hash: entryHash({ ...open, prevHash: head.hash }) };
        appendEntry(db, entry, canonicalJson(body), rowHashes);
        if (!moveHead(db, chain, head, entry))
          throw Object.assign(new Error('another writer moved the head'), { code: 'SQLITE_BUSY' });
        return result;
      }),
  };
}

function sealsOf(writer: LiveWriter): { rows: RowsSeal[]; rowHashes: Buffer | null } {
  const rows: RowsSeal[] = [];
  const parts: Buffer[] = [];
  for (const table of Object.keys(auditedTables) as AuditedTable[]) {
    const seal = writer.seals.get(table);
    if (!seal) continue;
    const bytes = seal.hashes.subarray(0, seal.count * 32);
    rows.push({ table, count: seal.count, sha256: createHash('sha256').update(bytes).digest('hex') });
    parts.push(bytes);
  }
  return { rows, rowHashes: parts.length === 0 ? null : Buffer.concat(parts) };
}
