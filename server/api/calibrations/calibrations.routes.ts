import type { App } from '../../http/app-type.js';
import { registerChildRoutes } from '../../http/child-routes.js';
import type { Parts } from '../../parts.js';
import { findDevice } from '../devices/devices.store.js';
import { addCalibration } from './calibrations.actions.js';
import { presentCalibrations } from './calibrations.present.js';
import { CalibrationItem, CalibrationRequest } from './calibrations.schema.js';
import { type CalibrationBody, type CalibrationRecord, findCalibration, listCalibrations } from './calibrations.store.js';

export function registerCalibrationsRoutes(app: App, parts: Parts): void {
  const { ledger, now } = parts;
  registerChildRoutes<CalibrationBody, CalibrationRecord>(app, {
    parentPath: '/v1/devices',
    name: 'calibrations',
    parentNoun: 'device',
    noun: 'calibration',
    body: CalibrationRequest,
    item: CalibrationItem,
    writeRole: 'physicist',
    parentExists: ({ clinicId }, deviceId) => findDevice(ledger.reader(clinicId), deviceId) !== null,
    list: ({ clinicId }, deviceId, options) => listCalibrations(ledger.reader(clinicId), deviceId, options),
    find: ({ clinicId }, id, asOf) => findCalibration(ledger.reader(clinicId), id, asOf),
    create: (actor, deviceId, body) => addCalibration(parts, actor, deviceId, body),
    present: ({ clinicId }, deviceId, kept, asOf) =>
      presentCalibrations(ledger.reader(clinicId), deviceId, kept, asOf ?? now().toISOString(), asOf),
  });
}
