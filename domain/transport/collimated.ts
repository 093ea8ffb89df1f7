import type { OpticalLayer } from '../tissue/optical-layer.js';
import { fresnelReflectance } from './fresnel.js';

/** The unscattered beam at normal incidence, with all its reflections at the interfaces, per incident irradiance. */
export interface CollimatedBeam {
  /** Irradiance downward just below the top of each layer. */
  readonly down: Float64Array;
  /** Irradiance upward just above the bottom of each layer. */
  readonly up: Float64Array;
  readonly surfaceReflectance: number;
  /** Part that comes back out after entering. */
  readonly returned: number;
  readonly transmitted: number;
}

/** Follows the unscattered beam through layers of given optical thickness, air above and below.
 *  Reflectances add up from the bottom, irradiances follow from the top. @source Stokes1862 (pile of plates) */
export function collimatedBeam(layers: readonly OpticalLayer[], opticalThicknesses: readonly number[]): CollimatedBeam {
  const count = layers.length;
  const interfaceReflectance = (above: number): number =>
    fresnelReflectance(layers[above]?.refractiveIndex ?? 1, layers[above + 1]?.refractiveIndex ?? 1, 1);
  const seenFromTop = new Float64Array(count + 1); // reflectance of everything below the top of a layer, seen inside it
  const seenFromBottom = new Float64Array(count);
  for (let j = count - 1; j >= 0; j--) {
    const own = interfaceReflectance(j);
    const beyond = seenFromTop[j + 1]!;
    seenFromBottom[j] = own + ((1 - own) ** 2 * beyond) / (1 - own * beyond);
    seenFromTop[j] = seenFromBottom[j]! * Math.exp(-2 * opticalThicknesses[j]!);
  }
  const down = new Float64Array(count);
  const up = new Float64Array(count);
  let arriving = 1;
  for (let j = 0; j < count; j++) {
    const own = interfaceReflectance(j - 1);
    down[j] = (arriving * (1 - own)) / (1 - own * seenFromTop[j]!);
    arriving = down[j]! * Math.exp(-opticalThicknesses[j]!);
    up[j] = arriving * seenFromBottom[j]!;
  }
  const surface = interfaceReflectance(-1);
  return {
    down,
    up,
    surfaceReflectance: surface,
    returned: up[0]! * Math.exp(-opticalThicknesses[0]!) * (1 - surface),
    transmitted: arriving * (1 - interfaceReflectance(count - 1)),
  };
}
