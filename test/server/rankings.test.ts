import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { openTestService } from '../support/service.js';

type Service = Awaited<ReturnType<typeof openTestService>>;

const body = {
  skin: { phototype: 'II' },
  target: { kind: 'vessel', diameterUm: 100, depthMm: 0.4 },
  spot: { shape: 'circle', diameterMm: 7 },
  cooling: { kind: 'contact', temperatureC: 5 },
  candidates: { wavelengthsNm: [532, 585, 595, 755, 1064] },
  pulseDurationsS: [0.0015, 0.01],
  asOf: '2026-03-01T09:30:00+01:00',
};

describe('POST /v1/rankings', () => {
  let service: Service;
  beforeAll(async () => {
    service = await openTestService();
  });
  afterAll(() => service.close());

  it('ranks every combination, best first, and says what it rests on', async () => {
    const reply = await service.post('/v1/rankings', body).expect(200);
    const { result, provenance, cautions, assumptions } = reply.body;
    expect(result.considered).toBe(10);
    expect(result.items.map((item: { rank: number }) => item.rank)).toEqual([1, 2, 3, 4, 5, 6, 7, 8, 9, 10]);
    expect(result.best).toEqual(result.items[0]);
    const ratios = result.items.map((item: { therapeuticRatio: number }) => item.therapeuticRatio);
    expect(ratios).toEqual([...ratios].sort((a, b) => b - a));
    expect(result.rejected).toBe(ratios.filter((ratio: number) => ratio <= 1).length);
    expect(provenance.asOf).toBe(body.asOf);
    expect(cautions.map((caution: { code: string }) => caution.code)).toContain('test-patch-first');
    expect(assumptions.map((assumption: { name: string }) => assumption.name)).toContain('skin.melanosomeFraction');
  });

  it('gives the same bytes for the same request and time, samples included', async () => {
    const sampled = { ...body, samples: 32, seed: 5 };
    const [first, second] = [await service.post('/v1/rankings', sampled), await service.post('/v1/rankings', sampled)];
    expect(second.text).toBe(first.text);
    expect(first.body.provenance.seed).toBe(5);
  });

  it('orders by the probability of a window when it samples, and names the inputs that dominate', async () => {
    const reply = await service.post('/v1/rankings', { ...body, samples: 64 }).expect(200);
    const { items } = reply.body.result;
    const chances = items.map((item: { probabilityOfWindow: number }) => item.probabilityOfWindow);
    expect(chances).toEqual([...chances].sort((a, b) => b - a));
    expect(items[0].dominantInputs[0].varianceFraction).toBeGreaterThan(0.2);
    const [low, middle, high] = items[0].epidermalLimitQuantilesJPerCm2;
    expect(low).toBeLessThan(middle);
    expect(middle).toBeLessThan(high);
  });

  it('widens the quantiles when pigmentation is only a phototype', async () => {
    const width = async (skin: object) => {
      const reply = await service.post('/v1/rankings', {
        ...body,
        skin,
        samples: 128,
        candidates: { wavelengthsNm: [585] },
        pulseDurationsS: [0.0015],
      });
      const [low, , high] = reply.body.result.items[0].epidermalLimitQuantilesJPerCm2;
      return high / low;
    };
    expect(await width({ phototype: 'II' })).toBeGreaterThan(1.2 * (await width({ melanosomeFraction: 0.008 })));
  });

  it('ranks all laser media with pulses inside what they emit', async () => {
    const { pulseDurationsS: _, ...open } = body;
    const reply = await service.post('/v1/rankings', { ...open, candidates: { media: 'all' }, limit: 500 }).expect(200);
    expect(
      reply.body.result.items.every(
        (item: { deliverable: boolean; medium?: string }) => item.medium !== undefined && item.deliverable,
      ),
    ).toBe(true);
  });

  it('puts wavelengths beyond the tables last, with the reason', async () => {
    const reply = await service.post('/v1/rankings', { ...body, candidates: { wavelengthsNm: [193, 585] } }).expect(200);
    const last = reply.body.result.items.at(-1);
    expect(last).toMatchObject({ wavelengthNm: 193, targetThresholdJPerCm2: null });
    expect(last.reasons[0]).toMatch(/193/);
  });

  it('marks pulse durations that a medium does not emit as not deliverable', async () => {
    const reply = await service.post('/v1/rankings', {
      ...body,
      candidates: { media: 'all' },
      pulseDurationsS: [0.0015],
      limit: 500,
    });
    const ruby = reply.body.result.items.find(
      (item: { medium?: string; deliverable: boolean }) => item.medium === 'ruby' && !item.deliverable,
    );
    expect(ruby.reasons.at(-1)).toMatch(/^not deliverable: the line emits pulses of/);
  });

  it.each([
    ['no pigment form', { ...body, skin: {} }, ['/skin']],
    ['two pigment forms', { ...body, skin: { phototype: 'II', itaDegrees: 40 } }, ['/skin']],
    ['spot and spots', { ...body, spots: [body.spot] }, ['/spot']],
    ['no candidates', { ...body, candidates: {} }, ['/candidates']],
    ['a string for a number', { ...body, target: { kind: 'vessel', diameterUm: '100', depthMm: 0.4 } }, ['/target/diameterUm']],
    [
      'several faults at once',
      { ...body, safetyFactor: 0, x: 1, spot: { shape: 'circle', diameterMm: -7 } },
      ['/safetyFactor', '/spot/diameterMm', '/x'],
    ],
    [
      'too many candidates',
      {
        ...body,
        candidates: { wavelengthsNm: { fromNm: 400, toNm: 1100, stepNm: 0.5 } },
        pulseDurationsS: { fromS: 0.001, toS: 0.1, count: 30 },
      },
      ['/candidates'],
    ],
    ['an unknown device', { ...body, candidates: { deviceIds: ['nobody'] } }, ['/candidates/deviceIds/0']],
  ])('refuses %s', async (_what, wrong, pointers) => {
    const reply = await service
      .post('/v1/rankings', wrong)
      .expect(422)
      .expect('content-type', /problem\+json/);
    expect(reply.body.errors.map((fault: { pointer: string }) => fault.pointer).sort()).toEqual([...pointers].sort());
  });
});

describe('POST /v1/calculations/window, heating and light', () => {
  let service: Service;
  beforeAll(async () => {
    service = await openTestService();
  });
  afterAll(() => service.close());
  const setting = {
    skin: { phototype: 'II' },
    target: body.target,
    wavelengthNm: 585,
    spot: body.spot,
    pulse: { durationS: 0.0015 },
    cooling: body.cooling,
  };

  it('the fluence at the threshold brings the damage integral at the vessel wall to 1', async () => {
    const window = (await service.post('/v1/calculations/window', setting).expect(200)).body.result;
    const reply = await service
      .post('/v1/calculations/heating', { ...setting, fluenceJPerCm2: window.targetThresholdJPerCm2 })
      .expect(200);
    const edge = reply.body.result.places.find((place: { place: string }) => place.place === 'target-edge');
    expect(edge.damageIntegral).toBeCloseTo(1, 2);
    expect(edge.temperaturesC).toHaveLength(reply.body.result.timesS.length);
    expect(edge.peakC).toBe(Math.max(...edge.temperaturesC));
  });

  it('the fluence at the limit brings the place that ends it to a damage integral of 1', async () => {
    const window = (await service.post('/v1/calculations/window', setting)).body.result;
    expect(['basal-layer', 'surface']).toContain(window.limitedBy);
    const reply = await service.post('/v1/calculations/heating', { ...setting, fluenceJPerCm2: window.epidermalLimitJPerCm2 });
    const place = reply.body.result.places.find((one: { place: string }) => one.place === window.limitedBy);
    expect(place.damageIntegral).toBeCloseTo(1, 2);
  });

  it('sub-pulses with gaps heat the epidermis less than one short pulse of the same energy', async () => {
    const peak = async (pulse: object) => {
      const reply = await service.post('/v1/calculations/heating', { ...setting, pulse, fluenceJPerCm2: 5 }).expect(200);
      return reply.body.result.places.find((place: { place: string }) => place.place === 'basal-layer').peakC;
    };
    const four = [0, 6, 12, 18].map((ms) => ({ startS: ms / 1000, durationS: 0.002, energyFraction: 0.25 }));
    expect(await peak({ subPulses: four })).toBeLessThan(await peak({ durationS: 0.002 }));
  });

  it('stacked pulses lower the threshold per pulse and carry a caution', async () => {
    const one = (await service.post('/v1/calculations/window', setting)).body.result;
    const reply = await service.post('/v1/calculations/window', { ...setting, repetitionRateHz: 1.5, pulseCount: 4 }).expect(200);
    expect(reply.body.result.targetThresholdJPerCm2).toBeLessThan(one.targetThresholdJPerCm2);
    expect(reply.body.cautions.map((caution: { code: string }) => caution.code)).toContain('stacked-pulses');
  });

  it('a pulse longer than the period, and a train without a rate, are faults', async () => {
    const long = await service
      .post('/v1/calculations/window', { ...setting, pulse: { durationS: 0.2 }, repetitionRateHz: 10, pulseCount: 3 })
      .expect(422);
    expect(long.body.errors[0].pointer).toBe('/pulse');
    const bare = await service.post('/v1/calculations/window', { ...setting, pulseCount: 3 }).expect(422);
    expect(bare.body.errors[0].pointer).toBe('/repetitionRateHz');
  });

  it('light: energy balances in thick layers, explicit layers stand alone, faults are told', async () => {
    const layer = { thicknessUm: 1e6, absorptionPerCm: 1, scatteringPerCm: 100, anisotropy: 0.8, refractiveIndex: 1.4 };
    const reply = await service
      .post('/v1/calculations/light', { skin: { layers: [layer] }, broadBeam: true, depthsMm: [0.5] })
      .expect(200);
    expect(reply.body.result.fluenceRatios[0]).toBeCloseTo(3.2848, 2); // computed by adding-doubling, equation of transfer
    const wrong = await service
      .post('/v1/calculations/light', { skin: { layers: [{ ...layer, thicknessUm: 0 }] }, wavelengthNm: 500, depthsMm: [] })
      .expect(422);
    expect(wrong.body.errors.map((fault: { pointer: string }) => fault.pointer).sort()).toEqual([
      '/depthsMm',
      '/skin/layers/0/thicknessUm',
      '/spot',
      '/wavelengthNm',
    ]);
  });

  it('light fields are kept: the second ranking of the same skin solves nothing', async () => {
    await service.post('/v1/rankings', body);
    const before = service.parts.lightFields.missCount;
    await service.post('/v1/rankings', {
      ...body,
      pulseDurationsS: [0.003],
      target: { kind: 'vessel', diameterUm: 60, depthMm: 0.2 },
    });
    expect(service.parts.lightFields.missCount).toBe(before);
    const metrics = await service.get('/metrics').set('accept', 'text/plain').expect(200);
    expect(metrics.text).toMatch(/light_field_hits_total \d+/);
  });
});
