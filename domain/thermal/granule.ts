import { assertWithin } from '../quantities/errors.js';
import type { EmissionInterval } from './emission.js';
import type { HeatModes } from './heat-modes.js';
import { prepareInclusionHeat } from './inclusion-heat.js';
import type { ThermalMaterial } from './thermal-figures.js';

/** A small absorbing sphere in tissue: melanosome, ink or carbon particle. */
export interface Granule {
  readonly diameterUm: number;
  /** Absorption coefficient of its inside. */
  readonly absorptionPerCm: number;
  readonly inside: ThermalMaterial;
  readonly outside: ThermalMaterial;
}

/** Mean heat per volume in a sphere per fluence around it (1/cm), for straight rays: the absorbed share of the light on its cross
 *  section over its volume. Tends to the absorption coefficient when the sphere is clear, to 3 / (2 diameter) when it is black.
 *  Letters: x = mu_a d; efficiency Q = 1 - 2 (1 - (1 + x) exp(-x)) / x^2. Valid: spheres larger than the wavelength.
 *  @source VanDeHulst1957 sec. 11.22 (absorption in anomalous diffraction) */
export function granuleHeatPerCm(absorptionPerCm: number, diameterUm: number): number {
  assertWithin('absorptionPerCm', absorptionPerCm, 0, 1e8);
  assertWithin('diameterUm', diameterUm, 1e-3, 1e4);
  const x = absorptionPerCm * diameterUm * 1e-4;
  return absorptionPerCm * 1.5 * efficiencyPerThickness(x);
}

function efficiencyPerThickness(x: number): number {
  if (x < 1e-3) return 2 / 3 - x / 4 + (x * x) / 15; // the closed form cancels here
  return (1 - (2 * (1 - (1 + x) * Math.exp(-x))) / (x * x)) / x;
}

export interface GranuleHeat {
  readonly granule: Granule;
  readonly emission: readonly EmissionInterval[];
  readonly modes?: HeatModes;
}

/** Rise at the center of a granule at given times, per J/cm2 of fluence around it (from all sides, inside the tissue).
 *  Throws: out-of-range. */
export function granuleRiseK({ granule, emission, modes }: GranuleHeat, timesS: ArrayLike<number>): Float64Array {
  const { diameterUm, absorptionPerCm, inside, outside } = granule;
  const shape = { geometry: 'sphere', radiusUm: diameterUm / 2, inside, outside } as const;
  const heat = prepareInclusionHeat({ ...shape, emission, timesS, placesRadiusUm: [0], ...(modes && { modes }) });
  const perCm = granuleHeatPerCm(absorptionPerCm, diameterUm);
  return heat.excessK.map((rise) => rise * perCm);
}

/** Fluence around a granule at which its center reaches a temperature, such as that of explosive vaporization, by the end of any part
 *  of the emission. `startC` is the tissue around it, taken as constant.
 *  Throws: out-of-range. @source JacquesMcAuliffe1991 (the granule as its own sphere, threshold temperature) */
export function granuleThresholdJPerCm2(heat: GranuleHeat, startC: number, thresholdC: number): number {
  assertWithin('thresholdC', thresholdC, startC, 1e4);
  const endsS = heat.emission.map(({ endS }) => endS);
  return (thresholdC - startC) / Math.max(...granuleRiseK(heat, endsS));
}
