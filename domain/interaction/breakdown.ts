import { interpolateLog } from '../numeric/interpolate.js';
import { assertWithin } from '../quantities/errors.js';

// Thresholds of optical breakdown in water by pulse duration: 100 fs, 300 fs, 3 ps, 60 ps, 6 ns, 76 ns. Water stands for soft tissue.
// @source NoackVogel1999 table of thresholds, from memory: a factor of 2 either way
const logDurations = [1e-13, 3e-13, 3e-12, 6e-11, 6e-9, 7.6e-8].map(Math.log);
const irradiances = [1.1e13, 4.7e12, 8.5e11, 3.7e11, 7.9e10, 2e10];

/** Irradiance at which water-rich tissue breaks down into plasma. The logarithm between the published durations; beyond the longest it is
 *  held (thermal pulses stay far below it), below the shortest too. Valid: 1 fs to 1,000 s. Throws: out-of-range.
 *  @source NoackVogel1999 */
export function breakdownIrradianceWPerCm2(pulseDurationS: number): number {
  assertWithin('pulseDurationS', pulseDurationS, 1e-15, 1e3);
  const at = Math.min(Math.max(Math.log(pulseDurationS), logDurations[0]!), logDurations[logDurations.length - 1]!);
  return interpolateLog(logDurations, irradiances, at, 'logarithm of pulseDurationS');
}
