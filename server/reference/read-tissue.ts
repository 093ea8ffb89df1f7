import type {
  AnisotropyLaw,
  Figure,
  LayerName,
  Phototype,
  PhototypeFigure,
  ScatteringLaw,
  SkinFigures,
  StructureId,
} from '../../domain/tissue/skin-figures.js';
import { DataError, type DataRow, numberIn, type ParsedDataFile, parseDataFile, statusIn, textIn } from './data-file.js';

const layerNames: readonly LayerName[] = ['epidermis', 'dermis', 'fat'];
const phototypes: readonly Phototype[] = ['I', 'II', 'III', 'IV', 'V', 'VI'];
const structureIds: readonly StructureId[] = [
  'epidermis_thickness',
  'dermis_thickness',
  'fat_thickness',
  'blood_fraction',
  'oxygen_saturation',
  'hematocrit',
  'hemoglobin_mass',
  'epidermis_water',
  'dermis_water',
  'fat_water',
  'fat_lipid',
  'background_vessel_diameter',
];

export function readSkinFigures(text: (name: string) => string): SkinFigures {
  return {
    structure: keyed(
      'tissue/structure.csv',
      text,
      ['parameter', 'value', 'low', 'high', 'unit', 'source', 'status', 'note'],
      structureIds,
      readFigure,
    ),
    scattering: keyed(
      'tissue/scattering.csv',
      text,
      ['layer', 'a_per_cm', 'rayleigh_fraction', 'mie_exponent', 'from_nm', 'to_nm', 'spread_factor', 'source', 'status'],
      layerNames,
      (parsed, row): ScatteringLaw => ({
        aPerCm: numberIn(parsed, row, 'a_per_cm', 0.1, 1000),
        rayleighFraction: numberIn(parsed, row, 'rayleigh_fraction', 0, 1),
        mieExponent: numberIn(parsed, row, 'mie_exponent', -4, 4),
        fromNm: numberIn(parsed, row, 'from_nm', 100, 20000),
        toNm: numberIn(parsed, row, 'to_nm', 100, 20000),
        spreadFactor: numberIn(parsed, row, 'spread_factor', 1, 10),
        ...provenance(parsed, row),
      }),
    ),
    anisotropy: keyed(
      'tissue/anisotropy.csv',
      text,
      ['layer', 'offset', 'slope_per_nm', 'ceiling', 'source', 'status'],
      ['skin'] as const,
      (parsed, row): AnisotropyLaw => ({
        offset: numberIn(parsed, row, 'offset', 0, 1),
        slopePerNm: numberIn(parsed, row, 'slope_per_nm', 0, 0.01),
        ceiling: numberIn(parsed, row, 'ceiling', 0, 0.999),
        ...provenance(parsed, row),
      }),
    ).skin,
    refractiveIndex: keyed(
      'tissue/refractive-index.csv',
      text,
      ['layer', 'index', 'low', 'high', 'source', 'status'],
      layerNames,
      (parsed, row): Figure => ({
        ...bounded(parsed, row, 'index', 1, 2),
        unit: '1',
        ...provenance(parsed, row),
      }),
    ),
    phototypes: keyed(
      'tissue/phototype.csv',
      text,
      ['phototype', 'melanosome_fraction', 'low', 'high', 'ita_low_degrees', 'ita_high_degrees', 'source', 'status'],
      phototypes,
      (parsed, row): PhototypeFigure => {
        const low = numberIn(parsed, row, 'low', 1e-4, 0.5);
        const high = numberIn(parsed, row, 'high', low, 0.5);
        const itaLowDegrees = numberIn(parsed, row, 'ita_low_degrees', -90, 90);
        return {
          melanosomeFraction: numberIn(parsed, row, 'melanosome_fraction', low, high),
          low,
          high,
          itaLowDegrees,
          itaHighDegrees: numberIn(parsed, row, 'ita_high_degrees', itaLowDegrees, 90),
          ...provenance(parsed, row),
        };
      },
    ),
  };
}

function bounded(
  parsed: ParsedDataFile,
  row: DataRow,
  column: string,
  min: number,
  max: number,
): Pick<Figure, 'value' | 'low' | 'high'> {
  const low = numberIn(parsed, row, 'low', min, max);
  const high = numberIn(parsed, row, 'high', low, max);
  return { value: numberIn(parsed, row, column, low, high), low, high };
}

function readFigure(parsed: ParsedDataFile, row: DataRow): Figure {
  return {
    ...bounded(parsed, row, 'value', 0, 1e6),
    unit: textIn(parsed, row, 'unit'),
    ...provenance(parsed, row),
  };
}

function provenance(parsed: ParsedDataFile, row: DataRow): Pick<Figure, 'source' | 'status'> {
  return { source: textIn(parsed, row, 'source'), status: statusIn(parsed.file, row.line, row.cells.status) };
}

function keyed<K extends string, T>(
  file: string,
  text: (name: string) => string,
  columns: readonly string[],
  keys: readonly K[],
  read: (parsed: ParsedDataFile, row: DataRow) => T,
): Record<K, T> {
  const parsed = parseDataFile(file, text(file), columns);
  const entries: Partial<Record<K, T>> = {};
  for (const row of parsed.rows) {
    const name = textIn(parsed, row, columns[0]!);
    const key = keys.find((known) => known === name);
    if (key === undefined || key in entries)
      throw new DataError(file, row.line, `${columns[0]} '${name}' is unknown or stands twice`);
    entries[key] = read(parsed, row);
  }
  const missing = keys.find((key) => !(key in entries));
  if (missing) throw new DataError(file, null, `${columns[0]} '${missing}' is missing`);
  return entries as Record<K, T>;
}
