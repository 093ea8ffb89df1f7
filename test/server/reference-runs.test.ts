import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { pino } from 'pino';
import request from 'supertest';
import { afterAll, afterEach, describe, expect, it } from 'vitest';
import { openKeyStore } from '../../server/api/keys/keys.store.js';
import { buildApp } from '../../server/app.js';
import { readConfig } from '../../server/config.js';
import { secretHash } from '../../server/http/actor.js';
import { closeParts, openParts } from '../../server/parts.js';
import { dataFolder } from '../support/data-folder.js';

const opened: (() => Promise<void>)[] = [];
const folder = mkdtempSync(path.join(tmpdir(), 'reference-runs-'));

afterEach(async () => {
  for (const close of opened.splice(0)) await close();
});

afterAll(() => rmSync(folder, { recursive: true, force: true }));

async function openService(file: string, settings: Record<string, string> = {}) {
  const config = readConfig({
    DATABASE_URL: `file:${path.join(folder, file)}`,
    WORKER_THREADS: '2',
    LOG_LEVEL: 'silent',
    ...settings,
  });
  const parts = openParts({ config, log: pino({ level: 'silent' }), dataFolder, now: () => new Date('2026-03-01T09:00:00Z') });
  const keys = openKeyStore(parts.db);
  if (keys.isEmpty()) {
    for (const clinic of ['north', 'south']) {
      parts.db.prepare('INSERT INTO clinics (id, name, created_at) VALUES (?, ?, ?)').run(clinic, clinic, '2026-01-01T00:00:00Z');
      const secretSha256 = secretHash(`${clinic}-key-0123456789`);
      keys.insert({
        id: clinic,
        clinicId: clinic,
        label: clinic,
        role: 'reader',
        createdAt: '2026-01-01T00:00:00Z',
        revokedAt: null,
        secretSha256,
      });
    }
  }
  const app = await buildApp(parts);
  let open = true;
  const close = async () => {
    if (!open) return;
    open = false;
    await app.close();
    await closeParts(parts);
  };
  opened.push(close);
  const as = (clinic: string) => ({ authorization: `Bearer ${clinic}-key-0123456789` });
  const start = (body: object, clinic = 'north') => request(app.server).post('/v1/reference-runs').set(as(clinic)).send(body);
  const read = (id: string, clinic = 'north') => request(app.server).get(`/v1/reference-runs/${id}`).set(as(clinic));
  const ended = async (id: string) => {
    for (;;) {
      const { item } = (await read(id)).body;
      if (!['queued', 'running'].includes(item.status)) return item;
      await new Promise((resolve) => setTimeout(resolve, 20));
    }
  };
  return { app, parts, close, as, start, read, ended };
}

const layers = [
  { thicknessUm: 60, absorptionPerCm: 20, scatteringPerCm: 400, anisotropy: 0.8, refractiveIndex: 1.4 },
  { thicknessUm: 5000, absorptionPerCm: 1, scatteringPerCm: 200, anisotropy: 0.8, refractiveIndex: 1.4 },
];
const quick = { skin: { layers }, spot: { shape: 'circle', diameterMm: 5 }, depthsMm: [0.06, 0.5], photons: 8000, seed: 4 };
const endless = { ...quick, photons: 1_000_000_000, maxSeconds: 3600 };

describe('reference runs', () => {
  it('answer a light request with standard errors beside the fast answer, and are kept', async () => {
    const { start, ended, close } = await openService('answer.sqlite');
    const accepted = await start(quick).expect(202);
    const { id } = accepted.body.item;
    expect(accepted.headers.location).toBe(`/v1/reference-runs/${id}`);
    expect(accepted.headers['clinical-banner']).toBe('licensed clinical judgment governs');
    const item = await ended(id);
    expect(item.status).toBe('done');
    expect(item.progressFraction).toBe(1);
    const { result } = item;
    expect(result.photons).toBe(8000);
    expect(result.stoppedBy).toBe('photons');
    expect(Math.abs(result.energyBalanceError)).toBeLessThan(1e-10);
    for (const i of [0, 1]) {
      const { fluenceRatios, fastFluenceRatios, standardErrors, differencesInStandardErrors } = result;
      expect(Math.abs(differencesInStandardErrors[i])).toBeLessThan(6);
      expect((fluenceRatios[i] - fastFluenceRatios[i]) / standardErrors[i]).toBeCloseTo(differencesInStandardErrors[i], 9);
    }
    expect(result.abandonedFraction).toBe(0);
    expect(item.provenance.seed).toBe(4);
    await close();
    const again = await openService('answer.sqlite');
    expect((await again.read(id).expect(200)).body.item.result).toEqual(result);
  });

  it('take skin by its pigmentation and a measured beam, and stop at the standard error asked for', async () => {
    const { start, ended } = await openService('skin.sqlite');
    const body = {
      skin: { phototype: 'III' },
      wavelengthNm: 595,
      measuredProfile: { radiiMm: [0, 2, 4], relativeIrradiances: [1, 0.8, 0] },
      depthsMm: [0.3],
      standardErrorTarget: 0.05,
    };
    const item = await ended((await start(body).expect(202)).body.item.id);
    expect(item.result.stoppedBy).toBe('standard-error');
    expect(item.result.standardErrors[0] / item.result.fluenceRatios[0]).toBeLessThanOrEqual(0.05);
    expect(item.result.layerAbsorbedFractions.map(({ name }: { name: string }) => name)).toEqual(['epidermis', 'dermis', 'fat']);
    expect(item.assumptions.length).toBeGreaterThan(0);
  });

  it('are cancelled by DELETE, once; a finished run cannot be', async () => {
    const { app, as, start, read, ended } = await openService('cancel.sqlite');
    const { id } = (await start(endless).expect(202)).body.item;
    const cancel = (run: string) => request(app.server).delete(`/v1/reference-runs/${run}`).set(as('north'));
    expect((await cancel(id).expect(200)).body.item.status).toBe('cancelled');
    expect((await cancel(id).expect(200)).body.item.status).toBe('cancelled');
    const done = (await start(quick).expect(202)).body.item.id;
    await ended(done);
    expect((await cancel(done).expect(409)).body.type).toBe('/problems/conflict');
    expect((await read(id)).body.item.result).toBeUndefined();
  });

  it('wait in a bounded queue: 503 with Retry-After when it is full, and nothing of the refused run is kept', async () => {
    const { app, as, start } = await openService('full.sqlite', { REFERENCE_RUN_QUEUE: '1' });
    const running = (await start(endless).expect(202)).body.item.id;
    const waiting = (await start(endless).expect(202)).body.item.id;
    const refused = await start(endless).expect(503);
    expect(refused.headers['retry-after']).toBeDefined();
    expect(refused.body.type).toBe('/problems/busy');
    const list = await request(app.server).get('/v1/reference-runs').set(as('north')).expect(200);
    expect(list.body.items.map(({ id }: { id: string }) => id)).toEqual([waiting, running]);
  });

  it('belong to one clinic, and come in pages', async () => {
    const { app, as, start, read, ended } = await openService('clinics.sqlite');
    const ids: string[] = [];
    for (let i = 0; i < 3; i++) ids.push((await start(quick).expect(202)).body.item.id);
    const foreign = (await start(quick, 'south').expect(202)).body.item.id;
    await read(foreign).expect(404);
    await request(app.server).delete(`/v1/reference-runs/${foreign}`).set(as('north')).expect(404);
    const first = await request(app.server).get('/v1/reference-runs?limit=2').set(as('north')).expect(200);
    const second = await request(app.server)
      .get(`/v1/reference-runs?limit=2&cursor=${first.body.next}`)
      .set(as('north'))
      .expect(200);
    expect([...first.body.items, ...second.body.items].map(({ id }: { id: string }) => id)).toEqual(ids.toReversed());
    expect(second.body.next).toBeNull();
    for (const id of ids)
      expect((await ended(id)).result).toEqual({ ...(await ended(ids[0]!)).result, elapsedS: expect.any(Number) });
  });

  it('go on after a restart from what was saved, to the same bytes as a run without one', async () => {
    const longer = { ...quick, photons: 100_000, depthsMm: [0.06] };
    const first = await openService('restart.sqlite');
    const { id } = (await first.start(longer).expect(202)).body.item;
    const later = (await first.start(quick).expect(202)).body.item.id;
    while ((await first.read(id)).body.item.photonsDone === 0) await new Promise((resolve) => setTimeout(resolve, 5));
    await first.close();

    const second = await openService('restart.sqlite');
    const taken = (await second.read(id)).body.item;
    expect(taken.photonsDone).toBeGreaterThan(0);
    const resumed = await second.ended(id);
    expect(resumed.status).toBe('done');
    expect((await second.ended(later)).status).toBe('done');
    const straight = await second.ended((await second.start(longer).expect(202)).body.item.id);
    expect({ ...resumed.result, elapsedS: 0 }).toEqual({ ...straight.result, elapsedS: 0 });
  });

  it('need a key, take an Idempotency-Key, show a version, and know no other query parameters', async () => {
    const { app, as, start, read } = await openService('manners.sqlite');
    await request(app.server).post('/v1/reference-runs').send(quick).expect(401);
    const first = await start(quick).set('idempotency-key', 'one').expect(202);
    const again = await start(quick).set('idempotency-key', 'one').expect(202);
    expect(again.body.item.id).toBe(first.body.item.id);
    await start({ ...quick, seed: 5 })
      .set('idempotency-key', 'one')
      .expect(422);
    expect((await read(first.body.item.id)).headers.etag).toBeDefined();
    await request(app.server).get('/v1/reference-runs?state=done').set(as('north')).expect(400);
    await read('no-such-run').expect(404);
  });

  it('refuse what cannot be run, every fault at once', async () => {
    const { start } = await openService('refuse.sqlite');
    const faults = async (body: object) =>
      (await start(body).expect(422)).body.errors.map(({ pointer }: { pointer: string }) => pointer).sort();
    expect(await faults({ ...quick, photons: 10, extra: 1, depthsMm: [] })).toEqual(['/depthsMm', '/extra', '/photons']);
    expect(await faults({ ...quick, broadBeam: true })).toEqual(['']);
    expect(await faults({ ...quick, wavelengthNm: 595 })).toEqual(['/wavelengthNm']);
    expect(await faults({ ...quick, standardErrorTarget: 0.01 })).toEqual(['/standardErrorTarget']);
    const profile = { radiiMm: [0, 2, 1], relativeIrradiances: [1, 0.5] };
    expect(await faults({ ...quick, spot: undefined, measuredProfile: profile })).toContain('/measuredProfile/radiiMm');
    expect((await start({ ...quick, depthsMm: [50] }).expect(422)).body.detail).toMatch(/depth/);
  });
});
