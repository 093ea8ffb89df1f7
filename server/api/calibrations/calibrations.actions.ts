import { uuidv7 } from 'uuidv7';
import { judgeCalibration, sameLineNm } from '../../../domain/dosimetry/calibration.js';
import type { Writer } from '../../audit/with-audit.js';
import type { Actor } from '../../http/actor.js';
import { RequestError } from '../../http/request-error.js';
import type { Parts } from '../../parts.js';
import { type DeviceRecord, findDevice } from '../devices/devices.store.js';
import { restateAlerts } from '../exposures/restate.store.js';
import { findMeter, untraceableReasons } from '../meters/meters.store.js';
import {
  type CalibrationBody,
  type CalibrationRecord,
  findCalibration,
  insertCalibration,
  listCalibrations,
  supersededBy,
} from './calibrations.store.js';

const msPerDay = 86_400_000;

const refuse = (pointer: string, detail: string) =>
  new RequestError('invalid-request', 'The calibration cannot be stored; see errors.', [{ pointer, detail }]);

/** Judges a measurement, keeps it, and restates what it bears on. */
export function addCalibration({ ledger }: Parts, actor: Actor, deviceId: string, body: CalibrationBody): CalibrationRecord {
  const id = uuidv7();
  return ledger.change({ clinicId: actor.clinicId, actor, kind: 'calibration.added', subject: id }, (writer) => {
    const device = findDevice(writer, deviceId)!;
    assertLine(device, body);
    const replaced = replacedBy(writer, deviceId, body);
    const toleranceFraction = device.content.outputToleranceFraction;
    const verdict = judgeCalibration(body.set, body.spot, body.measured.pulseEnergyJ, toleranceFraction);
    const measuredAtMs = Date.parse(body.measuredAt);
    const record = insertCalibration(writer, id, deviceId, {
      ...body,
      ...verdict,
      toleranceFraction,
      validUntil: body.validUntil ?? new Date(measuredAtMs + device.content.calibrationIntervalDays * msPerDay).toISOString(),
      notTraceableBecause: reasonsAgainst(writer, body),
    });
    const fromMs = Math.min(measuredAtMs, replaced?.atMs ?? measuredAtMs);
    writer.note({ deviceId, ...restateAlerts(writer, deviceId, fromMs) });
    return record;
  });
}

function assertLine({ content }: DeviceRecord, { wavelengthNm }: CalibrationBody): void {
  if (content.lines.some((line) => Math.abs(line.wavelengthNm - wavelengthNm) <= sameLineNm)) return;
  const emitted = content.lines.map((line) => line.wavelengthNm).join(', ');
  throw refuse('/wavelengthNm', `must be a wavelength of the device: ${emitted} nm`);
}

function reasonsAgainst(
  writer: Writer,
  { meterId, measuredAt, wavelengthNm, measured, repetitionRateHz }: CalibrationBody,
): string[] {
  if (meterId === undefined) return [];
  const meter = findMeter(writer, meterId);
  if (!meter) throw refuse('/meterId', 'must be the id of a meter of this clinic');
  return untraceableReasons(meter, { at: measuredAt, wavelengthNm, pulseEnergyJ: measured.pulseEnergyJ, repetitionRateHz });
}

function replacedBy(writer: Writer, deviceId: string, { supersedes }: CalibrationBody): CalibrationRecord | null {
  if (supersedes === undefined) return null;
  const replaced = findCalibration(writer, supersedes);
  if (replaced?.parentId !== deviceId) throw refuse('/supersedes', 'must be the id of a calibration of this device');
  const successor = supersededBy(listCalibrations(writer, deviceId)).get(supersedes);
  if (successor === undefined) return replaced;
  throw new RequestError('conflict', `Calibration ${supersedes} is superseded by ${successor} already; supersede that one.`);
}
