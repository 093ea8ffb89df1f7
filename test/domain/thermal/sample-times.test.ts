import { describe, expect, it } from 'vitest';
import { emissionIntervals } from '../../../domain/thermal/emission.js';
import { sampleTimesS } from '../../../domain/thermal/sample-times.js';

describe('sample times', () => {
  it.each([1e-12, 1e-9, 1e-3, 0.1, 10])(
    'ascend from 0 through the end of a pulse of %d s to the end of the tail',
    (durationS) => {
      const times = sampleTimesS(emissionIntervals({ durationS }), 10, 56);
      expect(times[0]).toBe(0);
      expect(times).toContain(durationS);
      expect(times[times.length - 1]).toBeCloseTo(durationS + 10, 9);
      times.forEach((timeS, i) => {
        if (i > 0) expect(timeS).toBeGreaterThan(times[i - 1]!);
      });
      expect(times.length).toBeGreaterThan(45);
      expect(times.length).toBeLessThanOrEqual(60);
    },
  );

  it('hold the start and end of each pulse of a train', () => {
    for (const pulseCount of [3, 40]) {
      const emission = emissionIntervals({ durationS: 0.01 }, { repetitionRateHz: 10, pulseCount });
      const times = new Set(sampleTimesS(emission, 5, 56));
      for (const { startS, endS } of emission) {
        expect(times).toContain(startS);
        expect(times).toContain(endS);
      }
    }
  });
});
