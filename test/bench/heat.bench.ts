import { fluenceForDamage } from '../../domain/thermal/damage.js';
import { emissionIntervals } from '../../domain/thermal/emission.js';
import { makeHeatGrid } from '../../domain/thermal/heat-grid.js';
import { HeatModes } from '../../domain/thermal/heat-modes.js';
import { prepareInclusionHeat } from '../../domain/thermal/inclusion-heat.js';
import { prepareLayeredHeat } from '../../domain/thermal/layered-heat.js';
import { sampleTimesS } from '../../domain/thermal/sample-times.js';
import type { ThermalMaterial } from '../../domain/thermal/thermal-figures.js';
import { type BenchRow, digits, medianMs } from './report.js';

const material = (conductivityWPerMK: number, densityKgPerM3: number, specificHeatJPerKgK: number): ThermalMaterial => ({
  id: 'bench',
  conductivityWPerMK,
  densityKgPerM3,
  specificHeatJPerKgK,
  source: 'bench',
  status: 'derived',
});
const dermis = material(0.37, 1116, 3224);
const blood = material(0.54, 1060, 3890);
const grid = makeHeatGrid([
  { thicknessUm: 70, material: material(0.21, 1150, 3600) },
  { thicknessUm: 1500, material: dermis },
  { thicknessUm: 6000, material: material(0.2, 971, 2303) },
]);
const pair = {
  id: 'bench',
  endPoint: '',
  frequencyFactorPerS: 3.1e98,
  activationEnergyJPerMol: 6.28e5,
  source: 'bench',
  status: 'derived' as const,
};
const durationsS = Array.from({ length: 24 }, (_, i) => 1e-9 * 10 ** ((8.5 * i) / 23));
const source = grid.centersUm.map((depthUm) => (depthUm < 70 ? 20 : 5 * Math.exp(-depthUm / 500)));

function prepareAll(modes: HeatModes) {
  return durationsS.map((durationS) => {
    const emission = emissionIntervals({ durationS });
    const phases = [
      { fromS: -0.5, toS: durationS + 0.5, heatTransferWPerM2K: 3000, temperatureC: 5 },
      { fromS: durationS + 0.5, toS: Number.POSITIVE_INFINITY, heatTransferWPerM2K: 10, temperatureC: 23 },
    ];
    const timesS = sampleTimesS(emission, 10, 56);
    return prepareLayeredHeat({ grid, phases, emission, timesS, placesUm: [0, 70, 400], modes });
  });
}

function prepareVessels(modes: HeatModes) {
  for (const durationS of durationsS) {
    const emission = emissionIntervals({ durationS });
    const timesS = sampleTimesS(emission, 10, 56);
    prepareInclusionHeat({
      geometry: 'cylinder',
      radiusUm: 50,
      inside: blood,
      outside: dermis,
      emission,
      timesS,
      placesRadiusUm: [0, 50],
      modes,
    });
  }
}

/** Cost of the heat of a ranking: preparing 24 pulses in contact-cooled skin, then each source and each damage threshold. */
export function benchmark(): BenchRow[] {
  const modes = new HeatModes();
  const prepared = prepareAll(modes);
  const repeats = 400;
  const responses = medianMs(5, () => {
    for (let i = 0; i < repeats; i++) for (const heat of prepared) heat.responseK(source);
  });
  const problems = prepared.map(({ timesS, baselineC, responseK }) => {
    const [from, to] = [timesS.length, 2 * timesS.length];
    return { timesS, baselineC: baselineC.subarray(from, to), responseK: responseK(source).subarray(from, to), pair };
  });
  const thresholds = medianMs(5, () => {
    for (let i = 0; i < repeats; i++) for (const problem of problems) fluenceForDamage(problem);
  });
  const each = (ms: number) => `${digits((ms * 1000) / (repeats * prepared.length))} us`;
  return [
    {
      what: 'layered heat of 24 pulse durations, 56 times, 3 places, cold',
      figure: `${digits(medianMs(5, () => prepareAll(new HeatModes())))} ms`,
      note: `${grid.centersUm.length} cells, contact cooling; ${digits(medianMs(5, () => prepareAll(modes)))} ms with modes known`,
    },
    {
      what: 'heat around a vessel for the same pulses, cold',
      figure: `${digits(medianMs(5, () => prepareVessels(new HeatModes())))} ms`,
      note: `${digits(medianMs(5, () => prepareVessels(modes)))} ms with modes known`,
    },
    { what: 'temperature response to one more source', figure: each(responses), note: '168 values' },
    { what: 'fluence for damage at one place', figure: each(thresholds), note: 'Henriques pair, relative accuracy 1e-5' },
  ];
}
