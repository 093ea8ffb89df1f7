import { uuidv7 } from 'uuidv7';
import type { Actor } from '../../http/actor.js';
import type { Parts } from '../../parts.js';
import { restateAlerts } from '../exposures/restate.store.js';
import { insertService, type ServiceContent, type ServiceRecord } from './services.store.js';

/** Closes the calibrations in force at its time, and restates what was exposed since. */
export function addService({ ledger }: Parts, actor: Actor, deviceId: string, content: ServiceContent): ServiceRecord {
  const id = uuidv7();
  return ledger.change({ clinicId: actor.clinicId, actor, kind: 'service.added', subject: id }, (writer) => {
    const service = insertService(writer, id, deviceId, content);
    writer.note({ deviceId, ...restateAlerts(writer, deviceId, service.atMs!) });
    return service;
  });
}
