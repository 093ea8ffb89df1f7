import { breakdownIrradianceWPerCm2 } from './breakdown.js';

export type InteractionRegime = 'photochemical' | 'photothermal' | 'photoablative' | 'plasma-mediated' | 'below-effect';

// The map of medical laser effects: along one diagonal of about 1 to 1000 J/cm2, by exposure time. From memory, a factor of 10 either way.
const photochemicalFromS = 1; // below 1 W/cm2 for seconds to minutes
const photochemicalToWPerCm2 = 1;
const photoablativeFromWPerCm2 = 1e7; // ultraviolet and strongly absorbed light, nanoseconds
const photoablativeToS = 1e-6;
const ultravioletToNm = 350; // ablation by breaking bonds belongs to the ultraviolet
const leastFluenceJPerCm2 = 1e-3;

/** Regime of interaction of an exposure by its duration and irradiance, as the map of medical laser effects draws it. A coarse guide: borders are
 *  powers of ten wide. Valid: all arguments > 0. @source Boulnois1986 fig. of the four interactions, from memory */
export function interactionRegime(exposureTimeS: number, irradianceWPerCm2: number, wavelengthNm: number): InteractionRegime {
  if (irradianceWPerCm2 >= breakdownIrradianceWPerCm2(exposureTimeS)) return 'plasma-mediated';
  if (exposureTimeS * irradianceWPerCm2 < leastFluenceJPerCm2) return 'below-effect';
  const brief = exposureTimeS <= photoablativeToS && irradianceWPerCm2 >= photoablativeFromWPerCm2;
  if (brief && wavelengthNm < ultravioletToNm) return 'photoablative';
  if (exposureTimeS >= photochemicalFromS && irradianceWPerCm2 <= photochemicalToWPerCm2) return 'photochemical';
  return 'photothermal';
}
