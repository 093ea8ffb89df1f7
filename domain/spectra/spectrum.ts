import { interpolateLog } from '../numeric/interpolate.js';
import { DomainError } from '../quantities/errors.js';

/** A spectrum as published: a table, or a closed form of the wavelength in nm. Values are in the unit of the chromophore that
 *  holds it. `fromNm` and `toNm` bound what the source supports; a closed form may be used up to `extendedToNm` with a caution. */
export type Spectrum =
  | { readonly form: 'table'; readonly wavelengthsNm: Float64Array; readonly values: Float64Array }
  | {
      readonly form: 'power-law';
      readonly prefactor: number;
      readonly exponent: number;
      readonly fromNm: number;
      readonly toNm: number;
      readonly extendedToNm: number;
    }
  | {
      readonly form: 'exponential';
      readonly offset: number;
      readonly amplitude: number;
      readonly originNm: number;
      readonly decayNm: number;
      readonly fromNm: number;
      readonly toNm: number;
      readonly extendedToNm: number;
    };

/** First and last wavelength that the source itself supports, in nm. */
export function spectrumRangeNm(spectrum: Spectrum): readonly [number, number] {
  return spectrum.form === 'table'
    ? [spectrum.wavelengthsNm[0]!, spectrum.wavelengthsNm[spectrum.wavelengthsNm.length - 1]!]
    : [spectrum.fromNm, spectrum.toNm];
}

/** Value at a wavelength. Tables: logarithm of the value against wavelength. Closed forms hold from `fromNm` to `extendedToNm`.
 *  Throws: out-of-range. */
export function spectrumValueAt(spectrum: Spectrum, wavelengthNm: number, quantity: string): number {
  if (spectrum.form === 'table') return interpolateLog(spectrum.wavelengthsNm, spectrum.values, wavelengthNm, quantity);
  if (!(wavelengthNm >= spectrum.fromNm && wavelengthNm <= spectrum.extendedToNm)) {
    throw new DomainError(
      'out-of-range',
      `${quantity} is ${wavelengthNm}; the law holds from ${spectrum.fromNm} to ${spectrum.extendedToNm}`,
      {
        quantity,
        value: Number.isFinite(wavelengthNm) ? wavelengthNm : String(wavelengthNm),
        min: spectrum.fromNm,
        max: spectrum.extendedToNm,
      },
    );
  }
  if (spectrum.form === 'power-law') return spectrum.prefactor * wavelengthNm ** spectrum.exponent;
  return spectrum.offset + spectrum.amplitude * Math.exp(-(wavelengthNm - spectrum.originNm) / spectrum.decayNm);
}
