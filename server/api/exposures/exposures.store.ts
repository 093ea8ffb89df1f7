import type { z } from 'zod';
import { type ChildOptions, findRecord, insertRecord, listOfParent, type StoredRecord, today } from '../../audit/records.js';
import type { Writer } from '../../audit/with-audit.js';
import { prepared } from '../../db/prepared.js';
import type { Reader } from '../../db/reader.js';
import type { CorrectionRequest, ExposureRequest } from './exposures.schema.js';

export type ExposureContent = z.output<typeof ExposureRequest>;

/** A row of the log: the record as it was sent and what was computed at the time. */
export interface ExposureRow {
  readonly rowNo: number;
  readonly id: string;
  readonly deviceId: string;
  readonly externalId: string;
  readonly atMs: number;
  readonly courseId: string | null;
  readonly site: string | null;
  readonly recordedAt: string;
  readonly content: string;
  readonly deliveredFluenceJPerCm2: number;
  readonly lowJPerCm2: number;
  readonly highJPerCm2: number;
  /** Ids with a space between. */
  readonly calibrationIds: string;
  readonly model: string;
}

export type NewExposureRow = Omit<ExposureRow, 'rowNo' | 'recordedAt'>;

const columns = `row_no AS rowNo, id, device_id AS deviceId, external_id AS externalId, at_ms AS atMs, course_id AS courseId, site,
  recorded_at AS recordedAt, content, delivered_fluence_j_per_cm2 AS deliveredFluenceJPerCm2, low_j_per_cm2 AS lowJPerCm2,
  high_j_per_cm2 AS highJPerCm2, calibration_ids AS calibrationIds, model`;

/** False when the device has an exposure of this external id already. */
export function insertExposure(writer: Writer, row: NewExposureRow): boolean {
  const cells = [
    row.id,
    row.deviceId,
    row.externalId,
    row.atMs,
    row.courseId,
    row.site,
    writer.at,
    row.content,
    row.deliveredFluenceJPerCm2,
    row.lowJPerCm2,
    row.highJPerCm2,
    row.calibrationIds,
    row.model,
  ];
  return writer.insert('exposures', cells, 'ignore');
}

export function findExposure({ db, clinicId }: Reader, id: string, asOf = today): ExposureRow | null {
  const sql = `SELECT ${columns} FROM exposures WHERE id = ? AND clinic_id = ? AND recorded_at <= ?`;
  return (prepared(db, sql).get(id, clinicId, asOf) as ExposureRow | undefined) ?? null;
}

export function findByExternalId({ db, clinicId }: Reader, deviceId: string, externalId: string): ExposureRow | null {
  const sql = `SELECT ${columns} FROM exposures WHERE device_id = ? AND external_id = ? AND clinic_id = ?`;
  return (prepared(db, sql).get(deviceId, externalId, clinicId) as ExposureRow | undefined) ?? null;
}

export interface ExposureFilter {
  readonly deviceId?: string | undefined;
  readonly courseId?: string | undefined;
  readonly fromMs?: number | undefined;
  readonly toMs?: number | undefined;
  readonly asOf?: string | undefined;
  readonly after?: readonly [atMs: number, rowNo: number] | undefined;
  readonly count: number;
}

/** By time, oldest first; equal times in the order of storing. The index is named: course, else device, else clinic. */
export function listExposures({ db, clinicId }: Reader, filter: ExposureFilter): ExposureRow[] {
  const given: Record<string, unknown> = { clinicId, count: filter.count };
  const terms = ['clinic_id = @clinicId'];
  const index = filter.courseId !== undefined ? 'course' : filter.deviceId !== undefined ? 'device' : 'time';
  const add = (name: string, term: string, value: unknown) => {
    if (value === undefined) return;
    terms.push(term);
    given[name] = value;
  };
  add('courseId', 'course_id = @courseId', filter.courseId);
  add('deviceId', 'device_id = @deviceId', filter.deviceId);
  add('fromMs', 'at_ms >= @fromMs', filter.fromMs);
  add('toMs', 'at_ms < @toMs', filter.toMs);
  add('asOf', 'recorded_at <= @asOf', filter.asOf);
  add('afterMs', '(at_ms, row_no) > (@afterMs, @afterRow)', filter.after?.[0]);
  if (filter.after) given.afterRow = filter.after[1];
  const sql = `SELECT ${columns} FROM exposures INDEXED BY exposures_by_${index} WHERE ${terms.join(' AND ')} ORDER BY at_ms, row_no LIMIT @count`;
  return prepared(db, sql).all(given) as ExposureRow[];
}

/** Every row of a filter, page by page, so that memory stays flat however many there are. */
export function* eachExposure(reader: Reader, filter: Omit<ExposureFilter, 'count' | 'after'>): Generator<ExposureRow> {
  let after: readonly [number, number] | undefined;
  for (;;) {
    const page = listExposures(reader, { ...filter, after, count: 500 });
    yield* page;
    const last = page[page.length - 1];
    if (!last || page.length < 500) return;
    after = [last.atMs, last.rowNo];
  }
}

/** The exposure of a course and site that came last before a time. */
export function lastOfSite({ db, clinicId }: Reader, courseId: string, site: string | null, atMs: number): ExposureRow | null {
  const sql = `SELECT ${columns} FROM exposures INDEXED BY exposures_by_course
    WHERE course_id = ? AND clinic_id = ? AND site IS ? AND at_ms <= ? ORDER BY at_ms DESC, row_no DESC LIMIT 1`;
  return (prepared(db, sql).get(courseId, clinicId, site, atMs) as ExposureRow | undefined) ?? null;
}

export type CorrectionBody = z.output<typeof CorrectionRequest>;
export type CorrectionContent = CorrectionBody & { readonly by: string };
export type CorrectionRecord = StoredRecord<CorrectionContent>;

export const insertCorrection = (writer: Writer, id: string, exposureId: string, content: CorrectionContent): CorrectionRecord =>
  insertRecord(writer, 'corrections', { id, parentId: exposureId, atMs: Date.parse(writer.at), content });

export const findCorrection = (reader: Reader, id: string, asOf?: string) =>
  findRecord<CorrectionContent>(reader, 'corrections', id, asOf);

export const listCorrections = (reader: Reader, exposureId: string, options?: ChildOptions) =>
  listOfParent<CorrectionContent>(reader, 'corrections', exposureId, options);

/** Whether a clinic has corrected anything at all; most reads need not look further. */
export function hasCorrections({ db, clinicId }: Reader): boolean {
  return prepared(db, 'SELECT 1 FROM corrections WHERE clinic_id IS ? LIMIT 1').get(clinicId) !== undefined;
}
