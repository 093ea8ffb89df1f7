import { pino } from 'pino';
import request from 'supertest';
import { openKeyStore } from '../../server/api/keys/keys.store.js';
import { buildApp } from '../../server/app.js';
import { readConfig } from '../../server/config.js';
import { type Role, secretHash } from '../../server/http/actor.js';
import { closeParts, openParts } from '../../server/parts.js';
import { dataFolder } from './data-folder.js';

/** The whole service on a database in memory with its clock at 1 March 2026, and two clinics with one key per role. */
export async function openTestService(settings: Record<string, string> = {}) {
  const config = { ...readConfig({ LOG_LEVEL: 'silent', ...settings }), databaseFile: ':memory:' };
  const parts = openParts({ config, log: pino({ level: 'silent' }), dataFolder, now: () => new Date('2026-03-01T09:00:00Z') });
  const keys = openKeyStore(parts.db);
  const createdAt = '2026-01-01T00:00:00Z';
  for (const clinicId of ['north', 'south']) {
    parts.db.prepare('INSERT INTO clinics (id, name, created_at) VALUES (?, ?, ?)').run(clinicId, clinicId, createdAt);
    for (const role of ['reader', 'operator', 'physicist', 'administrator'] as const) {
      const id = `${clinicId}-${role}`;
      keys.insert({
        id,
        clinicId,
        label: id,
        role,
        createdAt,
        revokedAt: null,
        secretSha256: secretHash(`${id}-key-0123456789`),
      });
    }
  }
  const app = await buildApp(parts);
  const as = (role: Role, clinic = 'north') => ({ authorization: `Bearer ${clinic}-${role}-key-0123456789` });
  return {
    app,
    parts,
    as,
    get: (path: string, role: Role = 'reader', clinic = 'north') => request(app.server).get(path).set(as(role, clinic)),
    post: (path: string, body: object, role: Role = 'reader', clinic = 'north') =>
      request(app.server).post(path).set(as(role, clinic)).send(body),
    close: async () => {
      await app.close();
      await closeParts(parts);
    },
  };
}
