import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { openTestService } from '../support/service.js';

let service: Awaited<ReturnType<typeof openTestService>>;
beforeAll(async () => {
  service = await openTestService();
});
afterAll(() => service.close());

describe('GET /v1/tissue-optics', () => {
  it('gives epidermis, dermis and fat with the defaults it filled in', async () => {
    const { body, headers } = await service.get('/v1/tissue-optics?phototype=II&wavelengthNm=585').expect(200);
    expect(body.result.layers.map(({ name }: { name: string }) => name)).toEqual(['epidermis', 'dermis', 'fat']);
    for (const layer of body.result.layers) {
      expect(Object.keys(layer).sort()).toEqual(
        ['absorptionPerCm', 'anisotropy', 'name', 'refractiveIndex', 'scatteringPerCm', 'thicknessUm'].sort(),
      );
    }
    const { melanosomeFraction, melanosomeFractionLow, melanosomeFractionHigh, itaDegrees } = body.result;
    expect(itaDegrees).toBeNull();
    expect(melanosomeFractionHigh / melanosomeFraction).toBeCloseTo(2, 9);
    expect(melanosomeFraction / melanosomeFractionLow).toBeCloseTo(2, 9);
    const named = body.assumptions.map(({ name }: { name: string }) => name);
    expect(named).toEqual(expect.arrayContaining(['skin.bloodFraction', 'skin.anisotropy', 'hemoglobinTable']));
    expect(body.cautions.map(({ code }: { code: string }) => code)).toContain('from-memory');
    expect(headers.etag).toBeTruthy();
    await service.get('/v1/tissue-optics?phototype=II&wavelengthNm=585').set('if-none-match', headers.etag!).expect(304);
  });

  it('takes ITA from L* and b*, with a narrower interval than phototype', async () => {
    const { body } = await service.get('/v1/tissue-optics?lightnessL=60&yellownessB=15&wavelengthNm=755&tan=none').expect(200);
    expect(body.result.itaDegrees).toBeCloseTo(33.69, 2); // Chardon1991
    expect(body.result.melanosomeFractionHigh / body.result.melanosomeFractionLow).toBeLessThan(2);
    expect(body.cautions.map(({ code }: { code: string }) => code)).not.toContain('phototype-weak-evidence');
  });

  it('computes blood by the second hemoglobin table when asked', async () => {
    const path = '/v1/tissue-optics?melanosomeFraction=0.01&bloodFraction=0.05&oxygenSaturationFraction=1&wavelengthNm=694';
    const dermis = async (query: string) =>
      (await service.get(`${path}${query}`).expect(200)).body.result.layers[1].absorptionPerCm;
    expect(await dermis('&hemoglobinTable=zijlstra1991')).toBeGreaterThan(await dermis('&hemoglobinTable=prahl1998'));
  });

  it.each([
    ['phototype=II', '?wavelengthNm'],
    ['phototype=II&wavelengthNm=300', '?wavelengthNm'],
    ['phototype=II&wavelengthNm=420&hemoglobinTable=zijlstra1991', '?wavelengthNm'],
    ['wavelengthNm=585', '?phototype'],
    ['phototype=II&wavelengthNm=585&bloodFraction=2', '?bloodFraction'],
    ['phototype=II&wavelengthNm=585&layers=1', '?layers'],
    ['lightnessL=60&wavelengthNm=585', '?phototype'],
  ])('refuses %s, naming %s', async (query, pointer) => {
    const { body } = await service.get(`/v1/tissue-optics?${query}`).expect(400);
    expect(body.errors.map((fault: { pointer: string }) => fault.pointer)).toEqual([pointer]);
  });

  it('reports every fault at once', async () => {
    const { body } = await service.get('/v1/tissue-optics?phototype=X&wavelengthNm=5&tan=maybe').expect(400);
    expect(body.errors.map((fault: { pointer: string }) => fault.pointer).sort()).toEqual([
      '?phototype',
      '?tan',
      '?wavelengthNm',
    ]);
  });
});
