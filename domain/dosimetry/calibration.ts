import type { Spot } from '../beam/spot.js';
import { spotAreaCm2 } from '../beam/spot-area.js';
import { DomainError } from '../quantities/errors.js';
import { isWithinFraction } from './decimal-tolerance.js';

/** What the panel was set to: energy per pulse, or fluence over the spot. */
export interface PanelSetting {
  readonly pulseEnergyJ?: number | undefined;
  readonly fluenceJPerCm2?: number | undefined;
}

/** One dated measurement of a device's output. `pulseDurationS` null: any pulse; `handpiece` null: the device has no choice.
 *  `relativeUncertainty` is standard (k = 1). Times are milliseconds since 1970. */
export interface CalibrationPoint {
  readonly id: string;
  readonly measuredAtMs: number;
  readonly validUntilMs: number;
  readonly wavelengthNm: number;
  readonly spot: Spot;
  readonly pulseDurationS: number | null;
  readonly handpiece: string | null;
  readonly setEnergyJ: number;
  readonly factor: number;
  readonly relativeUncertainty: number;
}

/** Months of use between calibrations when neither record nor device says: 12. Common practice, no source. */
export const usualCalibrationDays = 365;
/** Two wavelengths are the same line when they differ by no more than this; lines are named to the nanometer. Common practice, no source. */
export const sameLineNm = 1;

/** Energy per pulse that the panel promises over the spot. Throws: contradiction (fields) without either figure. */
export function setEnergyJ(set: PanelSetting, spot: Spot): number {
  if (set.pulseEnergyJ !== undefined) return set.pulseEnergyJ;
  if (set.fluenceJPerCm2 !== undefined) return set.fluenceJPerCm2 * spotAreaCm2(spot);
  throw new DomainError('contradiction', 'set needs pulseEnergyJ or fluenceJPerCm2', { fields: ['set'] });
}

/** Fluence that the panel promises over the spot, the mean for a Gaussian. Throws: contradiction (fields) without either figure. */
export function setFluenceJPerCm2(set: PanelSetting, spot: Spot): number {
  return set.fluenceJPerCm2 ?? setEnergyJ(set, spot) / spotAreaCm2(spot);
}

export interface CalibrationVerdict {
  readonly factor: number;
  readonly deviationFraction: number;
  readonly inTolerance: boolean;
}

/** Factor measured over set, deviation of measured from set, and whether that is within the device's tolerance, edge included.
 *  Shape: scalar. Valid: set energy > 0. Throws: out-of-range. @source IEC60601 (20 % unless the device says otherwise) */
export function judgeCalibration(
  set: PanelSetting,
  spot: Spot,
  measuredPulseEnergyJ: number,
  toleranceFraction: number,
): CalibrationVerdict {
  const energyJ = setEnergyJ(set, spot);
  if (!(energyJ > 0)) {
    throw new DomainError('out-of-range', 'the set value must be greater than 0', { quantity: 'set', value: energyJ, min: 0 });
  }
  const factor = measuredPulseEnergyJ / energyJ;
  return {
    factor,
    deviationFraction: factor - 1,
    inTolerance: isWithinFraction(measuredPulseEnergyJ, energyJ, toleranceFraction),
  };
}

/** Whether two spots are the same spot of a handpiece: same shape, sizes within 2 %, finer than any two spots on offer.
 *  Common practice, no source. */
export function isSameSpot(a: Spot, b: Spot): boolean {
  const near = (x: number, y: number) => Math.abs(x - y) <= 0.02 * Math.max(x, y);
  if ('diameterMm' in a && 'diameterMm' in b) return near(a.diameterMm, b.diameterMm);
  if ('diameterMm' in a || 'diameterMm' in b) return false;
  const [aw, ah] = 'heightMm' in a ? [a.widthMm, a.heightMm] : [a.widthMm, a.widthMm];
  const [bw, bh] = 'heightMm' in b ? [b.widthMm, b.heightMm] : [b.widthMm, b.widthMm];
  return (near(aw, bw) && near(ah, bh)) || (near(aw, bh) && near(ah, bw));
}
