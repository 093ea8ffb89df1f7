import { sameSpot } from '../beam/same-spot.js';
import { spotAreaCm2 } from '../beam/spot-area.js';
import type { Candidate } from './candidates.js';
import type { FluenceWindow } from './fluence-window.js';

/** What stands in the way of emitting a candidate: pulse durations the line does not have, spots the device lacks, or a threshold
 *  beyond its energy. Empty when nothing does. */
export function obstaclesOf({ line, pulseDurationS, spot }: Candidate, window: FluenceWindow | null): string[] {
  const obstacles: string[] = [];
  const { pulseMinS, pulseMaxS } = line;
  const close = 1 + 1e-9; // end points that were given in decimals
  if (
    pulseMinS !== undefined &&
    pulseMaxS !== undefined &&
    (pulseDurationS * close < pulseMinS || pulseDurationS > pulseMaxS * close)
  ) {
    obstacles.push(`not deliverable: the line emits pulses of ${pulseMinS} to ${pulseMaxS} s`);
  }
  if (line.spots && !line.spots.some((own) => sameSpot(own, spot))) {
    obstacles.push('not deliverable: the device has no such spot');
  }
  const mostByEnergy = line.energyMaxJ === undefined ? Number.POSITIVE_INFINITY : line.energyMaxJ / spotAreaCm2(spot);
  const most = Math.min(mostByEnergy, line.fluenceMaxJPerCm2 ?? Number.POSITIVE_INFINITY);
  const threshold = window?.targetThresholdJPerCm2;
  if (threshold != null && threshold > most) {
    obstacles.push(`not deliverable: the device reaches ${Number(most.toPrecision(3))} J/cm2 with this spot`);
  }
  return obstacles;
}
