import { explosiveVaporizationC } from '../targets/granule.js';
import { fluenceForDamage } from '../thermal/damage.js';
import { basalPlace, type ExposureModel, surfacePlace, targetPlace } from './exposure-model.js';
import type { HeatPlan } from './heat-plan.js';
import type { Deposit } from './light-plan.js';

/** What ends the range of fluence that spares the epidermis. */
export type Limit = 'basal-layer' | 'melanosome' | 'surface' | 'vaporization' | 'breakdown';

/** The least fluence with the asked effect, the greatest that spares the epidermis, and what ends it. */
export interface FluenceWindow {
  /** null when no fluence up to 1,000 J/cm2 has the effect. */
  readonly targetThresholdJPerCm2: number | null;
  readonly epidermalLimitJPerCm2: number;
  /** Limit over threshold; null without a threshold. */
  readonly therapeuticRatio: number | null;
  readonly limitedBy: Limit;
}

/** Fluences above this are not looked at: five times the largest in the published selection of settings. */
export const greatestFluenceJPerCm2 = 1000;

/** Where tissue water boils at sea level. */
export const boilingC = 100;

/** Temperature rise by time at the three followed depths, per J/cm2, and what rides on it. */
export interface Rises {
  readonly skinK: Float64Array;
  readonly lesionK: Float64Array;
}

/** Heat of a deposit at the followed depths, by place and time. */
export function risesOf(deposit: Deposit, heat: HeatPlan): Rises {
  const skinK = heat.layered.responseK(deposit.sourcePerCm);
  const lesionK = deposit.lesionSourcePerCm === deposit.sourcePerCm ? skinK : heat.layered.responseK(deposit.lesionSourcePerCm);
  return { skinK, lesionK };
}

/** Least fluence at which baseline + H x rise reaches a temperature at some time; Infinity when none does. */
export function fluenceToReach(temperatureC: number, baselineC: Float64Array, riseK: Float64Array): number {
  let greatestPerJ = 0;
  for (let i = 0; i < riseK.length; i++) {
    const perJ = riseK[i]! / (temperatureC - baselineC[i]!);
    if (perJ > greatestPerJ) greatestPerJ = perJ;
  }
  return greatestPerJ > 0 ? 1 / greatestPerJ : Number.POSITIVE_INFINITY;
}

/** A rise with `share` times another on top of it. */
export function addRise(riseK: Float64Array, extraK: Float64Array | null, share: number): Float64Array {
  if (!extraK || share === 0) return riseK;
  const sum = new Float64Array(riseK.length);
  for (let i = 0; i < sum.length; i++) sum[i] = riseK[i]! + share * extraK[i]!;
  return sum;
}

/** The fluence window of one deposit under one pulse. `breakdownFluenceJPerCm2` is the fluence at which the irradiance of this pulse
 *  would ionize the tissue. */
export function windowOf(model: ExposureModel, deposit: Deposit, heat: HeatPlan, breakdownFluenceJPerCm2: number): FluenceWindow {
  const { skinK, lesionK } = risesOf(deposit, heat);
  const { timesS } = heat;
  const count = timesS.length;
  const at = (values: Float64Array, place: number) => values.subarray(place * count, (place + 1) * count);
  const baseC = [surfacePlace, basalPlace, targetPlace].map((place) => at(heat.layered.baselineC, place));

  let limit = breakdownFluenceJPerCm2;
  let limitedBy: Limit = 'breakdown';
  const consider = (fluence: number | null, by: Limit) => {
    if (fluence !== null && fluence < limit) {
      limit = fluence;
      limitedBy = by;
    }
  };
  if (!model.target.melanosomesAreTarget && deposit.melanosomePerCm > 0) {
    const rise = addRise(at(skinK, basalPlace), heat.melanosomeK, deposit.melanosomePerCm);
    consider(fluenceToReach(explosiveVaporizationC, baseC[basalPlace]!, rise), 'melanosome');
  }
  for (const place of [basalPlace, surfacePlace])
    consider(fluenceToReach(boilingC, baseC[place]!, at(skinK, place)), 'vaporization');
  const harm = (place: number) =>
    fluenceForDamage({
      timesS,
      baselineC: baseC[place]!,
      responseK: at(skinK, place),
      pair: model.epidermisPair,
      maxFluenceJPerCm2: limit,
    });
  consider(harm(basalPlace), 'basal-layer');
  consider(harm(surfacePlace), 'surface');

  const threshold = model.target.noTarget
    ? null
    : targetThreshold(model, deposit, heat, at(lesionK, targetPlace), baseC[targetPlace]!);
  return {
    targetThresholdJPerCm2: threshold,
    epidermalLimitJPerCm2: limit,
    therapeuticRatio: threshold === null ? null : limit / threshold,
    limitedBy,
  };
}

function targetThreshold(
  model: ExposureModel,
  deposit: Deposit,
  heat: HeatPlan,
  tissueK: Float64Array,
  baselineC: Float64Array,
): number | null {
  const { effect } = model.target;
  const share = deposit.heaterExcessPerCm;
  let threshold: number | null = null;
  if (effect.by !== 'vaporization') {
    const responseK = effect.by === 'either' ? tissueK : addRise(tissueK, heat.inclusionEdgeK, share);
    const maxFluenceJPerCm2 = greatestFluenceJPerCm2;
    threshold = fluenceForDamage({ timesS: heat.timesS, baselineC, responseK, pair: effect.pair, maxFluenceJPerCm2 });
  }
  if (effect.by !== 'damage') {
    const reached = fluenceToReach(effect.temperatureC, baselineC, addRise(tissueK, heat.inclusionCenterK, share));
    if (reached <= greatestFluenceJPerCm2 && (threshold === null || reached < threshold)) threshold = reached;
  }
  return threshold;
}
