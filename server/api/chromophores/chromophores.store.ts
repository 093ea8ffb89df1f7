import type { ReferenceData } from '../../../domain/reference/reference-data.js';
import type { Chromophore } from '../../../domain/spectra/chromophore.js';
import type { Target } from '../../../domain/targets/target.js';
import { findRecord, insertRecord, type StoredRecord } from '../../audit/records.js';
import type { Writer } from '../../audit/with-audit.js';
import type { Db } from '../../db/database.js';
import { prepared } from '../../db/prepared.js';
import type { Reader } from '../../db/reader.js';

/** A clinic's own measured spectrum, as it was given. */
export interface OwnSpectrum {
  readonly name: string;
  readonly source: string;
  readonly measuredAt?: string | undefined;
  readonly relativeUncertainty?: number | undefined;
  readonly note?: string | undefined;
  readonly wavelengthsNm: readonly number[];
  readonly absorptionsPerCm: readonly number[];
}

export type OwnChromophore = StoredRecord<OwnSpectrum>;

const table = 'own_chromophores';

export function insertOwnChromophore(writer: Writer, id: string, content: OwnSpectrum): OwnChromophore {
  return insertRecord(writer, table, { id, content });
}

export function findOwnChromophore(reader: Reader, id: string): OwnChromophore | null {
  return findRecord<OwnSpectrum>(reader, table, id);
}

/** A clinic's own, in the order they were made, after the first `offset`. */
export function listOwnChromophores({ db, clinicId }: Reader, offset: number, count: number): OwnChromophore[] {
  const sql = `SELECT id, version, parent_id AS parentId, at_ms AS atMs, recorded_at AS recordedAt, content FROM ${table}
    WHERE clinic_id = ? ORDER BY id LIMIT ? OFFSET ?`;
  const rows = prepared(db, sql).all(clinicId, count, offset) as (Omit<OwnChromophore, 'content'> & { content: string })[];
  return rows.map((row) => ({ ...row, content: JSON.parse(row.content) as OwnSpectrum }));
}

export function countOwnChromophores({ db, clinicId }: Reader): number {
  const row = prepared(db, `SELECT count(*) AS count FROM ${table} WHERE clinic_id = ?`).get(clinicId);
  return (row as { count: number }).count;
}

export function chromophoreOfOwn({ id, content }: OwnChromophore): Chromophore {
  const { name, source, note = '', relativeUncertainty = 0, wavelengthsNm, absorptionsPerCm } = content;
  const [fromNm, toNm] = [wavelengthsNm[0]!, wavelengthsNm[wavelengthsNm.length - 1]!];
  return {
    id,
    name,
    quantity: 'absorption coefficient, natural base',
    unit: '1/cm',
    kind: 'absorption',
    spectrum: { form: 'table', wavelengthsNm: Float64Array.from(wavelengthsNm), values: Float64Array.from(absorptionsPerCm) },
    sources: [source],
    status: 'read',
    note,
    ...(relativeUncertainty > 0 ? { spread: { factor: 1 + 2 * relativeUncertainty, fromNm, toNm } } : {}), // k = 2
  };
}

/** The same parts, with the clinic's own spectrum in the reference data where a target names it. */
export function withTargetChromophore<P extends { readonly db: Db; readonly reference: ReferenceData }>(
  parts: P,
  clinicId: string | null,
  target: Target,
): P {
  if (target.kind !== 'dermal-pigment') return parts;
  return { ...parts, reference: withOwnChromophore({ db: parts.db, clinicId }, parts.reference, target.chromophoreId) };
}

/** Reference data in which the clinic's own spectrum of this id stands too, so that a calculation can name it; unchanged for any other id. */
export function withOwnChromophore(reader: Reader, reference: ReferenceData, id: string): ReferenceData {
  if (reference.chromophores.has(id)) return reference;
  const own = findOwnChromophore(reader, id);
  if (!own) return reference;
  return { ...reference, chromophores: new Map([...reference.chromophores, [id, chromophoreOfOwn(own)]]) };
}
