import { describe, expect, it } from 'vitest';
import { emissionIntervals } from '../../../domain/thermal/emission.js';
import { Excitation } from '../../../domain/thermal/excitation.js';

const rates = Float64Array.of(0, 1e-3, 10, 1e6, 1e12);

describe('excitation of decaying modes', () => {
  it.each([1e-12, 1e-6, 1, 1e3])('is (1 - exp(-rate t)) / (rate t) at the end of a pulse of %d s', (durationS) => {
    const excitation = new Excitation(rates, emissionIntervals({ durationS }), 0);
    excitation.advanceTo(durationS);
    rates.forEach((rate, mode) => {
      const x = rate * durationS;
      expect(excitation.amplitudes[mode]! / (x === 0 ? 1 : -Math.expm1(-x) / x)).toBeCloseTo(1, 10);
    });
  });

  it('is the same in one step as in many', () => {
    const emission = emissionIntervals({ durationS: 1e-3 }, { repetitionRateHz: 100, pulseCount: 3 });
    const whole = new Excitation(rates, emission, 0);
    whole.advanceTo(0.05);
    const stepped = new Excitation(rates, emission, 0);
    for (let i = 1; i <= 500; i++) stepped.advanceTo(i * 1e-4);
    whole.amplitudes.forEach((amplitude, mode) => {
      expect(Math.abs(stepped.amplitudes[mode]! - amplitude)).toBeLessThan(1e-9 * Math.max(amplitude, 1e-9));
    });
    expect(whole.amplitudes[0]).toBeCloseTo(3, 10);
  });

  it('begins in the middle of a pulse with what is left of it', () => {
    const excitation = new Excitation(rates, emissionIntervals({ durationS: 1 }), 0.25);
    excitation.advanceTo(2);
    expect(excitation.amplitudes[0]).toBeCloseTo(0.75, 12);
  });
});
