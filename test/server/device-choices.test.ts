import { afterAll, beforeAll, expect, it } from 'vitest';
import { openTestService } from '../support/service.js';

let service: Awaited<ReturnType<typeof openTestService>>;
let deviceId: string;
beforeAll(async () => {
  service = await openTestService();
  const spots = [{ shape: 'circle', diameterMm: 7 }];
  const device = {
    name: 'Yellow one',
    serial: 'Y-1',
    medium: 'pulsed dye',
    lines: [{ wavelengthNm: 595, pulseMinS: 0.00045, pulseMaxS: 0.04, energyMaxJ: 4, repetitionMaxHz: 1, spots }],
    beamProfile: 'flat-top',
    delivery: 'fiber',
  };
  const reply = await service.post('/v1/devices', device, 'physicist');
  expect(reply.body.errors ?? []).toEqual([]);
  expect(reply.status).toBe(201);
  deviceId = reply.body.item.id;
});
afterAll(() => service.close());

const ranking = {
  skin: { phototype: 'II' },
  target: { kind: 'vessel', diameterUm: 100, depthMm: 0.4 },
  spot: { shape: 'circle', diameterMm: 7 },
  cooling: { kind: 'contact', temperatureC: 5 },
};

it('ranks the lines of a device, and says what it cannot emit', async () => {
  const reply = await service
    .post('/v1/rankings', { ...ranking, candidates: { deviceIds: [deviceId] }, pulseDurationsS: [0.0015, 0.1] })
    .expect(200);
  const { items } = reply.body.result;
  expect(
    items.every((item: { deviceId: string; wavelengthNm: number }) => item.deviceId === deviceId && item.wavelengthNm === 595),
  ).toBe(true);
  expect(items.find((item: { pulseDurationS: number }) => item.pulseDurationS === 0.1).deliverable).toBe(false);
  expect(items.find((item: { pulseDurationS: number }) => item.pulseDurationS === 0.0015).deliverable).toBe(true);
});

it('a device of another clinic is unknown', async () => {
  await service.post('/v1/rankings', { ...ranking, candidates: { deviceIds: [deviceId] } }, 'reader', 'south').expect(422);
});

it('settings knows what the device can do', async () => {
  const ask = async (fluenceJPerCm2: number, more: object = {}) =>
    (
      await service
        .post('/v1/calculations/settings', {
          wavelengthNm: 595,
          spot: ranking.spot,
          pulse: { durationS: 0.0015 },
          fluenceJPerCm2,
          deviceId,
          ...more,
        })
        .expect(200)
    ).body.result;
  expect(await ask(8)).toMatchObject({ deliverable: true, reasons: [] });
  expect((await ask(20)).reasons[0]).toMatch(/^not deliverable: 7\.697 J are needed, the device gives 4 J$/);
  expect((await ask(8, { wavelengthNm: 532 })).reasons).toEqual(['not deliverable: the device does not emit 532 nm']);
});
