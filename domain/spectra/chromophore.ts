import type { DataStatus, Remarks } from '../quantities/caution.js';
import { DomainError } from '../quantities/errors.js';
import { type Spectrum, spectrumRangeNm, spectrumValueAt } from './spectrum.js';

/** A substance that absorbs. Molar extinctions are decadic, per tetramer for hemoglobins. */
export interface Chromophore {
  readonly id: string;
  readonly name: string;
  readonly quantity: string;
  readonly unit: string;
  readonly kind: 'molar-extinction' | 'absorption';
  readonly spectrum: Spectrum;
  readonly sources: readonly string[];
  readonly status: DataStatus;
  readonly note: string;
  /** Stretch of the spectrum that is known only to a factor; absent where the source's own accuracy holds throughout. */
  readonly spread?: { readonly factor: number; readonly fromNm: number; readonly toNm: number };
}

export type Chromophores = ReadonlyMap<string, Chromophore>;

const hemoglobinMolarMassGPerMol = 64500; // Prahl1998
const naturalFromDecadic = Math.LN10;
/** Hemoglobin of whole blood at the reference hematocrit. @source Prahl1998 */
export const wholeBloodHemoglobinGPerL = 150;

/** Molar mass by which mass concentrations of a chromophore become molar; null where none is defined. */
function molarMassGPerMol(id: string): number | null {
  if (id.includes('hemoglobin')) return hemoglobinMolarMassGPerMol;
  if (id === 'bilirubin') return 584.66; // C33H36N4O6, from atomic weights
  if (id === 'beta-carotene') return 536.87; // C40H56, from atomic weights
  return null;
}

/** A chromophore by id. Throws: unknown-reference. */
export function chromophoreOf(chromophores: Chromophores, id: string): Chromophore {
  const chromophore = chromophores.get(id);
  if (chromophore) return chromophore;
  throw new DomainError('unknown-reference', `no chromophore '${id}'; known are ${[...chromophores.keys()].join(', ')}`, { id });
}

/** Decadic molar extinction, 1/(cm M). Throws: out-of-range; contradiction for a chromophore tabulated as absorption. */
export function molarExtinctionPerCmPerM(chromophore: Chromophore, wavelengthNm: number): number {
  if (chromophore.kind !== 'molar-extinction') {
    throw new DomainError('contradiction', `${chromophore.id} is tabulated as absorption, not as molar extinction`, {
      id: chromophore.id,
    });
  }
  return spectrumValueAt(chromophore.spectrum, wavelengthNm, `wavelengthNm for ${chromophore.id}`);
}

/** Absorption coefficient, natural base, 1/cm: ln(10) e c for a molar extinction e at `concentrationGPerL` (whole blood's 150 g/L for
 *  hemoglobins; needed for other solutes). Throws: out-of-range; contradiction without a concentration.
 *  @source Prahl1998 conversion */
export function absorptionPerCm(chromophore: Chromophore, wavelengthNm: number, concentrationGPerL?: number): number {
  if (chromophore.kind === 'absorption') {
    return spectrumValueAt(chromophore.spectrum, wavelengthNm, `wavelengthNm for ${chromophore.id}`);
  }
  const molarMass = molarMassGPerMol(chromophore.id);
  const gPerL = concentrationGPerL ?? (chromophore.id.includes('hemoglobin') ? wholeBloodHemoglobinGPerL : null);
  if (molarMass === null || gPerL === null) {
    throw new DomainError('contradiction', `${chromophore.id} needs a concentration to become an absorption coefficient`, {
      id: chromophore.id,
    });
  }
  return (naturalFromDecadic * molarExtinctionPerCmPerM(chromophore, wavelengthNm) * gPerL) / molarMass;
}

/** Absorption of a chromophore by id; a closed form used beyond its source's range, and a sparse
 *  stretch of a table, leave a caution. Throws: out-of-range, unknown-reference. */
export function absorptionOf(chromophores: Chromophores, id: string, wavelengthNm: number, remarks?: Remarks): number {
  const chromophore = chromophoreOf(chromophores, id);
  const [, toNm] = spectrumRangeNm(chromophore.spectrum);
  if (remarks && chromophore.spectrum.form !== 'table' && wavelengthNm > toNm) {
    remarks.caution(
      'extrapolated-spectrum',
      `${chromophore.name}: the published law is used beyond ${toNm} nm, where its author extrapolates.`,
    );
  }
  const { spread } = chromophore;
  if (remarks && spread && wavelengthNm >= spread.fromNm && wavelengthNm <= spread.toNm) {
    remarks.caution(
      'sparse-spectrum',
      `${chromophore.name} is known only to a factor of ${spread.factor} from ${spread.fromNm} to ${spread.toNm} nm.`,
    );
  }
  return absorptionPerCm(chromophore, wavelengthNm);
}
