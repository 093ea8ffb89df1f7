import { findRecord, insertRecord, listRecords, type StoredRecord } from '../../audit/records.js';
import type { Writer } from '../../audit/with-audit.js';
import { prepared } from '../../db/prepared.js';
import type { Reader } from '../../db/reader.js';

export interface ClinicContent {
  readonly name: string;
}

export type ClinicRecord = StoredRecord<ClinicContent>;

/** Keeps the row that others refer to beside the sealed version. */
export function insertClinic(writer: Writer, id: string, version: number, content: ClinicContent): ClinicRecord {
  prepared(
    writer.db,
    `INSERT INTO clinics (id, name, created_at, version) VALUES (?, ?, ?, ?)
     ON CONFLICT (id) DO UPDATE SET name = excluded.name, version = excluded.version`,
  ).run(id, content.name, writer.at, version);
  return insertRecord(writer, 'clinic_versions', { id, version, content });
}

export const findClinic = (reader: Reader, id: string) => findRecord<ClinicContent>(reader, 'clinic_versions', id);
export const listClinics = (reader: Reader, after: string, count: number) =>
  listRecords<ClinicContent>(reader, 'clinic_versions', { after, count });
