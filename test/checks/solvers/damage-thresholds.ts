import { integrate } from '../../../domain/numeric/quadrature.js';
import { Remarks } from '../../../domain/quantities/caution.js';
import { absorptionOf } from '../../../domain/spectra/chromophore.js';
import { fluenceForDamage } from '../../../domain/thermal/damage.js';
import { emissionIntervals } from '../../../domain/thermal/emission.js';
import { granuleThresholdJPerCm2 } from '../../../domain/thermal/granule.js';
import { makeHeatGrid } from '../../../domain/thermal/heat-grid.js';
import { prepareInclusionHeat } from '../../../domain/thermal/inclusion-heat.js';
import { prepareLayeredHeat } from '../../../domain/thermal/layered-heat.js';
import { sampleTimesS } from '../../../domain/thermal/sample-times.js';
import { resolveSkin } from '../../../domain/tissue/skin.js';
import { skinLayers } from '../../../domain/tissue/skin-layers.js';
import { solveLight } from '../../../domain/transport/layered-solver.js';
import { loadReferenceData } from '../../../server/reference/load.js';
import { dataFolder } from '../../support/data-folder.js';

type Inputs = Readonly<Record<string, number>>;

const reference = loadReferenceData(dataFolder);
const material = (id: string) => reference.thermal.materials.get(id)!;
const explosiveC = 112; // Jacques and McAuliffe 1991, from memory

// Fluence on the skin at which a melanosome at the basal layer reaches the temperature of explosive vaporization.
function melanosomeThreshold({ wavelengthNm, durationS, melanosomeFraction, diameterUm, skinC }: Inputs): number {
  const skin = resolveSkin({ melanosomeFraction: melanosomeFraction! }, reference.skin, new Remarks());
  const light = solveLight(skinLayers(skin, wavelengthNm!, reference), { accuracy: 'ranking' });
  const granule = {
    diameterUm: diameterUm!,
    absorptionPerCm: absorptionOf(reference.chromophores, 'melanosome', wavelengthNm!),
    inside: material('melanosome'),
    outside: material('epidermis'),
  };
  const emission = emissionIntervals({ durationS: durationS! });
  return (
    granuleThresholdJPerCm2({ granule, emission }, skinC!, explosiveC) /
    light.fluenceRatios(null, [skin.epidermisThicknessUm])[0]!
  );
}

// Whole blood in a cuvette at 20 C under light absorbed exponentially, its window taken as insulating.
function bloodInVitro({ absorptionPerCm, durationS, heatCapacityJPerCm3K }: Inputs) {
  const blood = { ...material('blood'), densityKgPerM3: 1000, specificHeatJPerKgK: heatCapacityJPerCm3K! * 1000 };
  const grid = makeHeatGrid([{ thicknessUm: 1000, material: blood }], { longestS: 1, finestUm: 0.5, growth: 0.05 });
  const emission = emissionIntervals({ durationS: durationS! });
  const heat = prepareLayeredHeat({
    grid,
    phases: [{ fromS: 0, toS: Number.POSITIVE_INFINITY, heatTransferWPerM2K: 0, temperatureC: 20 }],
    emission,
    timesS: sampleTimesS(emission, 1, 80),
    placesUm: [0],
    rest: { surfaceC: 20, coreC: 20, airC: 20, heatTransferWPerM2K: 0 },
  });
  const mu = absorptionPerCm!;
  const responseK = heat.responseK(
    grid.centersUm.map((_, i) => {
      const [top, bottom] = [grid.facesUm[i]! * 1e-4, grid.facesUm[i + 1]! * 1e-4];
      return (Math.exp(-mu * top) * -Math.expm1(-mu * (bottom - top))) / (bottom - top);
    }),
  );
  return { timesS: heat.timesS, baselineC: heat.baselineC, responseK };
}

// Blood vessel in a clear membrane, lit from one side: what its chords take up is spread evenly over its cross-section.
function vesselThreshold({ absorptionPerCm, durationS }: Inputs, diameterUm: number): number {
  const emission = emissionIntervals({ durationS: durationS! });
  const timesS = sampleTimesS(emission, 1, 80);
  const radiusUm = diameterUm / 2;
  const { excessK } = prepareInclusionHeat({
    geometry: 'cylinder',
    radiusUm,
    inside: material('blood'),
    outside: material('water'),
    emission,
    timesS,
    placesRadiusUm: [radiusUm],
  });
  const tau = absorptionPerCm! * diameterUm * 1e-4;
  const absorbed = integrate((y) => -Math.expm1(-tau * Math.sqrt(1 - y * y)), 0, 1, 64);
  const heatPerCm = (2 * absorbed) / (Math.PI * radiusUm * 1e-4);
  const responseK = excessK.map((rise) => rise * heatPerCm);
  const baselineC = timesS.map(() => 37);
  return fluenceForDamage({ timesS, baselineC, responseK, pair: reference.thermal.damagePairs.get('vessel-wall')! })!;
}

export const solvers: Record<string, (inputs: Inputs) => number> = {
  'vessel diameter that needs the least fluence': (inputs) => {
    const diametersUm = Array.from({ length: 40 }, (_, i) => 5 * (i + 1));
    const thresholds = diametersUm.map((diameterUm) => vesselThreshold(inputs, diameterUm));
    return diametersUm[thresholds.indexOf(Math.min(...thresholds))]!;
  },
  'fluence that coagulates the wall of a vessel': (inputs) => vesselThreshold(inputs, inputs.diameterUm!),
  'fluence that disrupts melanosomes': melanosomeThreshold,
  'rise of whole blood at its surface': (inputs) => inputs.fluenceJPerCm2! * Math.max(...bloodInVitro(inputs).responseK),
  'fluence that coagulates whole blood': (inputs) =>
    fluenceForDamage({ ...bloodInVitro(inputs), pair: reference.thermal.damagePairs.get('whole-blood')! })!,
  'rise of an isolated melanosome at its threshold': ({ absorptionPerCm, fluenceJPerCm2, durationS, diameterUm }) => {
    const granule = {
      diameterUm: diameterUm!,
      absorptionPerCm: absorptionPerCm!,
      inside: material('melanosome'),
      outside: material('water'),
    };
    const perK = granuleThresholdJPerCm2({ granule, emission: emissionIntervals({ durationS: durationS! }) }, 20, 21);
    return fluenceJPerCm2! / perK;
  },
};
