import type { Spot } from '../beam/spot.js';
import { spotAreaCm2 } from '../beam/spot-area.js';

/** What leaves the device and what of it arrives: energy and emission time of one pulse, or the whole of a continuous emission. */
export interface Delivery {
  readonly pulseEnergyJ: number;
  /** Sum of the times in which light is emitted, of one pulse. */
  readonly emissionS: number;
  /** Greatest share of the pulse's energy over the time in which it is emitted, 1/s. */
  readonly peakSharePerS: number;
  readonly spot: Spot;
  readonly transmissionFraction: number;
  readonly calibrationFactor: number;
  /** 0 for a single pulse or continuous emission. */
  readonly repetitionRateHz: number;
  readonly pulseCount: number;
  /** Share of the spot's area that the next pulse covers again; 1 on one place. */
  readonly overlapFraction: number;
}

export interface DeliveredFluence {
  readonly fluenceJPerCm2: number;
  readonly peakFluenceJPerCm2: number;
  readonly irradianceWPerCm2: number;
  readonly peakPowerW: number;
  readonly averagePowerW: number;
  readonly dutyCycleFraction: number;
  readonly cumulativeFluenceJPerCm2: number;
}

/** Fluence on the skin: energy x transmission x calibration over area; a Gaussian's axis gets twice that. Irradiance is the greatest within
 *  the pulse, over the same area. Cumulative fluence is what the most-hit place gets: on one place every pulse, under an overlap the sum of the
 *  geometric series of what is covered again. Valid: all sizes > 0. @source ISO11146 radius of a Gaussian; definitions of radiometry */
export function deliveredFluence(delivery: Delivery): DeliveredFluence {
  const { spot, repetitionRateHz, pulseCount, overlapFraction } = delivery;
  const energyJ = delivery.pulseEnergyJ * delivery.transmissionFraction * delivery.calibrationFactor;
  const areaCm2 = spotAreaCm2(spot);
  const fluence = energyJ / areaCm2;
  const peakPowerW = energyJ * delivery.peakSharePerS;
  const hits = overlapFraction >= 1 ? pulseCount : (1 - overlapFraction ** pulseCount) / (1 - overlapFraction);
  const repeats = repetitionRateHz > 0;
  return {
    fluenceJPerCm2: fluence,
    peakFluenceJPerCm2: spot.shape === 'gaussian' ? 2 * fluence : fluence,
    irradianceWPerCm2: peakPowerW / areaCm2,
    peakPowerW,
    averagePowerW: repeats ? energyJ * repetitionRateHz : energyJ / delivery.emissionS,
    dutyCycleFraction: repeats ? Math.min(1, delivery.emissionS * repetitionRateHz) : 1,
    cumulativeFluenceJPerCm2: fluence * hits,
  };
}

/** Pulse energy at the device that brings a fluence to the skin: the inverse of `deliveredFluence`. */
export function pulseEnergyForFluenceJ(
  fluenceJPerCm2: number,
  { spot, transmissionFraction, calibrationFactor }: Pick<Delivery, 'spot' | 'transmissionFraction' | 'calibrationFactor'>,
): number {
  return (fluenceJPerCm2 * spotAreaCm2(spot)) / (transmissionFraction * calibrationFactor);
}
