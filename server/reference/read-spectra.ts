import type { WholeBloodTable } from '../../domain/spectra/blood.js';
import type { Chromophore } from '../../domain/spectra/chromophore.js';
import type { Spectrum } from '../../domain/spectra/spectrum.js';
import { DataError, numberIn, type ParsedDataFile, parseDataFile, statusIn } from './data-file.js';

const tableColumns = {
  molar: ['wavelength_nm', 'molar_extinction_per_cm_m'],
  absorption: ['wavelength_nm', 'absorption_per_cm'],
  law: ['parameter', 'value', 'unit'],
};

export function readChromophore(file: string, text: string, bibliography: ReadonlyMap<string, string>): Chromophore {
  const molar = /^wavelength_nm,molar/m.test(text);
  const form = /^# form: (.*)$/m.exec(text)?.[1];
  const columns = form === 'table' ? (molar ? tableColumns.molar : tableColumns.absorption) : tableColumns.law;
  const parsed = parseDataFile(file, text, columns);
  const { header } = parsed;
  const field = (key: string): string => {
    const value = header[key];
    if (!value) throw new DataError(file, null, `its header lacks '${key}'`);
    return value;
  };
  const id = field('id');
  if (!file.endsWith(`/${id}.csv`)) throw new DataError(file, 1, `id '${id}' is not the file's name`);
  const sources = field('source').split(' ');
  for (const key of sources)
    if (!bibliography.has(key)) throw new DataError(file, null, `source '${key}' is not in the bibliography`);
  return {
    id,
    name: field('name'),
    quantity: field('quantity'),
    unit: field('unit'),
    kind: form === 'table' && molar ? 'molar-extinction' : 'absorption',
    spectrum: form === 'table' ? readTable(parsed, columns[1]!) : readLaw(parsed, form, field),
    sources,
    status: statusIn(file, null, header.status),
    note: header.note ?? '',
    ...(header.spread === undefined ? {} : { spread: readSpread(file, header.spread) }),
  };
}

function readSpread(file: string, text: string): NonNullable<Chromophore['spread']> {
  const match = /^(\d+(?:\.\d+)?) from (\d+) to (\d+) nm$/.exec(text);
  const [factor, fromNm, toNm] = (match?.slice(1) ?? []).map(Number) as [number, number, number];
  if (!match || factor < 1 || toNm <= fromNm)
    throw new DataError(file, null, `spread '${text}' must read like '1.5 from 1600 to 1760 nm'`);
  return { factor, fromNm, toNm };
}

function readTable(parsed: ParsedDataFile, column: string): Spectrum {
  const wavelengthsNm = ascending(parsed, 'wavelength_nm');
  const values = Float64Array.from(parsed.rows, (row) => numberIn(parsed, row, column, 0, 1e7));
  return { form: 'table', wavelengthsNm, values };
}

function readLaw(parsed: ParsedDataFile, form: string | undefined, field: (key: string) => string): Spectrum {
  const [fromNm, toNm] = field('range_nm').split(' ').map(Number) as [number, number];
  const extendedToNm = Number(field('extended_to_nm'));
  if (!(fromNm > 0 && toNm > fromNm && extendedToNm >= toNm))
    throw new DataError(parsed.file, null, 'range_nm or extended_to_nm is wrong');
  const value = (name: string): number => {
    const row = parsed.rows.find((candidate) => candidate.cells.parameter === name);
    if (!row) throw new DataError(parsed.file, null, `parameter '${name}' is missing`);
    return numberIn(parsed, row, 'value', -1e20, 1e20);
  };
  const range = { fromNm, toNm, extendedToNm };
  if (form === 'power-law') return { form, prefactor: value('prefactor'), exponent: value('exponent'), ...range };
  if (form === 'exponential') {
    return {
      form,
      offset: value('offset'),
      amplitude: value('amplitude'),
      originNm: value('origin'),
      decayNm: value('decay'),
      ...range,
    };
  }
  throw new DataError(parsed.file, null, `form '${form ?? ''}' is not table, power-law or exponential`);
}

function ascending(parsed: ParsedDataFile, column: string): Float64Array {
  let previous = 0;
  return Float64Array.from(parsed.rows, (row) => {
    const value = numberIn(parsed, row, column, 100, 1e6);
    if (value <= previous) throw new DataError(parsed.file, row.line, `${column} ${value} does not rise above ${previous}`);
    previous = value;
    return value;
  });
}

export function readWholeBlood(text: string): WholeBloodTable {
  const file = 'tissue/whole-blood.csv';
  const columns = ['wavelength_nm', 'oxygenated_per_cm', 'deoxygenated_per_cm', 'scattering_per_cm', 'anisotropy'];
  const parsed = parseDataFile(file, text, columns);
  return {
    wavelengthsNm: ascending(parsed, 'wavelength_nm'),
    oxygenatedPerCm: Float64Array.from(parsed.rows, (row) => numberIn(parsed, row, 'oxygenated_per_cm', 0, 1e5)),
    deoxygenatedPerCm: Float64Array.from(parsed.rows, (row) => numberIn(parsed, row, 'deoxygenated_per_cm', 0, 1e5)),
  };
}
