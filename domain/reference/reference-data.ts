import type { LaserLine } from '../media/laser-line.js';
import type { HemoglobinTable, WholeBloodTable } from '../spectra/blood.js';
import type { Chromophores } from '../spectra/chromophore.js';
import type { ThermalFigures } from '../thermal/thermal-figures.js';
import type { SkinFigures } from '../tissue/skin-figures.js';
import type { AblationFigure } from './ablation-figure.js';

/** One file of the reference data as it was read. */
export interface DataFile {
  readonly name: string;
  readonly version: string;
  readonly sha256: string;
}

/** Every published figure that the program rests on, read once and frozen. */
export interface ReferenceData {
  readonly chromophores: Chromophores;
  /** Second tables of a chromophore, by id; selectable, and the measure of how far tables disagree. */
  readonly alternatives: Chromophores;
  readonly wholeBlood: WholeBloodTable;
  readonly hemoglobin: HemoglobinTable;
  readonly skin: SkinFigures;
  readonly thermal: ThermalFigures;
  readonly media: readonly LaserLine[];
  /** Ablation figures by id. */
  readonly ablation: ReadonlyMap<string, AblationFigure>;
  readonly files: readonly DataFile[];
  /** Citations by key. */
  readonly bibliography: ReadonlyMap<string, string>;
}
