import type { z } from 'zod';
import { findRecord, insertRecord, listRecords, type StoredRecord } from '../../audit/records.js';
import type { Writer } from '../../audit/with-audit.js';
import type { Reader } from '../../db/reader.js';
import type { MeterRequest } from './meters.schema.js';

export type MeterContent = z.output<typeof MeterRequest>;
export type MeterRecord = StoredRecord<MeterContent>;

export const insertMeter = (writer: Writer, id: string, version: number, content: MeterContent): MeterRecord =>
  insertRecord(writer, 'meters', { id, version, content });

export const findMeter = (reader: Reader, id: string, asOf?: string) => findRecord<MeterContent>(reader, 'meters', id, asOf);

export const listMeters = (reader: Reader, options: { after?: string; count: number; asOf?: string | undefined }) =>
  listRecords<MeterContent>(reader, 'meters', options);

/** One reading, as far as the head's range is concerned. */
export interface Reading {
  readonly at: string;
  readonly wavelengthNm: number;
  readonly pulseEnergyJ: number;
  readonly repetitionRateHz?: number | undefined;
}

/** Why a reading with this meter is not traceable; empty when it is. */
export function untraceableReasons({ content: meter }: MeterRecord, reading: Reading): string[] {
  const reasons: string[] = [];
  const { wavelengthNm, pulseEnergyJ, repetitionRateHz } = reading;
  if (wavelengthNm < meter.wavelengthMinNm || wavelengthNm > meter.wavelengthMaxNm)
    reasons.push(
      `the head is characterized from ${meter.wavelengthMinNm} to ${meter.wavelengthMaxNm} nm, not at ${wavelengthNm} nm`,
    );
  if (pulseEnergyJ < meter.energyMinJ || pulseEnergyJ > meter.energyMaxJ)
    reasons.push(`its range is ${meter.energyMinJ} to ${meter.energyMaxJ} J, the reading is ${pulseEnergyJ} J`);
  if (repetitionRateHz !== undefined && meter.repetitionMaxHz !== undefined && repetitionRateHz > meter.repetitionMaxHz)
    reasons.push(`it follows up to ${meter.repetitionMaxHz} Hz, the rate was ${repetitionRateHz} Hz`);
  const at = Date.parse(reading.at);
  if (at > Date.parse(meter.calibratedUntil)) reasons.push(`its certificate ended at ${meter.calibratedUntil}`);
  if (meter.calibratedAt !== undefined && at < Date.parse(meter.calibratedAt))
    reasons.push(`its certificate began at ${meter.calibratedAt}`);
  return reasons;
}
