import { criticalTemperatureC, fluenceForDamage } from '../../../domain/thermal/damage.js';
import { emissionIntervals } from '../../../domain/thermal/emission.js';
import { makeHeatGrid } from '../../../domain/thermal/heat-grid.js';
import { prepareInclusionHeat } from '../../../domain/thermal/inclusion-heat.js';
import { prepareLayeredHeat } from '../../../domain/thermal/layered-heat.js';
import {
  type HeatGeometry,
  halfDecayFactor,
  relaxationTimeS,
  stressConfinementTimeS,
} from '../../../domain/thermal/relaxation.js';
import { sampleTimesS } from '../../../domain/thermal/sample-times.js';
import { thermalDamageTimeS } from '../../../domain/thermal/thermal-damage-time.js';
import type { DamagePair, ThermalMaterial } from '../../../domain/thermal/thermal-figures.js';

type Inputs = Readonly<Record<string, number>>;

function material(conductivityWPerMK: number, densityKgPerM3: number, specificHeatJPerKgK: number): ThermalMaterial {
  return { id: 'check', conductivityWPerMK, densityKgPerM3, specificHeatJPerKgK, source: 'Ye and De 2017', status: 'read' };
}

function pairOf(frequencyFactorPerS: number, activationEnergyJPerMol: number): DamagePair {
  return { id: 'check', endPoint: '', frequencyFactorPerS, activationEnergyJPerMol, source: 'inputs', status: 'derived' };
}

const [epidermis, dermis, blood] = [material(0.21, 1150, 3600), material(0.37, 1116, 3224), material(0.54, 1060, 3890)];
const layers = [
  { thicknessUm: 60, material: epidermis },
  { thicknessUm: 2000, material: dermis },
];
const basal = pairOf(3.1e98, 6.2355e5); // Henriques 1947
const vesselWall = pairOf(5.6e63, 4.3e5); // Agah et al 1994

// Fluence that damages the basal layer over the one that damages the vessel's wall, for evenly heated epidermis and blood.
export function therapeuticRatio(durationS: number, { diameterUm, epidermisPerCm, bloodPerCm }: Inputs): number {
  const emission = emissionIntervals({ durationS });
  const timesS = sampleTimesS(emission, 10, 200);
  const grid = makeHeatGrid(layers);
  const phases = [{ fromS: 0, toS: Number.POSITIVE_INFINITY, heatTransferWPerM2K: 10, temperatureC: 23 }];
  const skin = prepareLayeredHeat({ grid, phases, emission, timesS, placesUm: [60] });
  const source = grid.centersUm.map((depth) => (depth < 60 ? epidermisPerCm! : 0));
  const { baselineC } = skin;
  const limit = fluenceForDamage({ timesS, baselineC, responseK: skin.responseK(source), pair: basal, maxFluenceJPerCm2: 1e6 })!;
  const radiusUm = diameterUm! / 2;
  const vessel = prepareInclusionHeat({
    geometry: 'cylinder',
    radiusUm,
    inside: blood,
    outside: dermis,
    emission,
    timesS,
    placesRadiusUm: [radiusUm],
  });
  const responseK = vessel.excessK.map((rise) => rise * bloodPerCm!);
  return limit / fluenceForDamage({ timesS, baselineC, responseK, pair: vesselWall, maxFluenceJPerCm2: 1e6 })!;
}

const shapes: readonly HeatGeometry[] = ['plane', 'cylinder', 'sphere'];
const shape = (inputs: Inputs): HeatGeometry => shapes[inputs.dimensions! - 1]!;

export const solvers: Record<string, (inputs: Inputs) => number> = {
  'relaxation time': (inputs) => relaxationTimeS(shape(inputs), inputs.sizeUm!, inputs.diffusivityMm2PerS),
  'relaxation time, sphere factor 27': (inputs) =>
    (relaxationTimeS('sphere', inputs.sizeUm!, inputs.diffusivityMm2PerS) * 24) / 27,
  'ratio of relaxation times': (inputs) =>
    relaxationTimeS(shape(inputs), inputs.sizeUm!, inputs.diffusivityMm2PerS) /
    relaxationTimeS(shape(inputs), inputs.referenceSizeUm!, inputs.referenceDiffusivityMm2PerS),
  'half-decay factor of a Gaussian profile': (inputs) => halfDecayFactor(shape(inputs)),
  'stress confinement time': (inputs) => stressConfinementTimeS(inputs.sizeUm!, inputs.soundSpeedMPerS!),
  'thermal damage time exceeds relaxation time of the target': (inputs) => {
    const damageC = criticalTemperatureC(pairOf(inputs.frequencyFactorPerS!, inputs.activationEnergyJPerMol!));
    const { heaterDiameterUm, targetDiameterUm, diffusivityMm2PerS, heaterC, startC } = inputs as Record<string, number>;
    const damageTimeS = thermalDamageTimeS({
      geometry: 'cylinder',
      heaterRadiusUm: heaterDiameterUm! / 2,
      targetRadiusUm: targetDiameterUm! / 2,
      diffusivityMm2PerS: diffusivityMm2PerS!,
      heaterC: heaterC!,
      damageC,
      startC: startC!,
    });
    return damageTimeS !== null && damageTimeS > relaxationTimeS('cylinder', targetDiameterUm!, diffusivityMm2PerS) ? 1 : 0;
  },
  'shorter pulse ranks above longer': (inputs) =>
    therapeuticRatio(inputs.shortS!, inputs) > therapeuticRatio(inputs.longS!, inputs) ? 1 : 0,
};
