import { afterAll, beforeAll, expect, it } from 'vitest';
import { openTestService } from '../support/service.js';

let service: Awaited<ReturnType<typeof openTestService>>;
beforeAll(async () => {
  service = await openTestService();
});
afterAll(() => service.close());

const body = {
  skin: { phototype: 'II' },
  target: { kind: 'vessel', diameterUm: 100, depthMm: 0.4 },
  wavelengthNm: 585,
  spot: { shape: 'circle', diameterMm: 7 },
  pulse: { durationS: 0.0015 },
  cooling: { kind: 'contact', temperatureC: 5 },
};

it('climbs from the stated fraction of the lower bound to the margin, never above it', async () => {
  const reply = await service.post('/v1/calculations/test-ladder', { ...body, firstFraction: 0.3, steps: 5 }).expect(200);
  const { steps, epidermalLimitLowJPerCm2: low, endPoints, stopRules, waitS } = reply.body.result;
  const fractions = steps.map((step: { fractionOfLimit: number }) => step.fractionOfLimit);
  expect(fractions).toEqual([...fractions].sort((a, b) => a - b));
  expect(fractions[0]).toBeCloseTo(0.3, 12);
  expect(fractions.at(-1)).toBeCloseTo(0.8, 12);
  for (const step of steps) expect(step.fluenceJPerCm2).toBeCloseTo(step.fractionOfLimit * low, 9);
  const window = (await service.post('/v1/calculations/window', body)).body.result;
  expect(low).toBeLessThan(window.epidermalLimitJPerCm2);
  expect(endPoints.length).toBeGreaterThan(0);
  expect(stopRules.length).toBeGreaterThan(2);
  expect(waitS).toBe(600);
});

it('waits for weeks in dark skin, and says when the end point lies beyond the ladder', async () => {
  const reply = await service
    .post('/v1/calculations/test-ladder', {
      ...body,
      skin: { phototype: 'VI' },
      target: { kind: 'vessel', diameterUm: 1000, depthMm: 2 },
    })
    .expect(200);
  expect(reply.body.result.waitS).toBe(14 * 24 * 3600);
  expect(reply.body.cautions.map(({ code }: { code: string }) => code)).toContain('end-point-beyond-ladder');
});

it('refuses a first step above the margin', async () => {
  const reply = await service.post('/v1/calculations/test-ladder', { ...body, firstFraction: 0.9 }).expect(422);
  expect(reply.body.errors[0].pointer).toBe('/firstFraction');
});
