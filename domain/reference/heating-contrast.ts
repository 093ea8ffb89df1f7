import { DomainError } from '../quantities/errors.js';
import { absorptionBridgedPerCm } from '../spectra/blood.js';
import { absorptionPerCm, chromophoreOf } from '../spectra/chromophore.js';
import { spectrumRangeNm } from '../spectra/spectrum.js';
import type { OpticalLayer } from '../tissue/optical-layer.js';
import { flatteningFactor } from '../tissue/vessel-correction.js';
import type { BeamProfile } from '../transport/beam-profile.js';
import type { LightSolution } from '../transport/layered-solver.js';
import type { ReferenceData } from './reference-data.js';

const bridged: Readonly<Record<string, 0 | 1>> = { oxyhemoglobin: 1, deoxyhemoglobin: 0 };
const bridgeEndsNm = 1100; // Friebel2009: 'about 1100', beyond which blood follows water

/** Wavelengths over which a chromophore can be compared in skin: its own range, for the two hemoglobins on to 1100 nm by the rows of whole
 *  blood. Shape: [from, to] in nm. Throws: unknown-reference. @source Bosschaart2014 appendix; Friebel2009 abstract */
export function comparableRangeNm(reference: ReferenceData, chromophoreId: string): readonly [number, number] {
  const [fromNm, toNm] = spectrumRangeNm(chromophoreOf(reference.chromophores, chromophoreId).spectrum);
  return [fromNm, chromophoreId in bridged ? Math.max(toNm, bridgeEndsNm) : toNm];
}

/** Absorption of a chromophore over `comparableRangeNm`, 1/cm; hemoglobins at 150 g/L, other solutes at the concentration given.
 *  Throws: out-of-range, unknown-reference, contradiction. */
export function comparableAbsorptionPerCm(
  reference: ReferenceData,
  chromophoreId: string,
  wavelengthNm: number,
  concentrationGPerL?: number,
): number {
  const chromophore = chromophoreOf(reference.chromophores, chromophoreId);
  const saturation = bridged[chromophoreId];
  const [, toNm] = spectrumRangeNm(chromophore.spectrum);
  if (saturation === undefined || wavelengthNm <= toNm) return absorptionPerCm(chromophore, wavelengthNm, concentrationGPerL);
  return absorptionBridgedPerCm(wavelengthNm, saturation, reference.chromophores, reference.wholeBlood);
}

/** Heat per volume in a chromophore at a depth over the mean heat per volume in the epidermis, before any of it flows: absorption x internal
 *  fluence over the mean of the same in the topmost layer. Equal heat capacities; a chromophore gathered in cylinders of a radius is flattened
 *  by them, one without radius is spread evenly, and neither shades its surroundings.
 *  Valid: a depth inside the stack. Throws: out-of-range; contradiction without layers; no-solution where the epidermis absorbs nothing.
 *  @source AndersonParrish1983 (selective absorption); Verkruysse1997 flattening */
export function heatingContrast(input: {
  readonly chromophorePerCm: number;
  readonly cylinderRadiusUm?: number;
  readonly layers: readonly OpticalLayer[];
  readonly light: LightSolution;
  readonly spot: BeamProfile | null;
  readonly depthUm: number;
}): { readonly fluenceRatioAtDepth: number; readonly heatingContrast: number } {
  const { chromophorePerCm, cylinderRadiusUm = 0, layers, light, spot, depthUm } = input;
  const [top] = layers;
  if (!top) throw new DomainError('contradiction', 'heating is compared in at least one layer', { fields: ['layers'] });
  const flattenedPerCm = chromophorePerCm * flatteningFactor(chromophorePerCm, cylinderRadiusUm);
  const fluenceRatioAtDepth = light.fluenceRatios(spot, [depthUm])[0]!;
  const epidermis = light.absorbedPerCm(spot, [0, top.thicknessUm])[0]!;
  if (!(top.absorptionPerCm > 0 && epidermis > 0))
    throw new DomainError('no-solution', 'the epidermis absorbs nothing; there is no ratio to it');
  return { fluenceRatioAtDepth, heatingContrast: (flattenedPerCm * fluenceRatioAtDepth) / epidermis };
}
