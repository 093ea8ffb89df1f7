import type { ReferenceData } from '../../../domain/reference/reference-data.js';
import type { Chromophore } from '../../../domain/spectra/chromophore.js';
import { spectrumRangeNm } from '../../../domain/spectra/spectrum.js';
import { chromophoreOfOwn, type OwnChromophore } from './chromophores.store.js';

export function presentChromophore(chromophore: Chromophore, { alternatives, bibliography }: ReferenceData) {
  const { id, name, quantity, unit, spectrum, sources, status, note, spread } = chromophore;
  const [fromNm, toNm] = spectrumRangeNm(spectrum);
  return {
    id,
    name,
    quantity,
    unit,
    form: spectrum.form,
    fromNm,
    toNm,
    points: spectrum.form === 'table' ? spectrum.wavelengthsNm.length : 0,
    sources: sources.map((key) =>
      bibliography.has(key) ? { key, citation: bibliography.get(key)! } : { key: 'own', citation: key },
    ),
    status,
    note,
    ...(spread ? { spread } : {}),
    ...(alternatives.has(id) ? { alternativeTo: id.slice(0, id.indexOf('-')) } : {}),
  };
}

export function presentOwnChromophore(own: OwnChromophore, reference: ReferenceData) {
  const { measuredAt = null, relativeUncertainty = null } = own.content;
  const shared = presentChromophore(chromophoreOfOwn(own), reference);
  return { ...shared, own: { createdAt: own.recordedAt, measuredAt, relativeUncertainty } };
}

interface Columns {
  readonly wavelengthsNm: readonly number[];
  readonly absorptionsPerCm: readonly number[];
  readonly molarExtinctionsPerCmPerM?: readonly number[];
}

export function presentSpectrumCsv({ wavelengthsNm, absorptionsPerCm, molarExtinctionsPerCmPerM: molar }: Columns): string {
  const head = `wavelength_nm,absorption_per_cm${molar ? ',molar_extinction_per_cm_per_m' : ''}`;
  const rows = wavelengthsNm.map((nm, i) => `${nm},${absorptionsPerCm[i]}${molar ? `,${molar[i]}` : ''}`);
  return `${[head, ...rows].join('\r\n')}\r\n`;
}
