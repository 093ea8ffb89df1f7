import type { Spot } from '../beam/spot.js';
import { type PanelSetting, setFluenceJPerCm2 } from './calibration.js';
import type { DeviceResponse } from './device-response.js';

/** Standard relative uncertainty of a spot diameter that nobody measured: 2 %, 0.2 mm on 10 mm. Common practice, no source. */
export const usualSpotUncertainty = 0.02;
/** Coverage factor of the interval, about 95 % for a normal distribution. @source JCGM100 6.2.1 */
export const coverageFactor = 2;

/** Fluence that reached the skin beside the one that was set, with its interval at k = 2. */
export interface DeliveredExposure {
  readonly setFluenceJPerCm2: number;
  readonly deliveredFluenceJPerCm2: number;
  readonly lowJPerCm2: number;
  readonly highJPerCm2: number;
  readonly relativeUncertainty: number;
}

/** Set fluence x factor of the device; the spot's diameter counts twice in area. Mean fluence for a Gaussian.
 *  Shape: scalar. Throws: contradiction (fields) without a setting. @source JCGM100 eq. 10 */
export function deliveredExposure(
  set: PanelSetting,
  spot: Spot,
  response: DeviceResponse,
  spotUncertainty: number = usualSpotUncertainty,
): DeliveredExposure {
  const fluence = setFluenceJPerCm2(set, spot);
  const delivered = fluence * response.factor;
  const relativeUncertainty = Math.hypot(response.relativeUncertainty, 2 * spotUncertainty);
  const half = coverageFactor * relativeUncertainty * delivered;
  return {
    setFluenceJPerCm2: fluence,
    deliveredFluenceJPerCm2: delivered,
    lowJPerCm2: Math.max(0, delivered - half),
    highJPerCm2: delivered + half,
    relativeUncertainty,
  };
}
