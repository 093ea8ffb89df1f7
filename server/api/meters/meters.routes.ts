import type { App } from '../../http/app-type.js';
import { registerVersionedRoutes } from '../../http/versioned-routes.js';
import type { Parts } from '../../parts.js';
import { addMeter, changeMeter } from './meters.actions.js';
import { MeterItem, MeterRequest } from './meters.schema.js';
import { findMeter, listMeters, type MeterContent, type MeterRecord } from './meters.store.js';

export function registerMetersRoutes(app: App, parts: Parts): void {
  const { ledger } = parts;
  registerVersionedRoutes<MeterContent, MeterRecord>(app, {
    path: '/v1/meters',
    tag: 'meters',
    noun: 'meter',
    body: MeterRequest,
    item: MeterItem,
    writeRole: 'physicist',
    list: ({ clinicId }, options) => listMeters(ledger.reader(clinicId), options),
    find: ({ clinicId }, id, asOf) => findMeter(ledger.reader(clinicId), id, asOf),
    create: (actor, body) => addMeter(parts, actor, body),
    change: (actor, id, next) => changeMeter(parts, actor, id, next),
    bodyOf: ({ content }) => content,
    present: ({ id, version, recordedAt, content }) => ({ id, version, recordedAt, ...content }),
  });
}
