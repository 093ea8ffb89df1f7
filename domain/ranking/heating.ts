import { explosiveVaporizationC } from '../targets/granule.js';
import { cem43Min, damageIntegral } from '../thermal/damage.js';
import type { DamagePair } from '../thermal/thermal-figures.js';
import { basalPlace, type ExposureModel, surfacePlace, targetPlace } from './exposure-model.js';
import { addRise, boilingC, risesOf } from './fluence-window.js';
import type { HeatPlan } from './heat-plan.js';
import type { Deposit } from './light-plan.js';

export type Place = 'surface' | 'basal-layer' | 'target-center' | 'target-edge';

/** Temperature by time at one place, and what it does there. */
export interface PlaceHistory {
  readonly place: Place;
  readonly temperaturesC: Float64Array;
  readonly peakC: number;
  readonly peakAtS: number;
  readonly damageIntegral: number;
  readonly cem43Min: number;
}

/** What one fluence does at the followed places, and where water would boil or a granule vaporize. */
export interface HeatingResult {
  readonly timesS: Float64Array;
  readonly places: readonly PlaceHistory[];
  readonly vaporization: { readonly expected: boolean; readonly place?: Place | 'melanosome' };
}

/** Heating by one fluence. Linear in fluence: boiling is reported, not followed, so temperatures above it are too high. */
export function heatingOf(model: ExposureModel, deposit: Deposit, heat: HeatPlan, fluenceJPerCm2: number): HeatingResult {
  const { timesS } = heat;
  const count = timesS.length;
  const { skinK, lesionK } = risesOf(deposit, heat);
  const { effect } = model.target;
  const targetPair = effect.by === 'vaporization' ? model.epidermisPair : effect.pair;
  const history = (place: Place, index: number, riseK: Float64Array, pair: DamagePair): PlaceHistory => {
    const temperaturesC = riseK.map((rise, i) => heat.layered.baselineC[index * count + i]! + fluenceJPerCm2 * rise);
    let peakIndex = 0;
    for (let i = 1; i < count; i++) if (temperaturesC[i]! > temperaturesC[peakIndex]!) peakIndex = i;
    return {
      place,
      temperaturesC,
      peakC: temperaturesC[peakIndex]!,
      peakAtS: timesS[peakIndex]!,
      damageIntegral: damageIntegral(timesS, temperaturesC, pair),
      cem43Min: cem43Min(timesS, temperaturesC),
    };
  };
  const at = (values: Float64Array, place: number) => values.subarray(place * count, (place + 1) * count);
  const tissueK = at(lesionK, targetPlace);
  const share = deposit.heaterExcessPerCm;
  const places = [
    history('surface', surfacePlace, at(skinK, surfacePlace), model.epidermisPair),
    history('basal-layer', basalPlace, at(skinK, basalPlace), model.epidermisPair),
    history('target-center', targetPlace, addRise(tissueK, heat.inclusionCenterK, share), targetPair),
    history('target-edge', targetPlace, addRise(tissueK, heat.inclusionEdgeK, share), targetPair),
  ];
  const boiling = places.find((place) => place.peakC >= boilingC);
  if (boiling) return { timesS, places, vaporization: { expected: true, place: boiling.place } };
  const granule = history(
    'basal-layer',
    basalPlace,
    addRise(at(skinK, basalPlace), heat.melanosomeK, deposit.melanosomePerCm),
    model.epidermisPair,
  );
  const vaporizes = deposit.melanosomePerCm > 0 && granule.peakC >= explosiveVaporizationC;
  return { timesS, places, vaporization: vaporizes ? { expected: true, place: 'melanosome' } : { expected: false } };
}
