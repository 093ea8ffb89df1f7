import { pino } from 'pino';
import request from 'supertest';
import { openKeyStore } from '../../server/api/keys/keys.store.js';
import { buildApp } from '../../server/app.js';
import { readConfig } from '../../server/config.js';
import { type Role, secretHash } from '../../server/http/actor.js';
import { closeParts, openParts } from '../../server/parts.js';
import { dataFolder } from './data-folder.js';

export const clinics = ['north', 'south'] as const;
export type ClinicName = (typeof clinics)[number];

/** What a caller is: a role, the clinic, and which of two people with that role. */
export interface Caller {
  readonly role: Role;
  readonly clinic?: ClinicName;
  readonly person?: 1 | 2;
}

const secretOf = ({ role, clinic = 'north', person = 1 }: Caller) => `${clinic}-${role}-${person}-secret-0123456789`;

/** The service with two clinics, two keys per role and clinic, and a clock that the test moves. */
export async function openClinics(databaseFile = ':memory:') {
  const clock = { ms: Date.parse('2026-03-01T09:00:00Z') };
  const config = { ...readConfig({ LOG_LEVEL: 'silent' }), databaseFile };
  const parts = openParts({ config, log: pino({ level: 'silent' }), dataFolder, now: () => new Date(clock.ms) });
  const keys = openKeyStore(parts.db);
  const createdAt = '2026-01-01T00:00:00.000Z';
  const addKey = (id: string, clinicId: string | null, role: Role, secret: string) =>
    keys.insert({ id, clinicId, label: id, role, createdAt, revokedAt: null, secretSha256: secretHash(secret) });
  for (const clinic of clinics) {
    parts.db.prepare('INSERT INTO clinics (id, name, created_at) VALUES (?, ?, ?)').run(clinic, clinic, createdAt);
    for (const role of ['reader', 'operator', 'physicist', 'administrator'] as const)
      for (const person of [1, 2] as const)
        addKey(`${clinic}-${role}-${person}`, clinic, role, secretOf({ role, clinic, person }));
  }
  addKey('installation', null, 'administrator', 'installation-secret-0123456789');
  const app = await buildApp(parts);
  const bearer = (caller: Caller | 'installation') =>
    `Bearer ${caller === 'installation' ? 'installation-secret-0123456789' : secretOf(caller)}`;
  const call = (method: 'get' | 'post' | 'put' | 'patch' | 'delete', path: string, caller: Caller | 'installation') =>
    request(app.server)[method](path).set('authorization', bearer(caller));
  return {
    app,
    parts,
    clock,
    call,
    bearer,
    get: (path: string, caller: Caller | 'installation' = { role: 'reader' }) => call('get', path, caller),
    post: (path: string, body: object, caller: Caller | 'installation' = { role: 'physicist' }) =>
      call('post', path, caller).send(body),
    close: async () => {
      await app.close();
      await closeParts(parts);
    },
  };
}

export type Clinics = Awaited<ReturnType<typeof openClinics>>;

export const spot7 = { shape: 'circle', diameterMm: 7 } as const;
/** Area of the 7 mm spot. */
export const area7Cm2 = (Math.PI * 0.49) / 4;

export const dyeLaser = {
  name: 'Dye laser, room 2',
  serial: 'DL-0147',
  medium: 'pulsed dye',
  lines: [
    {
      wavelengthNm: 595,
      pulseMinS: 0.00045,
      pulseMaxS: 0.04,
      energyMaxJ: 8,
      repetitionMaxHz: 1.5,
      spots: [spot7, { shape: 'circle', diameterMm: 10 }],
    },
  ],
  beamProfile: 'flat-top',
  delivery: 'fiber',
  outputToleranceFraction: 0.2,
};

export const meter = {
  name: 'Thermopile 1',
  serial: 'TP-22',
  certificate: 'C-2025-118',
  calibratedUntil: '2027-01-15T00:00:00Z',
  wavelengthMinNm: 400,
  wavelengthMaxNm: 700,
  energyMinJ: 0.01,
  energyMaxJ: 30,
  repetitionMaxHz: 5,
  relativeUncertainty: 0.02,
};

/** A calibration at 8 J/cm2 with a factor. */
export function calibration(factor: number, measuredAt = '2026-02-02T08:00:00Z', more: object = {}) {
  return {
    measuredAt,
    wavelengthNm: 595,
    spot: spot7,
    pulse: { durationS: 0.0015 },
    set: { fluenceJPerCm2: 8 },
    measured: { pulseEnergyJ: 8 * area7Cm2 * factor, relativeUncertainty: 0.02 },
    by: 'LP-1',
    ...more,
  };
}

/** An exposure at 8 J/cm2. */
export function exposure(deviceId: string, externalId: string, more: object = {}) {
  return {
    deviceId,
    externalId,
    at: '2026-02-20T10:00:00+01:00',
    wavelengthNm: 595,
    spot: spot7,
    pulse: { durationS: 0.0015 },
    set: { fluenceJPerCm2: 8 },
    pulseCount: 1,
    ...more,
  };
}

export const course = { subject: 'S-0192', site: 'left cheek', indication: 'telangiectasia' };

export const protocol = {
  name: 'Facial telangiectasia',
  indication: 'telangiectasia',
  envelopes: [{ wavelengthNm: 595, fluenceMaxJPerCm2: 9, pulseMinS: 0.001, pulseMaxS: 0.02, spots: [spot7], stackMaxCount: 1 }],
  effectiveFrom: '2026-01-01T00:00:00Z',
  author: 'LP-1',
};

/** Adds a record and gives its id. */
export async function added(
  clinic: Clinics,
  path: string,
  body: object,
  caller: Caller = { role: 'physicist' },
): Promise<string> {
  const reply = await clinic.post(path, body, caller);
  if (reply.status !== 201) throw new Error(`${path}: ${reply.status} ${JSON.stringify(reply.body)}`);
  return (reply.body as { item: { id: string } }).item.id;
}
