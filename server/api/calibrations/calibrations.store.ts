import type { z } from 'zod';
import { type CalibrationPoint, setEnergyJ } from '../../../domain/dosimetry/calibration.js';
import { type ChildOptions, findRecord, insertRecord, listOfParent, type StoredRecord } from '../../audit/records.js';
import type { Writer } from '../../audit/with-audit.js';
import type { Reader } from '../../db/reader.js';
import { pulseEndS } from '../../schemas/beam.js';
import type { CalibrationRequest } from './calibrations.schema.js';

export type CalibrationBody = z.output<typeof CalibrationRequest>;

export interface CalibrationContent extends CalibrationBody {
  readonly validUntil: string;
  readonly factor: number;
  readonly deviationFraction: number;
  readonly inTolerance: boolean;
  readonly toleranceFraction: number;
  readonly notTraceableBecause: readonly string[];
}

export type CalibrationRecord = StoredRecord<CalibrationContent>;

export const insertCalibration = (writer: Writer, id: string, deviceId: string, content: CalibrationContent): CalibrationRecord =>
  insertRecord(writer, 'calibrations', { id, parentId: deviceId, atMs: Date.parse(content.measuredAt), content });

export const findCalibration = (reader: Reader, id: string, asOf?: string) =>
  findRecord<CalibrationContent>(reader, 'calibrations', id, asOf);

export const listCalibrations = (reader: Reader, deviceId: string, options?: ChildOptions) =>
  listOfParent<CalibrationContent>(reader, 'calibrations', deviceId, options);

/** Which calibration took the place of which. */
export function supersededBy(records: readonly CalibrationRecord[]): Map<string, string> {
  return new Map(records.flatMap(({ id, content }) => (content.supersedes === undefined ? [] : [[content.supersedes, id]])));
}

/** Those that count: traceable, and not superseded by what is known. */
export function pointsOf(records: readonly CalibrationRecord[]): CalibrationPoint[] {
  const replaced = supersededBy(records);
  return records
    .filter(({ id, content }) => content.notTraceableBecause.length === 0 && !replaced.has(id))
    .map(({ id, content }) => ({
      id,
      measuredAtMs: Date.parse(content.measuredAt),
      validUntilMs: Date.parse(content.validUntil),
      wavelengthNm: content.wavelengthNm,
      spot: content.spot,
      pulseDurationS: content.pulse ? pulseEndS(content.pulse) : null,
      handpiece: content.handpiece ?? null,
      setEnergyJ: setEnergyJ(content.set, content.spot),
      factor: content.factor,
      relativeUncertainty: content.measured.relativeUncertainty,
    }));
}
