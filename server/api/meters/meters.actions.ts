import { uuidv7 } from 'uuidv7';
import type { Actor } from '../../http/actor.js';
import type { Parts } from '../../parts.js';
import { findMeter, insertMeter, type MeterContent, type MeterRecord } from './meters.store.js';

export function addMeter({ ledger }: Parts, actor: Actor, content: MeterContent): MeterRecord {
  const id = uuidv7();
  const change = { clinicId: actor.clinicId, actor, kind: 'meter.added', subject: id };
  return ledger.change(change, (writer) => insertMeter(writer, id, 1, content));
}

export function changeMeter(
  { ledger }: Parts,
  actor: Actor,
  id: string,
  next: (known: MeterRecord) => MeterContent,
): MeterRecord | null {
  return ledger.change({ clinicId: actor.clinicId, actor, kind: 'meter.changed', subject: id }, (writer) => {
    const known = findMeter(writer, id);
    return known && insertMeter(writer, id, known.version + 1, next(known));
  });
}
