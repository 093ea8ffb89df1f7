import { describe, expect, it } from 'vitest';
import { fullThicknessDamage } from '../../domain/thermal/damage.js';
import { solvers } from './solvers/damage.js';
import { solvers as thresholds } from './solvers/damage-thresholds.js';
import { therapeuticRatio } from './solvers/relaxation.js';

const henriques = { frequencyFactorPerS: 3.1e98, activationK: 75000 };

/** Published figures that the model does not meet. Each test fails as written, and is kept so that a change is noticed. */
describe('known misses', () => {
  // A damage integral of 1e4 at the basal layer takes about 1e4 times as long as one of 1 at constant temperature; the published
  // times to a third-degree burn are hardly twice those to a second-degree one. The criterion serves short, hot exposures alone.
  it.fails.each([
    [60, 5],
    [55, 30],
    [49, 600],
  ])(
    '[Moritz and Henriques 1947] water at %d C burns in the third degree within a factor of 2 of %d s',
    (temperatureC, seconds) => {
      const found = solvers['hot-water time to a burn']!({ ...henriques, temperatureC, damage: fullThicknessDamage });
      expect(Math.abs(Math.log2(found / seconds))).toBeLessThan(1);
    },
  );

  // With evenly heated blood and one rate process the shorter pulse needs less in every vessel; what speaks against it in large ones
  // is rupture instead of coagulation, which a rate process does not tell apart.
  it.fails('[Nelson et al 1995] 10 ms ranks above 0.45 ms for a vessel of 150 um', () => {
    const vessel = { diameterUm: 150, epidermisPerCm: 10, bloodPerCm: 150 };
    expect(therapeuticRatio(0.01, vessel)).toBeGreaterThan(therapeuticRatio(0.00045, vessel));
  });

  // Small vessels close at less than their wall needs; blood that has coagulated blocks them before the wall is damaged.
  it.fails('[Kimel et al 1994] a vessel of 40 um closes within a factor of 1.5 of 3 J/cm2', () => {
    const wall = thresholds['fluence that coagulates the wall of a vessel']!;
    expect(wall({ absorptionPerCm: 187, durationS: 4.5e-4, diameterUm: 40 }) / 3).toBeLessThan(1.5);
  });
});
