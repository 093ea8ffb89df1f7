import type { App } from '../../http/app-type.js';
import { registerVersionedRoutes } from '../../http/versioned-routes.js';
import type { Parts } from '../../parts.js';
import { addDevice, changeDevice, type DeviceBody } from './devices.actions.js';
import { DeviceItem, DeviceRequest } from './devices.schema.js';
import { type DeviceRecord, findDevice, listDevices } from './devices.store.js';

export function registerDevicesRoutes(app: App, parts: Parts): void {
  const { ledger } = parts;
  registerVersionedRoutes<DeviceBody, DeviceRecord>(app, {
    path: '/v1/devices',
    tag: 'devices',
    noun: 'device',
    body: DeviceRequest,
    item: DeviceItem,
    writeRole: 'physicist',
    list: ({ clinicId }, options) => listDevices(ledger.reader(clinicId), options),
    find: ({ clinicId }, id, asOf) => findDevice(ledger.reader(clinicId), id, asOf),
    create: (actor, body) => addDevice(parts, actor, body),
    change: (actor, id, next) => changeDevice(parts, actor, id, next),
    bodyOf: ({ content }) => content,
    present: ({ id, version, recordedAt, content }) => ({ id, version, recordedAt, ...content }),
  });
}
