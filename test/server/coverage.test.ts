import { afterAll, beforeAll, expect, it } from 'vitest';
import { openTestService } from '../support/service.js';

let service: Awaited<ReturnType<typeof openTestService>>;
beforeAll(async () => {
  service = await openTestService();
});
afterAll(() => service.close());

const body = { spot: { shape: 'circle', diameterMm: 10 }, pattern: 'hexagonal', area: { widthMm: 100, heightMm: 100 } };
const cover = async (more: object) =>
  (await service.post('/v1/calculations/coverage', { ...body, ...more }).expect(200)).body.result;

it.each([
  [8, 0.104],
  [5, 0.391],
  [10, 0],
  [0.0001 + 1, 0.873],
])('[geometry] circles of 10 mm at %d mm overlap by %d of a spot', async (spacingMm, fraction) => {
  expect((await cover({ spacingMm })).neighborOverlapFraction).toBeCloseTo(fraction, 3);
});

it('[geometry] the gap-free hexagonal pattern wastes 17.3 % of the pulses, 20.9 % over the target', async () => {
  const result = await cover({ spacingMm: 10 * (Math.sqrt(3) / 2) });
  expect(result.uncoveredFraction).toBe(0);
  expect(1 - 1 / result.meanPulsesPerPoint).toBeCloseTo(0.173, 3);
  expect(result.meanPulsesPerPoint - 1).toBeCloseTo(0.209, 3);
});

it('[geometry] touching circles leave 9.3 % in a hexagonal and 21.5 % in a square pattern', async () => {
  expect((await cover({ spacingMm: 10 })).uncoveredFraction).toBeCloseTo(1 - Math.PI / Math.sqrt(12), 2);
  expect((await cover({ spacingMm: 10, pattern: 'square' })).uncoveredFraction).toBeCloseTo(1 - Math.PI / 4, 2);
});

it('[Poisson] random pulses whose area equals the field leave 36.8 % uncovered', async () => {
  const pulseCount = Math.round(10_000 / (25 * Math.PI));
  const result = await cover({ pattern: 'random', pulseCount });
  expect(result.uncoveredFraction).toBeCloseTo(Math.exp(-1), 2);
});

it('squares set edge to edge cover all once', async () => {
  const result = await cover({ spot: { shape: 'square', widthMm: 9 }, pattern: 'square', spacingMm: 9 });
  expect(result).toMatchObject({ uncoveredFraction: 0, doubleCoveredFraction: 0, meanPulsesPerPoint: 1 });
});

it.each([
  [{}, ['/spacingMm']],
  [{ pattern: 'random', spacingMm: 5 }, ['/pulseCount']],
  [{ spacingMm: 5, spot: { shape: 'square', widthMm: 9 } }, ['/pattern']],
])('refuses %j', async (more, pointers) => {
  const reply = await service.post('/v1/calculations/coverage', { ...body, ...more }).expect(422);
  expect(reply.body.errors.map(({ pointer }: { pointer: string }) => pointer)).toEqual(pointers);
});
