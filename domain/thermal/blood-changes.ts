import { findRoot } from '../numeric/roots.js';
import { assertWithin } from '../quantities/errors.js';
import { damageIntegral } from './damage.js';
import type { EmissionInterval } from './emission.js';
import type { HeatModes } from './heat-modes.js';
import { type InclusionShape, modalWeights, radialModes } from './inclusion-heat.js';
import type { DamagePair } from './thermal-figures.js';

/** Absorption of blood at a temperature over that at the temperature of its table: a rise by 2.5 from 20 to 100 C, taken as a straight
 *  line (the source states its ends) and as constant outside. Measured in vitro at 586 nm within a pulse of 0.5 ms.
 *  @source Verkruysse1998 abstract */
export function bloodAbsorptionFactor(temperatureC: number, tableC = 20): number {
  const line = (t: number): number => 1 + (1.5 * (Math.min(Math.max(t, 20), 100) - 20)) / 80;
  return line(temperatureC) / line(tableC);
}

/** Temperature at which laser-heated hemoglobin turns to methemoglobin. @source Randeberg2004 abstract */
export const methemoglobinC = 70;

/** Absorption after a share of the hemoglobin has turned to methemoglobin, over that before. `absorptionRatio` is methemoglobin's
 *  absorption over that of the blood's own hemoglobin at the wavelength. The share is the caller's: no figure is established. */
export function methemoglobinFactor(temperatureC: number, convertedFraction: number, absorptionRatio: number): number {
  assertWithin('convertedFraction', convertedFraction, 0, 1);
  assertWithin('absorptionRatio', absorptionRatio, 0, 1e4);
  return temperatureC < methemoglobinC ? 1 : 1 - convertedFraction + convertedFraction * absorptionRatio;
}

/** How much more heat a vessel takes up when its blood absorbs `factor` times as much: less than `factor`, for a vessel shades itself.
 *  Letters: (1 - exp(-2 f mu R)) / (1 - exp(-2 mu R)). @source SvaasandFiskerstrand1995 */
export function shadedFactor(factor: number, absorptionPerCm: number, radiusUm: number): number {
  const depth = 2 * absorptionPerCm * radiusUm * 1e-4;
  return depth === 0 ? factor : Math.expm1(-factor * depth) / Math.expm1(-depth);
}

export interface ChangingVessel extends InclusionShape {
  readonly emission: readonly EmissionInterval[];
  /** Ascending, from 0, with the ends of all emission intervals among them. */
  readonly timesS: ArrayLike<number>;
  readonly placesRadiusUm: readonly number[];
  /** Heat in the vessel per incident fluence at the absorption of the tables, J/cm3 per J/cm2. */
  readonly heatPerCm: number;
  /** Temperature at the vessel without light, and the rise of the tissue around it per J/cm2, by time. */
  readonly baselineC: ArrayLike<number>;
  readonly backgroundK: ArrayLike<number>;
  /** Heat taken up at the mean temperature of the vessel over that at the absorption of the tables. */
  readonly factor: (temperatureC: number) => number;
  readonly modes?: HeatModes;
}

const stepsPerSample = 4;

/** Temperatures in and around a vessel whose blood changes its absorption while it heats, [place * times + time]. Exact in time for
 *  power that is constant in each of four steps between samples; the power of a step is that at its middle (predictor and corrector).
 *  Throws: out-of-range. */
export function changingVesselC(vessel: ChangingVessel, fluenceJPerCm2: number): Float64Array {
  const { emission, timesS, placesRadiusUm, baselineC, backgroundK } = vessel;
  const count = timesS.length;
  const radial = radialModes(vessel, Math.max(timesS[count - 1] ?? 0, 1e-12), vessel.modes);
  const { size, ratesPerS, amplitudesPerJPerCm3 } = radial;
  const weights = placesRadiusUm.map((radiusUm) => modalWeights(radial, radiusUm));
  const mean = meanWeights(vessel, radial);
  const result = new Float64Array(weights.length * count);
  let state = new Float64Array(size);
  const advanced = (durationS: number, power: number): Float64Array<ArrayBuffer> => {
    const next = new Float64Array(size);
    for (let mode = 0; mode < size; mode++) {
      const x = ratesPerS[mode]! * durationS;
      const lost = Math.expm1(-x);
      const gained = power * durationS * amplitudesPerJPerCm3[mode]! * (x === 0 ? 1 : -lost / x);
      next[mode] = state[mode]! * (1 + lost) + gained;
    }
    return next;
  };
  for (let time = 0; time < count; time++) {
    const fromS = time === 0 ? 0 : timesS[time - 1]!;
    const spanS = timesS[time]! - fromS;
    const middleS = fromS + 0.5 * spanS;
    const lit = emission.find(({ startS, endS }) => middleS > startS && middleS < endS);
    const plain = lit ? (fluenceJPerCm2 * vessel.heatPerCm * lit.energyFraction) / (lit.endS - lit.startS) : 0;
    const around = (share: number): number => {
      const at = (values: ArrayLike<number>) => values[Math.max(time - 1, 0)]! * (1 - share) + values[time]! * share;
      return at(baselineC) + fluenceJPerCm2 * at(backgroundK);
    };
    for (let step = 0; spanS > 0 && step < stepsPerSample; step++) {
      const stepS = spanS / stepsPerSample;
      if (plain === 0) {
        state = advanced(spanS, 0);
        break;
      }
      const tissueC = around((step + 0.5) / stepsPerSample);
      const early = vessel.factor(tissueC + dot(mean, state));
      const middle = vessel.factor(tissueC + dot(mean, advanced(0.5 * stepS, plain * early)));
      state = advanced(stepS, plain * middle);
    }
    weights.forEach((weight, place) => {
      result[place * count + time] = around(1) + dot(weight, state);
    });
  }
  return result;
}

/** Least fluence that damages a place (index into `placesRadiusUm`) of a vessel with changing blood; null when none up to the greatest
 *  does, 0 when none is needed. Throws: out-of-range. */
export function changingVesselThreshold(
  vessel: ChangingVessel,
  place: number,
  pair: DamagePair,
  maxFluenceJPerCm2 = 1000,
): number | null {
  const count = vessel.timesS.length;
  const lnDamage = (fluence: number): number => {
    const temperaturesC = changingVesselC(vessel, fluence).subarray(place * count, (place + 1) * count);
    return Math.log(damageIntegral(vessel.timesS, temperaturesC, pair) + Number.MIN_VALUE);
  };
  if (lnDamage(maxFluenceJPerCm2) < 0) return null;
  if (lnDamage(0) >= 0) return 0;
  return findRoot(lnDamage, 0, maxFluenceJPerCm2, { relativeTolerance: 1e-6 });
}

// Weights of the modes in the mean temperature of the vessel: what gives each mode its heat, per heat capacity.
function meanWeights(
  { radiusUm }: ChangingVessel,
  { size, centersUm, capacity, modeOfCell }: ReturnType<typeof radialModes>,
): Float64Array {
  let whole = 0;
  const weights = new Float64Array(size);
  for (let cell = 0; cell < size && centersUm[cell]! < radiusUm; cell++) {
    whole += capacity[cell]!;
    for (let mode = 0; mode < size; mode++) weights[mode]! += capacity[cell]! * modeOfCell[mode * size + cell]!;
  }
  return weights.map((weight) => weight / whole);
}

function dot(a: Float64Array, b: Float64Array): number {
  let sum = 0;
  for (let i = 0; i < a.length; i++) sum += a[i]! * b[i]!;
  return sum;
}
