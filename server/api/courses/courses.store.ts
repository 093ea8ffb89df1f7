import type { z } from 'zod';
import { findRecord, insertRecord, listRecords, type StoredRecord } from '../../audit/records.js';
import type { Writer } from '../../audit/with-audit.js';
import type { Reader } from '../../db/reader.js';
import type { CourseRequest } from './courses.schema.js';

export type CourseContent = z.output<typeof CourseRequest>;
export type CourseRecord = StoredRecord<CourseContent>;

export const insertCourse = (writer: Writer, id: string, version: number, content: CourseContent): CourseRecord =>
  insertRecord(writer, 'courses', { id, version, content });

export const findCourse = (reader: Reader, id: string, asOf?: string) => findRecord<CourseContent>(reader, 'courses', id, asOf);

export const listCourses = (reader: Reader, options: { after?: string; count: number; asOf?: string | undefined }) =>
  listRecords<CourseContent>(reader, 'courses', options);
