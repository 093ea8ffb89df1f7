import type { App } from '../../http/app-type.js';
import { registerChildRoutes } from '../../http/child-routes.js';
import type { Parts } from '../../parts.js';
import { findDevice } from '../devices/devices.store.js';
import { addService } from './services.actions.js';
import { ServiceItem, ServiceRequest } from './services.schema.js';
import { findService, listServices, type ServiceContent, type ServiceRecord } from './services.store.js';

export function registerServicesRoutes(app: App, parts: Parts): void {
  const { ledger } = parts;
  registerChildRoutes<ServiceContent, ServiceRecord>(app, {
    parentPath: '/v1/devices',
    name: 'services',
    parentNoun: 'device',
    noun: 'service',
    body: ServiceRequest,
    item: ServiceItem,
    writeRole: 'physicist',
    parentExists: ({ clinicId }, deviceId) => findDevice(ledger.reader(clinicId), deviceId) !== null,
    list: ({ clinicId }, deviceId, options) => listServices(ledger.reader(clinicId), deviceId, options),
    find: ({ clinicId }, id, asOf) => findService(ledger.reader(clinicId), id, asOf),
    create: (actor, deviceId, body) => addService(parts, actor, deviceId, body),
    present: (_actor, deviceId, kept) => kept.map(({ id, recordedAt, content }) => ({ id, deviceId, recordedAt, ...content })),
  });
}
