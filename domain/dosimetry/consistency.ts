import type { Spot } from '../beam/spot.js';
import { spotAreaCm2 } from '../beam/spot-area.js';
import type { PanelSetting } from './calibration.js';

/** A known way in which a logged number comes out wrong. */
export type Slip = 'joule-per-square-meter' | 'radius-for-diameter' | 'millijoule' | 'total-energy' | 'unexplained';

export interface Inconsistency {
  readonly slip: Slip;
  readonly fields: readonly string[];
  readonly text: string;
}

export interface LoggedNumbers {
  readonly set: PanelSetting;
  readonly spot: Spot;
  readonly pulseCount: number;
  /** Greatest energy per pulse of the device at this line, where known. */
  readonly energyMaxJ?: number | undefined;
  /** Greatest fluence of the device at this line, where known. */
  readonly fluenceMaxJPerCm2?: number | undefined;
}

/** Numbers of one record agree when energy over area is the fluence to this; panels round to two digits. Common practice, no source. */
const agreement = 0.05;
/** How near a ratio must come to that of a known slip. Rounded figures on both sides. Common practice, no source. */
const nearness = 0.12;
/** Beyond the device's greatest output by this factor a number is a slip, not an overshoot. Common practice, no source. */
const beyond = 1.5;

const texts: Readonly<Record<Slip, string>> = {
  'joule-per-square-meter': 'the fluence looks like J/m2 entered as J/cm2 (10,000 J/m2 are 1 J/cm2)',
  'radius-for-diameter': 'the spot looks like a radius taken for a diameter (the area then differs by a factor of 4)',
  millijoule: 'the energy looks like mJ entered as J',
  'total-energy': 'the energy looks like that of all pulses entered as energy per pulse',
  unexplained: 'energy, spot and fluence do not agree',
};

/** What is wrong with the numbers of a record, by name; null when they agree or cannot be compared. With energy and fluence both given they
 *  are compared by the spot's area; with one of them, with what the device can emit. Shape: scalar. Valid: positive numbers.
 *  @source Hadis2016 (faults of reported parameters; from memory) */
export function diagnoseNumbers(logged: LoggedNumbers): Inconsistency | null {
  const { pulseEnergyJ, fluenceJPerCm2 } = logged.set;
  if (pulseEnergyJ !== undefined && fluenceJPerCm2 !== undefined) return compareBoth(logged, pulseEnergyJ, fluenceJPerCm2);
  if (pulseEnergyJ !== undefined) return compareEnergy(logged, pulseEnergyJ);
  return fluenceJPerCm2 === undefined ? null : compareFluence(logged, fluenceJPerCm2);
}

function found(slip: Slip, fields: readonly string[]): Inconsistency {
  return { slip, fields, text: texts[slip] };
}

const isNear = (ratio: number, expected: number) => Math.abs(Math.log(ratio / expected)) < Math.log(1 + nearness);

function compareBoth({ spot, pulseCount }: LoggedNumbers, energyJ: number, fluence: number): Inconsistency | null {
  const implied = energyJ / spotAreaCm2(spot);
  if (!(implied > 0) || !(fluence > 0)) return null;
  const ratio = fluence / implied;
  if (Math.abs(ratio - 1) <= agreement) return null;
  if (isNear(ratio, 1e4)) return found('joule-per-square-meter', ['set/fluenceJPerCm2']);
  if (isNear(ratio, 1e-3)) return found('millijoule', ['set/pulseEnergyJ']);
  if (pulseCount > 1 && isNear(ratio, 1 / pulseCount)) return found('total-energy', ['set/pulseEnergyJ', 'pulseCount']);
  if (isNear(ratio, 4) || isNear(ratio, 0.25)) return found('radius-for-diameter', ['spot']);
  return found('unexplained', ['set/pulseEnergyJ', 'set/fluenceJPerCm2', 'spot']);
}

function compareEnergy(
  { spot, pulseCount, energyMaxJ, fluenceMaxJPerCm2 }: LoggedNumbers,
  energyJ: number,
): Inconsistency | null {
  const most = energyMaxJ ?? (fluenceMaxJPerCm2 === undefined ? undefined : fluenceMaxJPerCm2 * spotAreaCm2(spot));
  if (most === undefined || energyJ <= beyond * most) return null;
  if (pulseCount > 1 && energyJ / pulseCount <= most && energyJ / most < 100)
    return found('total-energy', ['set/pulseEnergyJ', 'pulseCount']);
  return energyJ / 1000 <= most ? found('millijoule', ['set/pulseEnergyJ']) : null;
}

function compareFluence({ spot, energyMaxJ, fluenceMaxJPerCm2 }: LoggedNumbers, fluence: number): Inconsistency | null {
  const most = fluenceMaxJPerCm2 ?? (energyMaxJ === undefined ? undefined : energyMaxJ / spotAreaCm2(spot));
  if (most === undefined || fluence <= beyond * most) return null;
  if (fluence / most > 100 && fluence / 1e4 <= most) return found('joule-per-square-meter', ['set/fluenceJPerCm2']);
  return fluence / 4 <= most ? found('radius-for-diameter', ['spot', 'set/fluenceJPerCm2']) : null;
}
