import { fc, test as property } from '@fast-check/vitest';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { openTestService } from '../support/service.js';

type Service = Awaited<ReturnType<typeof openTestService>>;

const body = { wavelengthNm: 755, pulseEnergyJ: 12, pulse: { durationS: 0.003 }, spot: { shape: 'circle', diameterMm: 10 } };

describe('POST /v1/calculations/fluence and settings', () => {
  let service: Service;
  beforeAll(async () => {
    service = await openTestService();
  });
  afterAll(() => service.close());

  it('gives every field of the contract, and names the defaults', async () => {
    const reply = await service.post('/v1/calculations/fluence', body).expect(200);
    expect(Object.keys(reply.body.result).sort()).toEqual(
      [
        'averagePowerW',
        'cumulativeFluenceJPerCm2',
        'dutyCycleFraction',
        'electricFieldVPerM',
        'fluenceJPerCm2',
        'interactionRegime',
        'irradianceWPerCm2',
        'peakFluenceJPerCm2',
        'peakPowerW',
        'photonEnergyEv',
        'uncertainty',
      ].sort(),
    );
    expect(reply.body.result.fluenceJPerCm2).toBeCloseTo(15.2789, 4);
    expect(reply.body.assumptions.map(({ name }: { name: string }) => name)).toContain('relativeUncertainties.spotDiameter');
  });

  it('counts pulses on one place, and under an overlap the sum of what is covered again', async () => {
    const one = (await service.post('/v1/calculations/fluence', body)).body.result.fluenceJPerCm2;
    const total = async (more: object) =>
      (await service.post('/v1/calculations/fluence', { ...body, ...more }).expect(200)).body.result.cumulativeFluenceJPerCm2 /
      one;
    expect(await total({ pulseCount: 4 })).toBeCloseTo(4, 9);
    expect(await total({ pulseCount: 4, overlapFraction: 0.5 })).toBeCloseTo(1.875, 9);
    expect(await total({ pulseCount: 4, overlapFraction: 0 })).toBeCloseTo(1, 9);
  });

  it('takes the peak of sub-pulses, not their mean', async () => {
    const parts = [0, 0.01].map((startS) => ({ startS, durationS: 0.001, energyFraction: 0.5 }));
    const reply = await service.post('/v1/calculations/fluence', { ...body, pulse: { subPulses: parts } }).expect(200);
    expect(reply.body.result.peakPowerW).toBeCloseTo(6000, 6);
  });

  it('warns of plasma and of the end of the thermal model for a femtosecond pulse', async () => {
    const reply = await service
      .post('/v1/calculations/fluence', {
        wavelengthNm: 800,
        pulseEnergyJ: 6e-3,
        pulse: { durationS: 1.5e-13 },
        spot: { shape: 'circle', diameterMm: 0.06 },
      })
      .expect(200);
    expect(reply.body.result.interactionRegime).toBe('plasma-mediated');
    expect(reply.body.cautions.map(({ code }: { code: string }) => code)).toEqual(
      expect.arrayContaining(['plasma', 'beyond-thermal-model']),
    );
  });

  it.each([
    ['neither energy nor power', { pulseEnergyJ: undefined }, ['/pulseEnergyJ']],
    ['power without rate or time', { pulseEnergyJ: undefined, averagePowerW: 3 }, ['/averagePowerW']],
    ['no pulse', { pulse: undefined }, ['/pulse']],
    ['a pulse longer than its period', { pulse: { durationS: 0.3 }, repetitionRateHz: 5 }, ['/pulse']],
    [
      'negative, string and unknown fields at once',
      { pulseEnergyJ: -1, wavelengthNm: '755', color: 'red' },
      ['/color', '/pulseEnergyJ', '/wavelengthNm'],
    ],
    ['a zero spot', { spot: { shape: 'circle', diameterMm: 0 } }, ['/spot/diameterMm']],
    ['a spot without its shape', { spot: { diameterMm: 5 } }, ['/spot/shape']],
    [
      'sub-pulses that do not sum to 1',
      { pulse: { subPulses: [{ startS: 0, durationS: 1e-3, energyFraction: 0.4 }] } },
      ['/pulse/subPulses'],
    ],
  ])('refuses %s', async (_what, wrong, pointers) => {
    const reply = await service.post('/v1/calculations/fluence', { ...body, ...wrong }).expect(422);
    expect(reply.body.errors.map(({ pointer }: { pointer: string }) => pointer).sort()).toEqual(pointers);
  });

  property.prop(
    [
      fc.double({ min: 0.1, max: 100, noNaN: true }),
      fc.double({ min: 0.5, max: 20, noNaN: true }),
      fc.double({ min: 0.2, max: 1, noNaN: true }),
    ],
    {
      numRuns: 20,
    },
  )('settings is the way back of fluence', async (fluenceJPerCm2, diameterMm, transmissionFraction) => {
    const { pulseEnergyJ: _, ...shared } = {
      ...body,
      spot: { shape: 'circle', diameterMm },
      transmissionFraction,
      calibrationFactor: 0.9,
    };
    const set = (await service.post('/v1/calculations/settings', { ...shared, fluenceJPerCm2 }).expect(200)).body.result;
    const back = (await service.post('/v1/calculations/fluence', { ...shared, pulseEnergyJ: set.pulseEnergyJ }).expect(200)).body
      .result;
    expect(back.fluenceJPerCm2 / fluenceJPerCm2).toBeCloseTo(1, 10);
  });

  it('says when a setting is beyond the device, and refuses an unknown device', async () => {
    const { pulseEnergyJ: _, ...shared } = body;
    const beyond = await service.post('/v1/calculations/settings', { ...shared, fluenceJPerCm2: 50, energyMaxJ: 20 }).expect(200);
    expect(beyond.body.result).toMatchObject({ deliverable: false });
    expect(beyond.body.result.reasons).toHaveLength(1);
    const unknown = await service
      .post('/v1/calculations/settings', { ...shared, fluenceJPerCm2: 5, deviceId: 'nobody' })
      .expect(422);
    expect(unknown.body.errors).toEqual([{ pointer: '/deviceId', detail: 'unknown device nobody' }]);
  });
});
