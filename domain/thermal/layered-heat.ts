import { DomainError } from '../quantities/errors.js';
import { cooledBaseline } from './cooled-baseline.js';
import type { EmissionInterval } from './emission.js';
import { fourDots } from './four-dots.js';
import type { HeatGrid } from './heat-grid.js';
import { HeatModes } from './heat-modes.js';
import { phaseModes } from './phase-modes.js';
import { blockTimes, sensitivityBlocks } from './sensitivity.js';
import { type SkinAtRest, type SurfacePhase, skinAtRest } from './surface-cooling.js';

export interface LayeredHeatRequest {
  readonly grid: HeatGrid;
  readonly phases: readonly SurfacePhase[];
  readonly emission: readonly EmissionInterval[];
  /** Ascending, from 0. */
  readonly timesS: ArrayLike<number>;
  readonly placesUm: readonly number[];
  readonly rest?: SkinAtRest;
  /** Shared by requests, so that modes are worked out once. */
  readonly modes?: HeatModes;
}

/** What cooling does and what light would add. Temperatures are laid out [place * times + time]. */
export interface LayeredHeat {
  readonly timesS: Float64Array;
  readonly placesUm: readonly number[];
  /** Without light. */
  readonly baselineC: Float64Array;
  /** Coldest surface temperature at any time, cooling before the pulse included. */
  readonly coldestSurfaceC: number;
  /** Rise per incident J/cm2 for heat of `sourcePerCm[cell]` J/cm3 per J/cm2. Writes into `into` when given. */
  responseK(sourcePerCm: ArrayLike<number>, into?: Float64Array): Float64Array;
}

/** Conduction in layered skin under changing cooling, exact in time: in each cooling phase the finite-volume equations are solved by
 *  their modes, and the state is carried over each switch. The response is the adjoint: for each place and time the sensitivity to
 *  heat in every cell is worked out once, after which any source costs one matrix-vector product. Heat flows in depth only: what a
 *  beam of diameter d loses sideways begins to count after about d^2 / (16 diffusivity), 5 s for 3 mm, and temperatures are then too
 *  high. On the default grid within 0.5 % of closed forms. Water neither boils nor freezes.
 *  Throws: contradiction (phases with gaps, times not ascending), not-converged. @source CarslawJaeger1959 ch. 14 (modes) */
export function prepareLayeredHeat(request: LayeredHeatRequest): LayeredHeat {
  const { grid, emission, placesUm, rest = skinAtRest, modes = new HeatModes() } = request;
  const timesS = Float64Array.from(request.timesS);
  assertOrder(request.phases, timesS);
  const phases = request.phases.map((phase) => phaseModes(grid, phase, placesUm, modes));
  const { baselineC, coldestSurfaceC } = cooledBaseline(grid, phases, timesS, placesUm, rest, modes);
  const blocks = sensitivityBlocks(grid, phases, emission, timesS, placesUm, modes);
  const responseK = (sourcePerCm: ArrayLike<number>, into = new Float64Array(baselineC.length)): Float64Array => {
    const sums = new Float64Array(blockTimes);
    into.fill(0);
    for (const { row, times, firstCell, endCell, perCell } of blocks) {
      fourDots(perCell, sourcePerCm, firstCell, endCell, sums);
      for (let i = 0; i < times; i++) into[row + i] = sums[i]!;
    }
    return into;
  };
  return { timesS, placesUm, baselineC, coldestSurfaceC, responseK };
}

function assertOrder(phases: readonly SurfacePhase[], timesS: Float64Array): void {
  const gapless = phases.every((phase, i) => (i === 0 ? phase.fromS <= 0 : phase.fromS === phases[i - 1]!.toS));
  if (!gapless || phases[phases.length - 1]?.toS !== Number.POSITIVE_INFINITY) {
    throw new DomainError('contradiction', 'cooling phases must follow each other from time 0 or before to the end', {
      fields: ['phases'],
    });
  }
  if (!timesS.every((timeS, i) => timeS >= (i === 0 ? 0 : timesS[i - 1]!))) {
    throw new DomainError('contradiction', 'times must ascend from 0', { fields: ['timesS'] });
  }
}
