import { describe, expect, it } from 'vitest';
import { Remarks } from '../../../domain/quantities/caution.js';
import {
  absorptionOf,
  absorptionPerCm,
  type Chromophore,
  chromophoreOf,
  molarExtinctionPerCmPerM,
} from '../../../domain/spectra/chromophore.js';
import { spectrumRangeNm, spectrumValueAt } from '../../../domain/spectra/spectrum.js';

const base = { name: 'Ink', quantity: '', unit: '', sources: [], status: 'derived', note: '' } as const;
const table = { form: 'table', wavelengthsNm: Float64Array.of(500, 600), values: Float64Array.of(1000, 10) } as const;
const molar: Chromophore = { ...base, id: 'testhemoglobin', kind: 'molar-extinction', spectrum: table };
const plain: Chromophore = { ...base, id: 'ink', kind: 'absorption', spectrum: table };

describe('chromophores', () => {
  it('turn a decadic extinction into a natural absorption with the molar mass and the concentration', () => {
    const expected = (Math.LN10 * 1000 * 150) / 64500;
    expect(absorptionPerCm(molar, 500)).toBeCloseTo(expected, 10);
    expect(absorptionPerCm(molar, 500, 75)).toBeCloseTo(expected / 2, 10);
  });

  it('refuse what would have to be guessed: a concentration, an extinction that is none, an unknown id', () => {
    const solute: Chromophore = { ...molar, id: 'bilirubin' };
    expect(() => absorptionPerCm(solute, 500)).toThrow(/concentration/);
    expect(() => molarExtinctionPerCmPerM(plain, 500)).toThrow(/not as molar extinction/);
    expect(() => chromophoreOf(new Map([['ink', plain]]), 'tar')).toThrow(/known are ink/);
  });

  it('never extrapolate a table', () => {
    expect(() => absorptionPerCm(plain, 499.9)).toThrow(/from 500 to 600/);
    expect(() => absorptionPerCm(plain, 600.1)).toThrow(/from 500 to 600/);
  });

  it('leave a caution where a closed form is used beyond its range, and refuse it beyond the extension', () => {
    const law = { form: 'power-law', prefactor: 1e6, exponent: -2, fromNm: 400, toNm: 1000, extendedToNm: 2000 } as const;
    const inks = new Map<string, Chromophore>([['ink', { ...plain, spectrum: law }]]);
    const remarks = new Remarks();
    expect(absorptionOf(inks, 'ink', 1000, remarks)).toBeCloseTo(1, 12);
    expect(remarks.cautions).toEqual([]);
    expect(absorptionOf(inks, 'ink', 2000, remarks)).toBeCloseTo(0.25, 12);
    expect(remarks.cautions.map(({ code }) => code)).toEqual(['extrapolated-spectrum']);
    expect(() => absorptionOf(inks, 'ink', 2001, remarks)).toThrow(/from 400 to 2000/);
    expect(() => absorptionOf(inks, 'ink', 399, remarks)).toThrow(/from 400 to 2000/);
    expect(spectrumRangeNm(law)).toEqual([400, 1000]);
  });

  it('leave a caution on a sparse stretch of a table, and nowhere else', () => {
    const inks = new Map<string, Chromophore>([['ink', { ...plain, spread: { factor: 1.5, fromNm: 550, toNm: 560 } }]]);
    const remarks = new Remarks();
    absorptionOf(inks, 'ink', 549, remarks);
    expect(remarks.cautions).toEqual([]);
    absorptionOf(inks, 'ink', 555, remarks);
    expect(remarks.cautions[0]!.text).toMatch(/factor of 1.5 from 550 to 560 nm/);
  });

  it('follow an exponential from its origin', () => {
    const law = { form: 'exponential', offset: 1, amplitude: 10, originNm: 400, decayNm: 100, fromNm: 350, toNm: 900 } as const;
    expect(spectrumValueAt({ ...law, extendedToNm: 900 }, 500, 'x')).toBeCloseTo(1 + 10 / Math.E, 12);
  });
});
