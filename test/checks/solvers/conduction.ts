import { emissionIntervals } from '../../../domain/thermal/emission.js';
import { type HeatGrid, makeHeatGrid } from '../../../domain/thermal/heat-grid.js';
import { prepareInclusionHeat } from '../../../domain/thermal/inclusion-heat.js';
import { type LayeredHeat, prepareLayeredHeat } from '../../../domain/thermal/layered-heat.js';
import type { SkinAtRest, SurfacePhase } from '../../../domain/thermal/surface-cooling.js';
import type { ThermalMaterial } from '../../../domain/thermal/thermal-figures.js';

type Inputs = Readonly<Record<string, number>>;

const atZero: SkinAtRest = { surfaceC: 0, coreC: 0, heatTransferWPerM2K: 0, airC: 0 };
const insulated = { heatTransferWPerM2K: 0, temperatureC: 0 };
const instant = 1e-12;

function material(inputs: Inputs): ThermalMaterial {
  const conductivityWPerMK = inputs.conductivityWPerMK!;
  const heat = conductivityWPerMK / inputs.diffusivityM2PerS!;
  return {
    id: 'medium',
    conductivityWPerMK,
    densityKgPerM3: 1000,
    specificHeatJPerKgK: heat / 1000,
    source: 'inputs',
    status: 'derived',
  };
}

function halfSpace(
  inputs: Inputs,
  cell: number,
  surface: Pick<SurfacePhase, 'heatTransferWPerM2K' | 'temperatureC'>,
  durationS: number,
  topUm?: number,
) {
  const layer = { thicknessUm: 1, material: material(inputs) };
  const layers = topUm === undefined ? [layer] : [{ ...layer, thicknessUm: topUm }, layer];
  const longestS = Math.max(inputs.timeS!, 1e-4);
  const grid = makeHeatGrid(layers, { finestUm: cell * inputs.finestUm!, growth: cell * 0.02, longestS });
  const heat = prepareLayeredHeat({
    grid,
    phases: [{ fromS: 0, toS: Number.POSITIVE_INFINITY, ...surface }],
    emission: emissionIntervals({ durationS }),
    timesS: [Math.max(inputs.timeS!, durationS)],
    placesUm: [inputs.depthUm ?? 0],
    rest: atZero,
  });
  return { grid, heat };
}

// Mean of mu exp(-mu z) in each cell, in 1/cm.
function exponential(grid: HeatGrid, absorptionPerM: number): Float64Array {
  return grid.centersUm.map((_, i) => {
    const [top, bottom] = [grid.facesUm[i]! * 1e-6, grid.facesUm[i + 1]! * 1e-6];
    return (Math.exp(-absorptionPerM * top) * -Math.expm1(-absorptionPerM * (bottom - top))) / (bottom - top) / 100;
  });
}

const rise = (heat: LayeredHeat, sourcePerCm: Float64Array, energyJPerM2: number): number =>
  heat.responseK(sourcePerCm)[0]! * (energyJPerM2 / 1e4);

function centerOf(geometry: 'sphere' | 'cylinder', inputs: Inputs, cell: number, placeUm: number): number {
  const medium = material(inputs);
  return prepareInclusionHeat({
    geometry,
    radiusUm: inputs.radiusUm!,
    inside: medium,
    outside: medium,
    emission: emissionIntervals({ durationS: instant }),
    timesS: [inputs.timeS!],
    placesRadiusUm: [placeUm],
    cellsPerRadius: 100 / cell,
    growth: cell * 0.04,
  }).excessK[0]!;
}

// Each case on a grid whose cells measure `cell` times those of the coarsest one used.
const onGrid: Record<string, (inputs: Inputs, cell: number) => number> = {
  'rise at depth over rise of a fixed surface': (inputs, cell) =>
    halfSpace({ ...inputs, finestUm: 0.5 }, cell, { heatTransferWPerM2K: 1e12, temperatureC: 1 }, instant).heat.baselineC[0]!,
  'rise at depth under constant surface flux': (inputs, cell) =>
    halfSpace({ ...inputs, finestUm: 0.5 }, cell, { heatTransferWPerM2K: 1e-6, temperatureC: inputs.fluxWPerM2! * 1e6 }, instant)
      .heat.baselineC[0]!,
  'rise after an instantaneous plane source': (inputs, cell) => {
    const { grid, heat } = halfSpace({ ...inputs, finestUm: 0.1 }, cell, insulated, instant);
    const perCm = new Float64Array(grid.centersUm.length);
    perCm[0] = 1e4 / grid.facesUm[1]!;
    return rise(heat, perCm, inputs.energyJPerM2! / 2);
  },
  'rise after an instantaneous point source': (inputs, cell) => {
    const radiusUm = 0.05;
    const volumeCm3 = (4 / 3) * Math.PI * (radiusUm * 1e-4) ** 3;
    return (centerOf('sphere', { ...inputs, radiusUm }, cell / 2, inputs.distanceUm!) * inputs.energyJ!) / volumeCm3;
  },
  'surface rise, exponential absorption, short pulse': (inputs, cell) => {
    const { grid, heat } = halfSpace({ ...inputs, finestUm: 0.001 }, cell, insulated, instant);
    return rise(heat, exponential(grid, inputs.absorptionPerM!), inputs.energyJPerM2!);
  },
  'surface rise, exponential absorption, at the end of a pulse': (inputs, cell) => {
    const { grid, heat } = halfSpace({ ...inputs, finestUm: 0.05 }, cell, insulated, inputs.timeS!);
    return rise(heat, exponential(grid, inputs.absorptionPerM!), inputs.irradianceWPerM2! * inputs.timeS!);
  },
  'center of a sphere over its first rise': (inputs, cell) => {
    const heatPerVolume = (material(inputs).specificHeatJPerKgK * 1000) / 1e6;
    return centerOf('sphere', inputs, cell, 0) * heatPerVolume;
  },
  'middle of a slab over its first rise': (inputs, cell) => {
    const { grid, heat } = halfSpace({ ...inputs, finestUm: 0.25 }, cell, insulated, instant, inputs.halfThicknessUm!);
    const heatPerVolume = (material(inputs).specificHeatJPerKgK * 1000) / 1e6;
    return heat.responseK(grid.centersUm.map((z) => (z < inputs.halfThicknessUm! ? 1 : 0)))[0]! * heatPerVolume;
  },
  'adiabatic rise': (inputs, cell) => {
    const medium = { diffusivityM2PerS: 1.3e-7, conductivityWPerMK: 1.3e-7 * inputs.heatCapacityJPerCm3K! * 1e6, timeS: instant };
    const { grid, heat } = halfSpace({ ...medium, finestUm: 2 }, cell, insulated, instant);
    return rise(
      heat,
      grid.centersUm.map(() => inputs.absorptionPerCm!),
      inputs.fluenceJPerCm2! * 1e4,
    );
  },
};

/** Every case is solved by the finite volumes of the program, not by the closed form that gave the expected value: on two fine grids,
 *  whose error of second order in the cell is then extrapolated to none (Richardson 1911). */
export const solvers: Record<string, (inputs: Inputs) => number> = Object.fromEntries(
  Object.entries(onGrid).map(([quantity, solve]) => [
    quantity,
    (inputs: Inputs) => (4 * solve(inputs, 0.5) - solve(inputs, 1)) / 3,
  ]),
);
