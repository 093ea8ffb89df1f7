import { randomBytes } from 'node:crypto';
import { uuidv7 } from 'uuidv7';
import type { z } from 'zod';
import { type Actor, secretHash } from '../../http/actor.js';
import { RequestError } from '../../http/request-error.js';
import type { Parts } from '../../parts.js';
import type { KeyRequest } from './keys.schema.js';
import type { KeyRecord, KeyStore } from './keys.store.js';

export type NewKey = KeyRecord & { readonly secret: string };

function store(parts: Parts, keys: KeyStore, record: Omit<KeyRecord, 'id' | 'createdAt' | 'revokedAt'>, secret: string): NewKey {
  const key: KeyRecord = { id: uuidv7(), createdAt: parts.now().toISOString(), revokedAt: null, ...record };
  keys.insert({ ...key, secretSha256: secretHash(secret) });
  return { ...key, secret };
}

const newSecret = (): string => `flk_${randomBytes(32).toString('base64url')}`;

/** The first key of an empty database; null when there are keys already. */
export function makeFirstKey(parts: Parts, keys: KeyStore): NewKey | null {
  if (!keys.isEmpty()) return null;
  return store(
    parts,
    keys,
    { clinicId: null, label: 'first administrator', role: 'administrator' },
    parts.config.adminKey ?? newSecret(),
  );
}

export function makeKey(parts: Parts, keys: KeyStore, actor: Actor, request: z.output<typeof KeyRequest>): NewKey {
  const clinicId = request.clinicId ?? actor.clinicId;
  if (actor.clinicId !== null && clinicId !== actor.clinicId)
    throw new RequestError('forbidden', 'This key makes keys of its own clinic only.');
  if (clinicId !== null && !keys.clinicExists(clinicId)) {
    throw new RequestError('invalid-request', 'There is no such clinic.', [
      { pointer: '/clinicId', detail: 'must be the id of a clinic' },
    ]);
  }
  return store(parts, keys, { clinicId, label: request.label, role: request.role }, newSecret());
}

export function readKey(keys: KeyStore, actor: Actor, id: string): KeyRecord {
  const key = keys.find(id, actor.clinicId);
  if (!key) throw new RequestError('not-found', 'There is no such key.');
  return key;
}

export function revokeKey(parts: Parts, keys: KeyStore, actor: Actor, id: string): void {
  const key = readKey(keys, actor, id);
  if (key.revokedAt !== null) return;
  if (key.role === 'administrator' && keys.administratorsBeside(id) === 0) {
    throw new RequestError('conflict', 'This is the last administrator key here; make another before revoking it.');
  }
  keys.revoke(id, actor.clinicId, parts.now().toISOString());
}
