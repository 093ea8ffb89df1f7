import { describe, expect, it } from 'vitest';
import { emissionEndS, emissionIntervals } from '../../../domain/thermal/emission.js';

const subPulses = [
  { startS: 0, durationS: 1e-3, energyFraction: 0.6 },
  { startS: 2e-3, durationS: 1e-3, energyFraction: 0.4 },
];

describe('emission intervals', () => {
  it('gives one interval for a plain pulse and the sub-pulses in order', () => {
    expect(emissionIntervals({ durationS: 0.01 })).toEqual([{ startS: 0, endS: 0.01, energyFraction: 1 }]);
    const parts = emissionIntervals({ subPulses: [...subPulses].reverse() });
    expect(parts.map((part) => part.energyFraction)).toEqual([0.6, 0.4]);
    expect(emissionEndS(parts)).toBe(3e-3);
  });

  it('repeats the pulse at the period of the train, each with its full energy', () => {
    const parts = emissionIntervals({ subPulses }, { repetitionRateHz: 10, pulseCount: 3 });
    expect(parts).toHaveLength(6);
    expect(parts.reduce((sum, part) => sum + part.energyFraction, 0)).toBeCloseTo(3, 12);
    expect(parts[4]!.startS).toBeCloseTo(0.2, 12);
  });

  it('spreads the middle of a long train evenly and keeps its energy', () => {
    const parts = emissionIntervals({ durationS: 1e-3 }, { repetitionRateHz: 100, pulseCount: 10000 });
    expect(parts).toHaveLength(201);
    expect(parts.reduce((sum, part) => sum + part.energyFraction, 0)).toBe(10000);
    expect(emissionEndS(parts)).toBeCloseTo(99.991, 9);
    parts.forEach((part, i) => {
      if (i > 0) expect(part.startS).toBeGreaterThanOrEqual(parts[i - 1]!.endS);
    });
  });

  it.each([
    ['a pulse longer than the period', { durationS: 0.2 }, { repetitionRateHz: 10, pulseCount: 2 }, 'contradiction'],
    ['no duration', { durationS: 0 }, undefined, 'out-of-range'],
    ['a duration that is no number', { durationS: Number.NaN }, undefined, 'out-of-range'],
    ['half a pulse', { durationS: 0.01 }, { repetitionRateHz: 10, pulseCount: 1.5 }, 'out-of-range'],
    ['a standing train', { durationS: 0.01 }, { repetitionRateHz: 0, pulseCount: 2 }, 'out-of-range'],
    ['overlapping sub-pulses', { subPulses: [subPulses[0]!, { ...subPulses[1]!, startS: 5e-4 }] }, undefined, 'contradiction'],
    ['energy fractions of 0.6 in all', { subPulses: [subPulses[0]!] }, undefined, 'contradiction'],
    ['a negative energy fraction', { subPulses: [{ ...subPulses[0]!, energyFraction: -1 }] }, undefined, 'out-of-range'],
    ['no sub-pulse', { subPulses: [] }, undefined, 'contradiction'],
  ])('refuses %s', (_, pulse, train, code) => {
    expect(() => emissionIntervals(pulse, train)).toThrowError(expect.objectContaining({ code }));
  });
});
