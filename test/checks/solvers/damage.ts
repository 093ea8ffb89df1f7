import { findRoot } from '../../../domain/numeric/roots.js';
import { gasConstantJPerMolK } from '../../../domain/quantities/constants.js';
import { cem43Min, criticalTemperatureC, damageIntegral, timeToDamageS } from '../../../domain/thermal/damage.js';
import { makeHeatGrid } from '../../../domain/thermal/heat-grid.js';
import { HeatModes } from '../../../domain/thermal/heat-modes.js';
import { prepareLayeredHeat } from '../../../domain/thermal/layered-heat.js';
import type { SkinAtRest } from '../../../domain/thermal/surface-cooling.js';
import type { DamagePair, ThermalMaterial } from '../../../domain/thermal/thermal-figures.js';

type Inputs = Readonly<Record<string, number>>;

function pairOf(frequencyFactorPerS: number, activationEnergyJPerMol: number): DamagePair {
  return { id: 'inputs', endPoint: '', frequencyFactorPerS, activationEnergyJPerMol, source: 'inputs', status: 'derived' };
}

function inputPair(inputs: Inputs): DamagePair {
  const energy = inputs.activationEnergyJPerMol ?? inputs.activationK! * gasConstantJPerMolK;
  return pairOf(inputs.frequencyFactorPerS!, energy);
}

function material(conductivityWPerMK: number, heatCapacityMJPerM3K: number): ThermalMaterial {
  const figures = { densityKgPerM3: 1000, specificHeatJPerKgK: heatCapacityMJPerM3K * 1000 };
  return { id: 'model skin', conductivityWPerMK, ...figures, source: 'ASTM F1930', status: 'from-memory' };
}

// Skin of the burn models for protective clothing (ASTM F1930, from memory): conductivity in life, blood flow included.
const burnGrid = makeHeatGrid(
  [
    { thicknessUm: 75, material: material(0.628, 4.4) },
    { thicknessUm: 1125, material: material(0.582, 4.184) },
    { thicknessUm: 4000, material: material(0.293, 2.6) },
  ],
  { longestS: 100 },
);
// Layered skin with the conductivities measured on samples (Ye and De 2017, table 3), for contact with hot water.
const sampleGrid = makeHeatGrid(
  [
    { thicknessUm: 80, material: material(0.21, 4.14) },
    { thicknessUm: 1900, material: material(0.37, 3.6) },
    { thicknessUm: 4000, material: material(0.2, 2.23) },
  ],
  { longestS: 1e5 },
);
const modes = new HeatModes();
const rest: SkinAtRest = { surfaceC: 32.5, coreC: 33.5, heatTransferWPerM2K: 10, airC: 23 };
// Weaver and Stoll 1969, below and above 50 C.
const [belowFifty, aboveFifty] = [pairOf(2.185e124, 7.776e5), pairOf(1.823e51, 3.252e5)];

// Basal temperatures while the surface exchanges heat with a medium until `exposureS` and with air for 100 s more.
function basalHistory(
  grid: typeof burnGrid,
  heatTransferWPerM2K: number,
  temperatureC: number,
  exposureS: number,
  basalUm: number,
) {
  const during = Array.from({ length: 300 }, (_, i) => exposureS * (i / 300) ** 2);
  const after = Array.from({ length: 200 }, (_, i) => exposureS + 100 * (i / 200) ** 4);
  const heat = prepareLayeredHeat({
    grid,
    modes,
    rest,
    phases: [
      { fromS: 0, toS: exposureS, heatTransferWPerM2K, temperatureC },
      { fromS: exposureS, toS: Number.POSITIVE_INFINITY, heatTransferWPerM2K: 10, temperatureC: 23 },
    ],
    emission: [{ startS: 0, endS: 1, energyFraction: 1 }],
    timesS: [...during, ...after],
    placesUm: [basalUm],
  });
  return { timesS: heat.timesS, temperaturesC: heat.baselineC };
}

// Each step belongs to the branch of its mean temperature; below 44 C the model counts nothing.
function weaverStollDamage(timesS: ArrayLike<number>, temperaturesC: ArrayLike<number>): number {
  let sum = 0;
  for (let i = 1; i < timesS.length; i++) {
    const ends = [temperaturesC[i - 1]!, temperaturesC[i]!];
    const meanC = 0.5 * (ends[0]! + ends[1]!);
    if (meanC > 44) sum += damageIntegral([timesS[i - 1]!, timesS[i]!], ends, meanC > 50 ? aboveFifty : belowFifty);
  }
  return sum;
}

function secondDegreeFluxKwPerM2(exposureS: number): number {
  const damageAt = (flux: number): number => {
    const { timesS, temperaturesC } = basalHistory(burnGrid, 1e-6, flux * 1e9, exposureS, 75);
    return weaverStollDamage(timesS, temperaturesC);
  };
  return Math.exp(findRoot((ln) => Math.log(damageAt(Math.exp(ln)) + 1e-300), 0, Math.log(300), { relativeTolerance: 1e-5 }));
}

export const solvers: Record<string, (inputs: Inputs) => number> = {
  'time to damage integral 1 at constant temperature': (inputs) => timeToDamageS(inputPair(inputs), inputs.temperatureC!),
  'temperature of unit damage rate': (inputs) => criticalTemperatureC(inputPair(inputs)),
  'cumulative equivalent minutes at 43 C': (inputs) =>
    cem43Min([0, inputs.durationS!], [inputs.temperatureC!, inputs.temperatureC!]),
  'hot-water time to a burn': (inputs) => {
    const pair = inputPair(inputs);
    const lnDamage = (lnTime: number): number => {
      const { timesS, temperaturesC } = basalHistory(sampleGrid, 1e5, inputs.temperatureC!, Math.exp(lnTime), 80);
      return Math.log(damageIntegral(timesS, temperaturesC, pair) / (inputs.damage ?? 1) + 1e-300);
    };
    return Math.exp(findRoot(lnDamage, Math.log(0.05), Math.log(1e5), { relativeTolerance: 1e-5 }));
  },
  'surface flux of a second-degree burn': (inputs) => secondDegreeFluxKwPerM2(inputs.exposureS!),
  'thermal radiation dose of a second-degree burn': (inputs) =>
    secondDegreeFluxKwPerM2(inputs.exposureS!) ** (4 / 3) * inputs.exposureS!,
};
