import type { LaserLine } from '../../domain/media/laser-line.js';
import type { AblationFigure } from '../../domain/reference/ablation-figure.js';
import type { CoolingFigure, DamagePair, ThermalFigures, ThermalMaterial } from '../../domain/thermal/thermal-figures.js';
import { DataError, type DataRow, numberIn, type ParsedDataFile, parseDataFile, statusIn, textIn } from './data-file.js';

export function readThermal(text: (name: string) => string): ThermalFigures {
  return {
    materials: byId(
      'thermal/materials.csv',
      text,
      ['id', 'conductivity_w_per_m_k', 'density_kg_per_m3', 'specific_heat_j_per_kg_k', 'source', 'status', 'note'],
      (parsed, row, shared): ThermalMaterial => ({
        ...shared,
        conductivityWPerMK: numberIn(parsed, row, 'conductivity_w_per_m_k', 0.01, 1000),
        densityKgPerM3: numberIn(parsed, row, 'density_kg_per_m3', 100, 20000),
        specificHeatJPerKgK: numberIn(parsed, row, 'specific_heat_j_per_kg_k', 100, 10000),
      }),
    ),
    damagePairs: byId(
      'thermal/damage.csv',
      text,
      ['id', 'end_point', 'frequency_factor_per_s', 'activation_energy_j_per_mol', 'source', 'status', 'note'],
      (parsed, row, shared): DamagePair => ({
        ...shared,
        endPoint: textIn(parsed, row, 'end_point'),
        frequencyFactorPerS: numberIn(parsed, row, 'frequency_factor_per_s', 1, 1e200),
        activationEnergyJPerMol: numberIn(parsed, row, 'activation_energy_j_per_mol', 1e4, 2e6),
      }),
    ),
    cooling: byId(
      'thermal/cooling.csv',
      text,
      ['id', 'heat_transfer_w_per_m2_k', 'low', 'high', 'temperature_c', 'source', 'status', 'note'],
      (parsed, row, shared): CoolingFigure => {
        const low = numberIn(parsed, row, 'low', 0, 1e6);
        const high = numberIn(parsed, row, 'high', low, 1e6);
        return {
          ...shared,
          heatTransferWPerM2K: numberIn(parsed, row, 'heat_transfer_w_per_m2_k', low, high),
          heatTransferLowWPerM2K: low,
          heatTransferHighWPerM2K: high,
          temperatureC: numberIn(parsed, row, 'temperature_c', -200, 60),
        };
      },
    ),
  };
}

type Shared = Pick<ThermalMaterial, 'id' | 'source' | 'status'>;

function byId<T extends Shared>(
  file: string,
  text: (name: string) => string,
  columns: readonly string[],
  read: (parsed: ParsedDataFile, row: DataRow, shared: Shared) => T,
): ReadonlyMap<string, T> {
  const parsed = parseDataFile(file, text(file), columns);
  const entries = new Map<string, T>();
  for (const row of parsed.rows) {
    const id = textIn(parsed, row, 'id');
    if (entries.has(id)) throw new DataError(file, row.line, `id '${id}' stands twice`);
    entries.set(
      id,
      read(parsed, row, { id, source: textIn(parsed, row, 'source'), status: statusIn(file, row.line, row.cells.status) }),
    );
  }
  return entries;
}

export function readLines(text: string): LaserLine[] {
  const file = 'media/lines.csv';
  const columns = ['id', 'medium', 'wavelength_nm', 'regime', 'pulse_min_s', 'pulse_max_s', 'source', 'status', 'note'];
  const lines = byId(
    file,
    () => text,
    columns,
    (parsed, row, shared): LaserLine => {
      const pulseMinS = numberIn(parsed, row, 'pulse_min_s', 1e-15, 1e4);
      return {
        ...shared,
        medium: textIn(parsed, row, 'medium'),
        wavelengthNm: numberIn(parsed, row, 'wavelength_nm', 100, 20000),
        regime: textIn(parsed, row, 'regime'),
        pulseMinS,
        pulseMaxS: numberIn(parsed, row, 'pulse_max_s', pulseMinS, 1e4),
        note: row.cells.note ?? '',
      };
    },
  );
  return [...lines.values()];
}

export function readAblation(text: (name: string) => string): ReadonlyMap<string, AblationFigure> {
  return byId(
    'interaction/ablation.csv',
    text,
    ['id', 'laser', 'wavelength_nm', 'tissue', 'quantity', 'low', 'high', 'unit', 'source', 'status', 'note'],
    (parsed, row, shared): AblationFigure => {
      const low = numberIn(parsed, row, 'low', 0, 1e6);
      return {
        ...shared,
        laser: textIn(parsed, row, 'laser'),
        wavelengthNm: numberIn(parsed, row, 'wavelength_nm', 100, 20000),
        tissue: textIn(parsed, row, 'tissue'),
        quantity: textIn(parsed, row, 'quantity'),
        low,
        high: numberIn(parsed, row, 'high', low, 1e6),
        unit: textIn(parsed, row, 'unit'),
        note: row.cells.note ?? '',
      };
    },
  );
}
