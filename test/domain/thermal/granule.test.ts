import { describe, expect, it } from 'vitest';
import { emissionIntervals } from '../../../domain/thermal/emission.js';
import { granuleHeatPerCm, granuleRiseK, granuleThresholdJPerCm2 } from '../../../domain/thermal/granule.js';
import { relaxationTimeS } from '../../../domain/thermal/relaxation.js';
import { water } from './media.js';

const granule = { diameterUm: 1, absorptionPerCm: 500, inside: water, outside: water };

describe('absorption of a sphere', () => {
  it('is that of its substance when clear, and that of its cross section when black', () => {
    expect(granuleHeatPerCm(1, 1)).toBeCloseTo(1, 4);
    expect(granuleHeatPerCm(1e8, 10)).toBeCloseTo(1.5 / 10e-4, 0);
    expect(granuleHeatPerCm(0, 1)).toBe(0);
  });

  it('has no step where the series gives way to the closed form', () => {
    expect(granuleHeatPerCm(10.001, 1) / 10.001 / (granuleHeatPerCm(9.999, 1) / 9.999)).toBeCloseTo(1, 6);
  });
});

describe('granule under short and long pulses', () => {
  const threshold = (durationS: number) =>
    granuleThresholdJPerCm2({ granule, emission: emissionIntervals({ durationS }) }, 37, 112);

  it('needs the adiabatic fluence well below its relaxation time, from 1 ps to 10 ns', () => {
    const adiabatic = (75 * 3.846) / granuleHeatPerCm(500, 1);
    for (const durationS of [1e-12, 1e-9, 1e-8]) expect(threshold(durationS) / adiabatic).toBeCloseTo(1, 2);
  });

  it('needs ever more beyond it, so that milliseconds are not selective for it', () => {
    const tau = relaxationTimeS('sphere', 1, 0.13);
    expect(threshold(tau) / threshold(1e-9)).toBeGreaterThan(1.1);
    expect(threshold(1e-3) / threshold(1e-9)).toBeGreaterThan(500);
  });

  it('takes the hottest moment of a train', () => {
    const emission = emissionIntervals({ durationS: 1e-8 }, { repetitionRateHz: 1e6, pulseCount: 3 });
    const [first, , third] = granuleRiseK(
      { granule, emission },
      emission.map((part) => part.endS),
    );
    expect(third!).toBeGreaterThan(first!);
    expect(granuleThresholdJPerCm2({ granule, emission }, 37, 112)).toBeCloseTo(75 / third!, 8);
  });

  it('refuses a threshold below the tissue around it', () => {
    expect(() => granuleThresholdJPerCm2({ granule, emission: emissionIntervals({ durationS: 1e-8 }) }, 37, 20)).toThrowError(
      expect.objectContaining({ code: 'out-of-range' }),
    );
  });
});
