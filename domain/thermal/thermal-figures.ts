import type { DataStatus } from '../quantities/caution.js';

/** What heat conduction needs of a material. Diffusivity is conductivity over density times specific heat. */
export interface ThermalMaterial {
  readonly id: string;
  readonly conductivityWPerMK: number;
  readonly densityKgPerM3: number;
  readonly specificHeatJPerKgK: number;
  readonly source: string;
  readonly status: DataStatus;
}

/** An Arrhenius pair: rate = frequency factor x exp(-activation energy / (R T)). Pairs are never mixed across sources. */
export interface DamagePair {
  readonly id: string;
  readonly endPoint: string;
  readonly frequencyFactorPerS: number;
  readonly activationEnergyJPerMol: number;
  readonly source: string;
  readonly status: DataStatus;
}

/** Heat transfer at the skin's surface by one way of cooling. */
export interface CoolingFigure {
  readonly id: string;
  readonly heatTransferWPerM2K: number;
  readonly heatTransferLowWPerM2K: number;
  readonly heatTransferHighWPerM2K: number;
  /** Temperature of the cooling medium taken when the request gives none. */
  readonly temperatureC: number;
  readonly source: string;
  readonly status: DataStatus;
}

/** Materials, damage pairs and cooling figures, each by id. */
export interface ThermalFigures {
  readonly materials: ReadonlyMap<string, ThermalMaterial>;
  readonly damagePairs: ReadonlyMap<string, DamagePair>;
  readonly cooling: ReadonlyMap<string, CoolingFigure>;
}
