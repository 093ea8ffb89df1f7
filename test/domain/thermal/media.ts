import type { DamagePair, ThermalFigures, ThermalMaterial } from '../../../domain/thermal/thermal-figures.js';

export const medium = (conductivityWPerMK: number, densityKgPerM3: number, specificHeatJPerKgK: number): ThermalMaterial => ({
  id: 'test',
  conductivityWPerMK,
  densityKgPerM3,
  specificHeatJPerKgK,
  source: 'test',
  status: 'derived',
});

/** The medium of the closed forms: alpha 1.3e-7 m2/s, k 0.5 W/m/K. */
export const alpha = 1.3e-7;
export const conductivity = 0.5;
export const heatCapacity = conductivity / alpha;
export const water = medium(conductivity, 1000, heatCapacity / 1000);

export const epidermis = medium(0.21, 1150, 3600);
export const dermis = medium(0.37, 1116, 3300);
export const fat = medium(0.2, 971, 2300);
export const blood = medium(0.54, 1060, 3890);

const pair = (frequencyFactorPerS: number, activationEnergyJPerMol: number): DamagePair => ({
  id: 'test',
  endPoint: 'test',
  frequencyFactorPerS,
  activationEnergyJPerMol,
  source: 'test',
  status: 'derived',
});

export const henriques = pair(3.1e98, 6.28e5);
export const vesselWall = pair(5.6e63, 4.3e5);

const figure = (id: string, heatTransferWPerM2K: number, temperatureC: number) => ({
  id,
  heatTransferWPerM2K,
  heatTransferLowWPerM2K: heatTransferWPerM2K,
  heatTransferHighWPerM2K: heatTransferWPerM2K,
  temperatureC,
  source: 'test',
  status: 'derived' as const,
});

export const figures: ThermalFigures = {
  materials: new Map(),
  damagePairs: new Map(),
  cooling: new Map(
    [
      figure('still-air', 10, 23),
      figure('contact', 3000, 5),
      figure('cryogen-spray', 5000, -26),
      figure('chilled-air', 300, -10),
    ].map((row) => [row.id, row]),
  ),
};
