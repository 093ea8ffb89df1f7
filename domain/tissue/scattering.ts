import type { Remarks } from '../quantities/caution.js';
import type { AnisotropyLaw, ScatteringLaw } from './skin-figures.js';

/** Reduced scattering, 1/cm: a (f (l/500 nm)^-4 + (1 - f) (l/500 nm)^-b). Beyond the law's range it is used with a caution.
 *  @source Jacques2013 eq. 2; Salomatina2006 as tabulated there */
export function reducedScatteringPerCm(law: ScatteringLaw, wavelengthNm: number, remarks?: Remarks): number {
  if (remarks && (wavelengthNm < law.fromNm || wavelengthNm > law.toNm)) {
    remarks.caution(
      'extrapolated-scattering',
      `Scattering is used beyond the ${law.fromNm} to ${law.toNm} nm in which its law was fitted.`,
    );
  }
  const ratio = wavelengthNm / 500;
  return law.aPerCm * (law.rayleighFraction * ratio ** -4 + (1 - law.rayleighFraction) * ratio ** -law.mieExponent);
}

/** Mean cosine of scattering, no more than the ceiling. @source VanGemert1989 */
export function anisotropyOf(law: AnisotropyLaw, wavelengthNm: number): number {
  return Math.min(law.ceiling, law.offset + law.slopePerNm * wavelengthNm);
}
