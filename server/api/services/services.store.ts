import type { z } from 'zod';
import { type ChildOptions, findRecord, insertRecord, listOfParent, type StoredRecord } from '../../audit/records.js';
import type { Writer } from '../../audit/with-audit.js';
import type { Reader } from '../../db/reader.js';
import type { ServiceRequest } from './services.schema.js';

export type ServiceContent = z.output<typeof ServiceRequest>;
export type ServiceRecord = StoredRecord<ServiceContent>;

export const insertService = (writer: Writer, id: string, deviceId: string, content: ServiceContent): ServiceRecord =>
  insertRecord(writer, 'services', { id, parentId: deviceId, atMs: Date.parse(content.performedAt), content });

export const findService = (reader: Reader, id: string, asOf?: string) =>
  findRecord<ServiceContent>(reader, 'services', id, asOf);

export const listServices = (reader: Reader, deviceId: string, options?: ChildOptions) =>
  listOfParent<ServiceContent>(reader, 'services', deviceId, options);
