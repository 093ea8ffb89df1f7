import type { CalibrationPoint } from '../../../domain/dosimetry/calibration.js';
import type { DeviceLine } from '../../../domain/dosimetry/device-line.js';
import { type DeviceResponse, type DeviceUse, responseAt } from '../../../domain/dosimetry/device-response.js';
import type { Reader } from '../../db/reader.js';
import { listCalibrations, pointsOf } from '../calibrations/calibrations.store.js';
import { listServices } from '../services/services.store.js';
import { type DeviceRecord, findDevice, linesOf } from './devices.store.js';

/** All that is known of a device at a time. */
export interface DeviceFile {
  readonly device: DeviceRecord;
  readonly lines: readonly DeviceLine[];
  readonly points: readonly CalibrationPoint[];
  readonly serviceTimesMs: readonly number[];
}

export function openDeviceFile(reader: Reader, deviceId: string, asOf?: string): DeviceFile | null {
  const device = findDevice(reader, deviceId, asOf);
  if (!device) return null;
  return {
    device,
    lines: linesOf(device),
    points: pointsOf(listCalibrations(reader, deviceId, { asOf })),
    serviceTimesMs: listServices(reader, deviceId, { asOf }).map(({ atMs }) => atMs!),
  };
}

/** What the device delivered over what its panel said. */
export function responseOf({ device, points, serviceTimesMs }: DeviceFile, use: DeviceUse): DeviceResponse {
  return responseAt(points, serviceTimesMs, use, device.content.outputToleranceFraction);
}
