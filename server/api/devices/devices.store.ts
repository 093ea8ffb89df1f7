import type { z } from 'zod';
import type { DeviceLine } from '../../../domain/dosimetry/device-line.js';
import { findRecord, insertRecord, listRecords, type StoredRecord } from '../../audit/records.js';
import type { Writer } from '../../audit/with-audit.js';
import type { Reader } from '../../db/reader.js';
import type { DeviceRequest } from './devices.schema.js';

type Body = z.output<typeof DeviceRequest>;
type Filled = 'handpieces' | 'outputToleranceFraction' | 'calibrationIntervalDays' | 'constancyLevels' | 'inService';

/** A device with its defaults filled in. */
export type DeviceContent = Omit<Body, Filled> & { readonly [K in Filled]-?: NonNullable<Body[K]> };
export type DeviceRecord = StoredRecord<DeviceContent>;

export const insertDevice = (writer: Writer, id: string, version: number, content: DeviceContent): DeviceRecord =>
  insertRecord(writer, 'devices', { id, version, content });

export const findDevice = (reader: Reader, id: string, asOf?: string) => findRecord<DeviceContent>(reader, 'devices', id, asOf);

export const listDevices = (reader: Reader, options: { after?: string; count: number; asOf?: string | undefined }) =>
  listRecords<DeviceContent>(reader, 'devices', options);

/** Lines of a device as the physics sees them. */
export function linesOf({ id, content }: DeviceRecord): DeviceLine[] {
  const { name, medium } = content;
  return content.lines.map(({ energyMaxJ, fluenceMaxJPerCm2, ...line }) => ({
    deviceId: id,
    name,
    medium,
    ...line,
    ...(energyMaxJ === undefined ? {} : { energyMaxJ }),
    ...(fluenceMaxJPerCm2 === undefined ? {} : { fluenceMaxJPerCm2 }),
  }));
}

/** Lines of the clinic's devices by id. `missing` are ids that are not there, `outOfService` those that may not be used. */
export function deviceLines(
  reader: Reader,
  deviceIds: readonly string[],
): { readonly lines: DeviceLine[]; readonly missing: string[]; readonly outOfService: string[] } {
  const lines: DeviceLine[] = [];
  const missing: string[] = [];
  const outOfService: string[] = [];
  for (const deviceId of deviceIds) {
    const device = findDevice(reader, deviceId);
    if (!device) missing.push(deviceId);
    else if (!device.content.inService) outOfService.push(deviceId);
    else lines.push(...linesOf(device));
  }
  return { lines, missing, outOfService };
}
