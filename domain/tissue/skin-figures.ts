import type { DataStatus } from '../quantities/caution.js';

export type LayerName = 'epidermis' | 'dermis' | 'fat';
export type Phototype = 'I' | 'II' | 'III' | 'IV' | 'V' | 'VI';

/** A figure with the range it varies in and where it comes from. */
export interface Figure {
  readonly value: number;
  readonly low: number;
  readonly high: number;
  readonly unit: string;
  readonly source: string;
  readonly status: DataStatus;
}

/** Reduced scattering a (f (l/500)^-4 + (1-f) (l/500)^-b) of one layer. */
export interface ScatteringLaw {
  readonly aPerCm: number;
  readonly rayleighFraction: number;
  readonly mieExponent: number;
  readonly fromNm: number;
  readonly toNm: number;
  /** Bounds about two standard deviations of all published laws for this tissue, up and down. */
  readonly spreadFactor: number;
  readonly source: string;
  readonly status: DataStatus;
}

/** Mean cosine offset + slope l, no more than the ceiling. */
export interface AnisotropyLaw {
  readonly offset: number;
  readonly slopePerNm: number;
  readonly ceiling: number;
  readonly source: string;
  readonly status: DataStatus;
}

/** Melanosome fraction of one phototype and the band of individual typology angle that goes with it. */
export interface PhototypeFigure {
  readonly melanosomeFraction: number;
  readonly low: number;
  readonly high: number;
  readonly itaLowDegrees: number;
  readonly itaHighDegrees: number;
  readonly source: string;
  readonly status: DataStatus;
}

export type StructureId =
  | 'epidermis_thickness'
  | 'dermis_thickness'
  | 'fat_thickness'
  | 'blood_fraction'
  | 'oxygen_saturation'
  | 'hematocrit'
  | 'hemoglobin_mass'
  | 'epidermis_water'
  | 'dermis_water'
  | 'fat_water'
  | 'fat_lipid'
  | 'background_vessel_diameter';

/** Published figures of skin that its description leaves open. */
export interface SkinFigures {
  readonly structure: Readonly<Record<StructureId, Figure>>;
  readonly scattering: Readonly<Record<LayerName, ScatteringLaw>>;
  readonly anisotropy: AnisotropyLaw;
  readonly refractiveIndex: Readonly<Record<LayerName, Figure>>;
  readonly phototypes: Readonly<Record<Phototype, PhototypeFigure>>;
}
