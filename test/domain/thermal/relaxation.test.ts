import { describe, expect, it } from 'vitest';
import { geometryFactor, halfDecayFactor, relaxationTimeS, stressConfinementTimeS } from '../../../domain/thermal/relaxation.js';

describe('relaxation times', () => {
  it('uses 0.11 mm2/s and the factors 8, 16 and 24 unless told otherwise', () => {
    expect(relaxationTimeS('cylinder', 100)).toBeCloseTo(0.01 / (16 * 0.11), 12);
    expect(geometryFactor).toEqual({ plane: 8, cylinder: 16, sphere: 24 });
  });

  it.each([0, -1, Number.NaN, Number.POSITIVE_INFINITY, 1e6])('refuses a size of %d um', (sizeUm) => {
    expect(() => relaxationTimeS('plane', sizeUm)).toThrowError(expect.objectContaining({ code: 'out-of-range' }));
    expect(() => stressConfinementTimeS(sizeUm, 1500)).toThrowError(expect.objectContaining({ code: 'out-of-range' }));
  });

  it('has a half-decay factor that is the time at which the Gaussian profile has really halved', () => {
    for (const [geometry, dimensions] of [
      ['plane', 1],
      ['cylinder', 2],
      ['sphere', 3],
    ] as const) {
      const timesDiffusivity = 1 / halfDecayFactor(geometry);
      expect((1 + 16 * timesDiffusivity) ** (-dimensions / 2)).toBeCloseTo(0.5, 12);
    }
  });
});
