import { uuidv7 } from 'uuidv7';
import type { Actor } from '../../http/actor.js';
import { RequestError } from '../../http/request-error.js';
import type { Parts } from '../../parts.js';
import { type ClinicContent, type ClinicRecord, findClinic, insertClinic } from './clinics.store.js';

/** Clinics belong to the installation. Throws: forbidden for keys of a clinic. */
export function assertOfInstallation(actor: Actor): void {
  if (actor.clinicId !== null) throw new RequestError('forbidden', 'Clinics are kept by an administrator of the installation.');
}

export function readClinic({ ledger }: Parts, id: string): ClinicRecord {
  const clinic = findClinic(ledger.reader(null), id);
  if (!clinic) throw new RequestError('not-found', 'There is no such clinic.');
  return clinic;
}

export function openClinic({ ledger }: Parts, actor: Actor, content: ClinicContent): ClinicRecord {
  const id = uuidv7();
  const change = { clinicId: null, actor, kind: 'clinic.opened', subject: id };
  return ledger.change(change, (writer) => insertClinic(writer, id, 1, content));
}

export function changeClinic(
  { ledger }: Parts,
  actor: Actor,
  id: string,
  content: ClinicContent,
  isCurrent: (version: number) => void,
): ClinicRecord {
  return ledger.change({ clinicId: null, actor, kind: 'clinic.changed', subject: id }, (writer) => {
    const known = findClinic(writer, id);
    if (!known) throw new RequestError('not-found', 'There is no such clinic.');
    isCurrent(known.version);
    return insertClinic(writer, id, known.version + 1, content);
  });
}
