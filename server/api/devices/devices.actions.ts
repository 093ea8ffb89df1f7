import { uuidv7 } from 'uuidv7';
import type { z } from 'zod';
import { usualCalibrationDays } from '../../../domain/dosimetry/calibration.js';
import { usualLevels } from '../../../domain/dosimetry/drift.js';
import type { Actor } from '../../http/actor.js';
import type { Parts } from '../../parts.js';
import type { DeviceRequest } from './devices.schema.js';
import { type DeviceContent, type DeviceRecord, findDevice, insertDevice } from './devices.store.js';

export type DeviceBody = z.output<typeof DeviceRequest>;

/** Outer limit of delivered over set that laser equipment is held to. */
const usualToleranceFraction = 0.2;

function filled(body: DeviceBody): DeviceContent {
  return {
    ...body,
    handpieces: body.handpieces ?? [],
    outputToleranceFraction: body.outputToleranceFraction ?? usualToleranceFraction,
    calibrationIntervalDays: body.calibrationIntervalDays ?? usualCalibrationDays,
    constancyLevels: body.constancyLevels ?? usualLevels,
    inService: body.inService ?? true,
  };
}

export function addDevice({ ledger }: Parts, actor: Actor, body: DeviceBody): DeviceRecord {
  const id = uuidv7();
  const change = { clinicId: actor.clinicId, actor, kind: 'device.added', subject: id };
  return ledger.change(change, (writer) => insertDevice(writer, id, 1, filled(body)));
}

export function changeDevice(
  { ledger }: Parts,
  actor: Actor,
  id: string,
  next: (known: DeviceRecord) => DeviceBody,
): DeviceRecord | null {
  return ledger.change({ clinicId: actor.clinicId, actor, kind: 'device.changed', subject: id }, (writer) => {
    const known = findDevice(writer, id);
    return known && insertDevice(writer, id, known.version + 1, filled(next(known)));
  });
}
