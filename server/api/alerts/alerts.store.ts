import { uuidv7 } from 'uuidv7';
import type { AlertFinding, AlertSeverity } from '../../../domain/alerts/alert.js';
import { findRecord, insertRecord, listOfParent, type StoredRecord, today } from '../../audit/records.js';
import type { Writer } from '../../audit/with-audit.js';
import { prepared } from '../../db/prepared.js';
import type { Reader } from '../../db/reader.js';

export interface AlertPlace {
  readonly deviceId: string;
  readonly exposureId: string | null;
  readonly courseId: string | null;
  readonly atMs: number;
}

export interface AlertRecord extends AlertPlace {
  readonly id: string;
  readonly rule: string;
  readonly severity: AlertSeverity;
  readonly recordedAt: string;
  readonly content: { readonly text: string; readonly evidence: Readonly<Record<string, unknown>> };
}

/** Stores an alert, puts it on the list of open ones and into the outbox, all in the change that caused it. */
export function insertAlert(writer: Writer, place: AlertPlace, finding: AlertFinding & { readonly rule: string }): AlertRecord {
  const id = uuidv7();
  const { rule, severity, text, evidence } = finding;
  const { deviceId, exposureId, courseId, atMs } = place;
  const content = { text, evidence };
  writer.insert('alerts', [id, rule, severity, deviceId, exposureId, courseId, atMs, writer.at, JSON.stringify(content)]);
  prepared(writer.db, 'INSERT INTO open_alerts (clinic_id, alert_id) VALUES (?, ?)').run(writer.clinicId, id);
  const out = 'INSERT INTO outbox (clinic_id, topic, subject_id, created_at, next_attempt_at) VALUES (?, ?, ?, ?, ?)';
  prepared(writer.db, out).run(writer.clinicId, 'alert.raised', id, writer.at, writer.at);
  return { id, rule, severity, recordedAt: writer.at, ...place, content };
}

const columns = `a.id, a.rule, a.severity, a.device_id AS deviceId, a.exposure_id AS exposureId, a.course_id AS courseId,
  a.at_ms AS atMs, a.recorded_at AS recordedAt, a.content`;

type Row = Omit<AlertRecord, 'content'> & { readonly content: string };
const read = (row: Row): AlertRecord => ({ ...row, content: JSON.parse(row.content) as AlertRecord['content'] });

export function findAlert({ db, clinicId }: Reader, id: string, asOf = today): AlertRecord | null {
  const sql = `SELECT ${columns} FROM alerts a WHERE a.id = ? AND a.clinic_id = ? AND a.recorded_at <= ?`;
  const row = prepared(db, sql).get(id, clinicId, asOf) as Row | undefined;
  return row ? read(row) : null;
}

export function alertsOfExposure({ db, clinicId }: Reader, exposureId: string, asOf = today): AlertRecord[] {
  const sql = `SELECT ${columns} FROM alerts a WHERE a.exposure_id = ? AND a.clinic_id = ? AND a.recorded_at <= ? ORDER BY a.id`;
  return (prepared(db, sql).all(exposureId, clinicId, asOf) as Row[]).map(read);
}

export interface AlertFilter {
  readonly rule?: string | undefined;
  readonly deviceId?: string | undefined;
  readonly exposureId?: string | undefined;
  readonly severity?: string | undefined;
  readonly acknowledged?: boolean | undefined;
  readonly before?: string | undefined;
  readonly count: number;
  readonly asOf?: string | undefined;
}

/** Newest first. Open ones come from their own list, so that those long settled cost nothing. */
export function listAlerts({ db, clinicId }: Reader, filter: AlertFilter): AlertRecord[] {
  const given: Record<string, unknown> = { clinicId, before: filter.before ?? '~', count: filter.count };
  const terms = ['a.clinic_id = @clinicId', 'a.id < @before'];
  for (const [name, column] of [
    ['rule', 'a.rule'],
    ['deviceId', 'a.device_id'],
    ['exposureId', 'a.exposure_id'],
    ['severity', 'a.severity'],
  ] as const) {
    if (filter[name] === undefined) continue;
    terms.push(`${column} = @${name}`);
    given[name] = filter[name];
  }
  if (filter.asOf !== undefined) {
    terms.push('a.recorded_at <= @asOf');
    given.asOf = filter.asOf;
  }
  const known = 'SELECT 1 FROM acknowledgments k WHERE k.parent_id = a.id AND k.recorded_at <= @asOf';
  const openOnly = filter.acknowledged === false && filter.asOf === undefined;
  if (filter.acknowledged !== undefined && !openOnly) {
    terms.push(`${filter.acknowledged ? '' : 'NOT '}EXISTS (${known})`);
    given.asOf = filter.asOf ?? today;
  }
  const from = openOnly
    ? 'open_alerts o CROSS JOIN alerts a ON a.id = o.alert_id WHERE o.clinic_id = @clinicId AND o.alert_id < @before AND'
    : 'alerts a WHERE';
  const order = openOnly ? 'o.alert_id' : 'a.id';
  const sql = `SELECT ${columns} FROM ${from} ${terms.join(' AND ')} ORDER BY ${order} DESC LIMIT @count`;
  return (prepared(db, sql).all(given) as Row[]).map(read);
}

export interface AcknowledgmentContent {
  readonly reason: string;
  readonly by: string;
  readonly notes?: string | undefined;
}

export type AcknowledgmentRecord = StoredRecord<AcknowledgmentContent>;

export function insertAcknowledgment(writer: Writer, id: string, alertId: string, atMs: number, content: AcknowledgmentContent) {
  prepared(writer.db, 'DELETE FROM open_alerts WHERE clinic_id = ? AND alert_id = ?').run(writer.clinicId, alertId);
  return insertRecord(writer, 'acknowledgments', { id, parentId: alertId, atMs, content });
}

export const acknowledgmentOf = (reader: Reader, alertId: string, asOf?: string): AcknowledgmentRecord | null =>
  listOfParent<AcknowledgmentContent>(reader, 'acknowledgments', alertId, { asOf })[0] ?? null;

export const findAcknowledgment = (reader: Reader, id: string, asOf?: string) =>
  findRecord<AcknowledgmentContent>(reader, 'acknowledgments', id, asOf);
