import { canonicalJson } from '../codecs/canonical-json.js';
import { prepared } from '../db/prepared.js';
import type { Reader } from '../db/reader.js';
import type { RecordTable } from './audited-tables.js';
import type { Writer } from './with-audit.js';

/** One version of a record. `content` is what its room keeps. */
export interface StoredRecord<C> {
  readonly id: string;
  readonly version: number;
  readonly parentId: string | null;
  readonly atMs: number | null;
  readonly recordedAt: string;
  readonly content: C;
}

export interface NewRecord<C> {
  readonly id: string;
  readonly version?: number;
  readonly parentId?: string;
  readonly atMs?: number;
  readonly content: C;
}

interface Row {
  readonly id: string;
  readonly version: number;
  readonly parentId: string | null;
  readonly atMs: number | null;
  readonly recordedAt: string;
  readonly content: string;
}

const columns = 'r.id, r.version, r.parent_id AS parentId, r.at_ms AS atMs, r.recorded_at AS recordedAt, r.content';
const latest = (table: string) =>
  `r.recorded_at <= @asOf AND r.version = (SELECT max(version) FROM ${table} WHERE id = r.id AND recorded_at <= @asOf)`;
/** After every time that can be written: what is known now. */
export const today = '9999';

function read<C>(row: Row): StoredRecord<C> {
  return { ...row, content: JSON.parse(row.content) as C };
}

export function insertRecord<C>(writer: Writer, table: RecordTable, record: NewRecord<C>): StoredRecord<C> {
  const { id, version = 1, parentId = null, atMs = null, content } = record;
  writer.insert(table, [id, version, parentId, atMs, writer.at, canonicalJson(content)]);
  return { id, version, parentId, atMs, recordedAt: writer.at, content };
}

/** The version known at a time; null when there was none, or it belongs to another clinic. */
export function findRecord<C>({ db, clinicId }: Reader, table: RecordTable, id: string, asOf = today): StoredRecord<C> | null {
  const sql = `SELECT ${columns} FROM ${table} r WHERE r.id = @id AND r.clinic_id IS @clinicId AND r.recorded_at <= @asOf ORDER BY r.version DESC LIMIT 1`;
  const row = prepared(db, sql).get({ id, clinicId, asOf }) as Row | undefined;
  return row ? read(row) : null;
}

/** Every version known at a time, oldest first. */
export function findVersions<C>({ db, clinicId }: Reader, table: RecordTable, id: string, asOf = today): StoredRecord<C>[] {
  const sql = `SELECT ${columns} FROM ${table} r WHERE r.id = @id AND r.clinic_id IS @clinicId AND r.recorded_at <= @asOf ORDER BY r.version`;
  return (prepared(db, sql).all({ id, clinicId, asOf }) as Row[]).map(read<C>);
}

export interface ListOptions {
  readonly after?: string;
  readonly count: number;
  readonly asOf?: string | undefined;
}

/** Latest versions known at a time, by id. */
export function listRecords<C>({ db, clinicId }: Reader, table: RecordTable, { after = '', count, asOf = today }: ListOptions) {
  const sql = `SELECT ${columns} FROM ${table} r WHERE r.clinic_id IS @clinicId AND r.id > @after AND ${latest(table)} ORDER BY r.id LIMIT @count`;
  return (prepared(db, sql).all({ clinicId, after, count, asOf }) as Row[]).map(read<C>);
}

export interface ChildOptions {
  readonly after?: readonly [atMs: number, id: string] | undefined;
  readonly count?: number;
  readonly asOf?: string | undefined;
}

/** Latest versions of the records of one parent, by their time and id. */
export function listOfParent<C>(
  { db, clinicId }: Reader,
  table: RecordTable,
  parentId: string,
  { after = [Number.MIN_SAFE_INTEGER, ''], count = -1, asOf = today }: ChildOptions = {},
): StoredRecord<C>[] {
  const sql = `SELECT ${columns} FROM ${table} r WHERE r.parent_id = @parentId AND r.clinic_id IS @clinicId
    AND (r.at_ms, r.id) > (@afterMs, @afterId) AND ${latest(table)} ORDER BY r.at_ms, r.id LIMIT @count`;
  const given = { parentId, clinicId, afterMs: after[0], afterId: after[1], count, asOf };
  return (prepared(db, sql).all(given) as Row[]).map(read<C>);
}
