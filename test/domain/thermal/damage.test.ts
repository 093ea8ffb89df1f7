import { fc, test } from '@fast-check/vitest';
import { describe, expect, it } from 'vitest';
import {
  cem43Min,
  criticalTemperatureC,
  damageIntegral,
  fluenceForDamage,
  timeToDamageS,
} from '../../../domain/thermal/damage.js';
import { henriques, vesselWall } from './media.js';

const logTimes = (count: number, fromS = 1e-4, toS = 10) => [
  0,
  ...Array.from({ length: count }, (_, i) => fromS * (toS / fromS) ** (i / (count - 1))),
];
const rise = (timeS: number) => (timeS < 1e-3 ? timeS / 1e-3 : Math.sqrt(1e-3 / timeS));

describe('damage integral', () => {
  it('is 1 after the time to damage at constant temperature, and in 1 s at the critical temperature', () => {
    expect(damageIntegral([0, timeToDamageS(henriques, 60)], [60, 60], henriques)).toBeCloseTo(1, 10);
    expect(timeToDamageS(henriques, criticalTemperatureC(henriques))).toBeCloseTo(1, 8);
  });

  it('agrees within 1 % with a fine sum when a linear ramp of 20 K is sampled ten times', () => {
    const at = (i: number, n: number) => 50 + (20 * i) / n;
    const coarse = Array.from({ length: 11 }, (_, i) => i);
    const value = damageIntegral(
      coarse,
      coarse.map((i) => at(i, 10)),
      henriques,
    );
    let fine = 0;
    for (let i = 0; i < 1e5; i++) fine += 1e-4 / timeToDamageS(henriques, at(i + 0.5, 1e5));
    expect(value / fine).toBeCloseTo(1, 2);
  });

  it('does not overflow or underflow', () => {
    expect(damageIntegral([0, 1], [5000, 5000], henriques)).toBeLessThanOrEqual(Number.MAX_VALUE);
    expect(damageIntegral([0, 1], [-270, -270], henriques)).toBe(0);
    expect(damageIntegral([0, 1e-12], [37, 37], henriques)).toBeGreaterThanOrEqual(0);
  });
});

describe('equivalent minutes at 43 C', () => {
  it('integrates a ramp exactly, on either side of 43 C and across it', () => {
    expect(cem43Min([0, 60], [43, 44])).toBeCloseTo(1 / Math.log(2), 12);
    expect(cem43Min([0, 60], [42, 43])).toBeCloseTo(0.75 / Math.log(4), 12);
    expect(cem43Min([0, 120], [42, 44])).toBeCloseTo(1 / Math.log(2) + 0.75 / Math.log(4), 12);
  });
});

describe('equivalent minutes far outside their range', () => {
  it('stay finite', () => {
    for (const ends of [
      [37, 5000],
      [5000, 37],
      [5000, 5000],
      [-200, 9000],
    ])
      expect(cem43Min([0, 1], ends)).toBeLessThanOrEqual(Number.MAX_VALUE);
  });
});

describe('fluence for damage', () => {
  const timesS = logTimes(60);
  const request = { timesS, baselineC: timesS.map(() => 34), responseK: timesS.map((t) => 10 * rise(t)), pair: henriques };

  it.each([henriques, vesselWall])('brings the integral to the asked value (pair %#)', (pair) => {
    for (const target of [1e-3, 0.53, 1, 1e4]) {
      const fluence = fluenceForDamage({ ...request, pair, target })!;
      const reached = damageIntegral(
        timesS,
        timesS.map((_, i) => request.baselineC[i]! + fluence * request.responseK[i]!),
        pair,
      );
      expect(reached / target).toBeCloseTo(1, 3);
    }
  });

  it('scales with the strength of the response over 12 decades', () => {
    const reference = fluenceForDamage({ ...request, maxFluenceJPerCm2: 1e9 })!;
    for (const factor of [1e-6, 1e-3, 1e3, 1e6]) {
      const fluence = fluenceForDamage({
        ...request,
        responseK: request.responseK.map((k) => k * factor),
        maxFluenceJPerCm2: 1e9,
      })!;
      expect((fluence * factor) / reference).toBeCloseTo(1, 6);
    }
  });

  it('is null where the greatest fluence does not suffice or nothing is heated', () => {
    expect(fluenceForDamage({ ...request, maxFluenceJPerCm2: 1 })).toBeNull();
    expect(fluenceForDamage({ ...request, responseK: timesS.map(() => 0) })).toBeNull();
  });

  it('is 0 where the baseline alone does the damage', () => {
    expect(fluenceForDamage({ ...request, baselineC: timesS.map(() => 80) })).toBe(0);
  });

  it('finds the root when cooling is deep and the heated place warms only late', () => {
    const late = timesS.map((t) => Math.exp(-((Math.log10(t) - 0.3) ** 2) / 0.05));
    const fluence = fluenceForDamage({ ...request, baselineC: timesS.map((t) => -20 + 54 * Math.min(1, t)), responseK: late })!;
    const reached = damageIntegral(
      timesS,
      timesS.map((t, i) => -20 + 54 * Math.min(1, t) + fluence * late[i]!),
      henriques,
    );
    expect(reached).toBeCloseTo(1, 3);
  });

  it('needs about five sums over the samples', () => {
    let reads = 0;
    const counted = new Proxy(request.responseK, {
      get: (array, key) => {
        if (key === '0') reads++;
        return Reflect.get(array, key);
      },
    });
    fluenceForDamage({ ...request, responseK: counted });
    expect((reads - 1) / 2).toBeLessThanOrEqual(6); // each sum reads twice, the search for the peak once
  });
});

describe('fluence for damage, any history', () => {
  const history = fc.record({
    riseK: fc.array(fc.double({ min: 0, max: 50, noNaN: true }), { minLength: 12, maxLength: 12 }),
    baseC: fc.array(fc.double({ min: -30, max: 45, noNaN: true }), { minLength: 12, maxLength: 12 }),
    lastS: fc.double({ min: 1e-8, max: 100, noNaN: true }),
    pair: fc.constantFrom(henriques, vesselWall),
  });

  test.prop([history], { numRuns: 300 })(
    'reaches the asked integral, or none up to the greatest fluence does',
    ({ riseK, baseC, lastS, pair }) => {
      const times = riseK.map((_, i) => (lastS * i) / 11);
      const damageAt = (fluence: number) =>
        damageIntegral(
          times,
          baseC.map((base, i) => base + fluence * riseK[i]!),
          pair,
        );
      const fluence = fluenceForDamage({ timesS: times, baselineC: baseC, responseK: riseK, pair });
      if (fluence === null) expect(damageAt(1000)).toBeLessThan(1.001);
      else if (fluence === 0) expect(damageAt(0)).toBeGreaterThan(0.999);
      else {
        expect(damageAt(fluence * 1.001)).toBeGreaterThanOrEqual(1);
        expect(damageAt(fluence * 0.999)).toBeLessThanOrEqual(1);
      }
    },
  );
});
