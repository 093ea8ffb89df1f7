import type { Pulse } from '../beam/pulse.js';
import { melanosomeDiameterUm } from '../targets/granule.js';
import { materialOf } from '../targets/target.js';
import { emissionEndS, emissionIntervals } from '../thermal/emission.js';
import { prepareInclusionHeat } from '../thermal/inclusion-heat.js';
import { type LayeredHeat, prepareLayeredHeat } from '../thermal/layered-heat.js';
import { sampleTimesS } from '../thermal/sample-times.js';
import { cautionIfFreezing, coolingPhases } from '../thermal/surface-cooling.js';
import type { ExposureModel, Train } from './exposure-model.js';

/** How one pulse (or train) heats this skin, whatever the wavelength and spot. */
export interface HeatPlan {
  readonly timesS: Float64Array;
  readonly layered: LayeredHeat;
  /** Rise at the center and at the effect radius of the target per J/cm3 absorbed in its heater, by time; null without inclusion. */
  readonly inclusionCenterK: Float64Array | null;
  readonly inclusionEdgeK: Float64Array | null;
  /** Rise of a melanosome per J/cm3 absorbed in it, by time. */
  readonly melanosomeK: Float64Array;
  readonly emissionEndS: number;
}

const tailS = 10; // damage is over long before: tissue 1 mm deep cools in about 2 s
const sampleCount = 40; // thresholds then lie within 0.15 % of those with 600 samples, from 1 ns to 0.3 s

/** Prepares the heat of one pulse or train. */
export function planHeat(model: ExposureModel, pulse: Pulse, train?: Train): HeatPlan {
  const { grid, modes, placesUm, cooling, reference, remarks, target } = model;
  const emission = emissionIntervals(pulse, train);
  const endS = emissionEndS(emission);
  const timesS = sampleTimesS(emission, tailS, sampleCount);
  const phases = coolingPhases(cooling, endS, reference.thermal, remarks, train);
  const layered = prepareLayeredHeat({ grid, phases, emission, timesS, placesUm, modes });
  cautionIfFreezing(layered.coldestSurfaceC, remarks);
  const inclusion = target.inclusion;
  const radial = inclusion
    ? prepareInclusionHeat({
        geometry: inclusion.geometry,
        radiusUm: inclusion.heaterRadiusUm,
        inside: inclusion.heater,
        outside: inclusion.surroundings,
        emission,
        timesS,
        placesRadiusUm: [0, inclusion.effectRadiusUm],
        modes,
      }).excessK
    : null;
  const count = timesS.length;
  const melanosome = prepareInclusionHeat({
    geometry: 'sphere',
    radiusUm: melanosomeDiameterUm / 2,
    inside: materialOf(reference, 'melanosome'),
    outside: materialOf(reference, 'epidermis'),
    emission,
    timesS,
    placesRadiusUm: [0],
    modes,
  }).excessK;
  return {
    timesS,
    layered,
    inclusionCenterK: radial ? radial.subarray(0, count) : null,
    inclusionEdgeK: radial ? radial.subarray(count, 2 * count) : null,
    melanosomeK: melanosome.subarray(0, count),
    emissionEndS: endS,
  };
}
