import type { z } from 'zod';
import type { ConstancyLevels, ConstancyVerdict } from '../../../domain/dosimetry/drift.js';
import { type ChildOptions, findRecord, insertRecord, listOfParent, type StoredRecord } from '../../audit/records.js';
import type { Writer } from '../../audit/with-audit.js';
import type { Reader } from '../../db/reader.js';
import type { CheckRequest } from './checks.schema.js';

export type CheckBody = z.output<typeof CheckRequest>;

export interface CheckContent extends CheckBody {
  readonly verdict: ConstancyVerdict;
  readonly meanPulseEnergyJ: number;
  readonly setPulseEnergyJ: number;
  readonly repeatabilityFraction: number | null;
  readonly deviationFromDisplayFraction: number;
  readonly deviationFromBaselineFraction: number | null;
  readonly levels: ConstancyLevels;
  readonly notTraceableBecause: readonly string[];
  readonly slopePerDay: number | null;
  readonly actionLevelAt: string | null;
  readonly chartAlarm: boolean;
}

export type CheckRecord = StoredRecord<CheckContent>;

export const insertCheck = (writer: Writer, id: string, deviceId: string, content: CheckContent): CheckRecord =>
  insertRecord(writer, 'checks', { id, parentId: deviceId, atMs: Date.parse(content.measuredAt), content });

export const findCheck = (reader: Reader, id: string, asOf?: string) => findRecord<CheckContent>(reader, 'checks', id, asOf);

export const listChecks = (reader: Reader, deviceId: string, options?: ChildOptions) =>
  listOfParent<CheckContent>(reader, 'checks', deviceId, options);
