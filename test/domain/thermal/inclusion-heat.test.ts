import { describe, expect, it } from 'vitest';
import { emissionIntervals } from '../../../domain/thermal/emission.js';
import { HeatModes } from '../../../domain/thermal/heat-modes.js';
import { prepareInclusionHeat, radialModes } from '../../../domain/thermal/inclusion-heat.js';
import { cylinderCenterDecay, instantaneousSource, sphereCenterDecay } from './closed-forms.js';
import { alpha, blood, dermis, heatCapacity, water } from './media.js';

const instant = emissionIntervals({ durationS: 1e-12 });
const firstRise = 1e6 / heatCapacity; // of 1 J/cm3
const modes = new HeatModes();

describe.each([
  ['cylinder', cylinderCenterDecay, 2],
  ['sphere', sphereCenterDecay, 3],
] as const)('[Carslaw and Jaeger 1959] heated %s in the same medium', (geometry, decay, dimensions) => {
  it.each([0.2, 1, 10, 50, 500])('cools at the center as the closed form, radius %d um', (radiusUm) => {
    const unit = (radiusUm * 1e-6) ** 2 / alpha;
    const timesS = [1e-3, 0.05, 0.2, 0.5, 1, 3].map((share) => share * unit);
    const { excessK } = prepareInclusionHeat({
      geometry,
      radiusUm,
      inside: water,
      outside: water,
      emission: instant,
      timesS,
      placesRadiusUm: [0],
      modes,
    });
    timesS.forEach((timeS, i) => {
      expect(Math.abs(excessK[i]! / firstRise - decay(radiusUm * 1e-6, timeS, alpha))).toBeLessThan(0.003);
    });
  });

  it('acts from afar as an instantaneous source of its whole heat', () => {
    const radiusUm = 1;
    const measure = dimensions === 2 ? Math.PI * 1e-12 : (4 / 3) * Math.PI * 1e-18;
    const timesS = [1e-3, 5e-3, 1e-2, 0.1];
    const placesRadiusUm = [10, 50];
    const shape = { geometry, radiusUm, inside: water, outside: water } as const;
    const { excessK } = prepareInclusionHeat({ ...shape, emission: instant, timesS, placesRadiusUm, modes });
    placesRadiusUm.forEach((placeUm, place) => {
      const expected = timesS.map((t) => 1e6 * measure * instantaneousSource(dimensions, placeUm * 1e-6, t, alpha, heatCapacity));
      const largest = Math.max(...expected);
      timesS.forEach((_, time) => {
        expect(Math.abs(excessK[place * 4 + time]! - expected[time]!)).toBeLessThan(0.015 * largest);
      });
    });
  });

  it('at the end of a long pulse holds the integral of its cooling', () => {
    const radiusUm = 50;
    const durationS = 0.02;
    const emission = emissionIntervals({ durationS });
    const { excessK } = prepareInclusionHeat({
      geometry,
      radiusUm,
      inside: water,
      outside: water,
      emission,
      timesS: [durationS],
      placesRadiusUm: [0],
      modes,
    });
    let mean = 0;
    for (let i = 0; i < 2000; i++) mean += decay(radiusUm * 1e-6, ((i + 0.5) / 2000) * durationS, alpha) / 2000;
    expect(excessK[0]! / (firstRise * mean)).toBeCloseTo(1, 2);
  });

  it('conserves energy when inside and outside differ', () => {
    const radial = radialModes({ geometry, radiusUm: 40, inside: blood, outside: dermis }, 0.1);
    const timesS = [1e-4, 1e-2, 0.1];
    const placesRadiusUm = [...radial.centersUm];
    const { excessK } = prepareInclusionHeat({
      geometry,
      radiusUm: 40,
      inside: blood,
      outside: dermis,
      emission: instant,
      timesS,
      placesRadiusUm,
    });
    const deposited = 1e6 * (dimensions === 2 ? Math.PI * 40e-6 ** 2 : (4 / 3) * Math.PI * 40e-6 ** 3);
    timesS.forEach((_, time) => {
      const stored = placesRadiusUm.reduce((sum, __, cell) => sum + radial.capacity[cell]! * excessK[cell * 3 + time]!, 0);
      // The parabola at the center replaces the innermost cell's own value.
      expect(stored / deposited).toBeCloseTo(1, 4);
    });
  });
});

describe('inclusion in other surroundings', () => {
  const emission = emissionIntervals({ durationS: 1e-3 });
  const shape = { geometry: 'cylinder', radiusUm: 50, inside: blood, outside: dermis } as const;

  it('has a temperature that falls from center to edge to beyond, the wall catching up later', () => {
    const timesS = [1e-3, 5e-3, 0.05];
    const { excessK } = prepareInclusionHeat({ ...shape, emission, timesS, placesRadiusUm: [0, 50, 100] });
    timesS.forEach((_, time) => {
      expect(excessK[time]!).toBeGreaterThan(excessK[3 + time]!);
      expect(excessK[3 + time]!).toBeGreaterThan(excessK[6 + time]!);
    });
    expect(excessK[7]! / excessK[6]!).toBeGreaterThan(5);
  });

  it('can be heated within a smaller radius, and then holds less heat', () => {
    const timesS = [1e-3, 0.5];
    const whole = prepareInclusionHeat({ ...shape, emission, timesS, placesRadiusUm: [0] }).excessK;
    const core = prepareInclusionHeat({ ...shape, heatedRadiusUm: 25, emission, timesS, placesRadiusUm: [0] }).excessK;
    expect(core[0]! / whole[0]!).toBeGreaterThan(0.5);
    expect(core[1]! / whole[1]!).toBeCloseTo(0.25, 2);
  });

  it('gives the same from shared modes as from its own', () => {
    const request = { ...shape, emission, timesS: [1e-3, 1e-2], placesRadiusUm: [0, 50], modes };
    const first = prepareInclusionHeat(request).excessK;
    expect(prepareInclusionHeat(request).excessK).toEqual(first);
    const { modes: _, ...alone } = request;
    expect(prepareInclusionHeat(alone).excessK).toEqual(first);
  });

  it.each([1e-12, 1e-6, 1, 1000])('is finite from the start to the tail of a pulse of %d s', (durationS) => {
    const timesS = [0, 0.5 * durationS, durationS, 3 * durationS];
    const { excessK } = prepareInclusionHeat({
      ...shape,
      emission: emissionIntervals({ durationS }),
      timesS,
      placesRadiusUm: [0, 50],
    });
    expect(excessK[0]).toBe(0);
    for (const rise of [excessK[1]!, excessK[2]!, excessK[3]!]) expect(rise).toBeGreaterThan(0);
  });

  it('refuses a radius of nothing', () => {
    expect(() => prepareInclusionHeat({ ...shape, radiusUm: 0, emission, timesS: [1], placesRadiusUm: [0] })).toThrowError(
      expect.objectContaining({ code: 'out-of-range' }),
    );
  });
});
