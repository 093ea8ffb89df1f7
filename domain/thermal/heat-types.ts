import type { EmissionInterval } from './emission.js';
import type { HeatGrid } from './heat-grid.js';
import type { HeatModes } from './heat-modes.js';
import type { ThermalMaterial } from './thermal-figures.js';

/** How the surface loses heat during [fromS, toS): to a medium at `temperatureC` through a heat transfer coefficient.
 *  Phases follow each other without gap; time 0 is the start of the emission, the last phase ends at Infinity. */
export interface SurfacePhase {
  readonly fromS: number;
  readonly toS: number;
  readonly heatTransferWPerM2K: number;
  readonly temperatureC: number;
}

/** Skin at rest, before any cooling: surface and core temperature and the air it is in balance with. */
export interface SkinAtRest {
  readonly surfaceC: number;
  readonly coreC: number;
  readonly heatTransferWPerM2K: number;
  readonly airC: number;
}

export interface LayeredHeatRequest {
  readonly grid: HeatGrid;
  readonly phases: readonly SurfacePhase[];
  readonly emission: readonly EmissionInterval[];
  /** Ascending, from 0. */
  readonly timesS: ArrayLike<number>;
  readonly placesUm: readonly number[];
  readonly rest?: SkinAtRest;
  /** Shared by requests on the same grid. */
  readonly modes?: HeatModes;
}

/** Temperatures are laid out [place * times + time]. */
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

export interface InclusionHeatRequest {
  readonly geometry: 'cylinder' | 'sphere';
  readonly radiusUm: number;
  readonly inside: ThermalMaterial;
  readonly outside: ThermalMaterial;
  readonly emission: readonly EmissionInterval[];
  readonly timesS: ArrayLike<number>;
  readonly placesRadiusUm: readonly number[];
  /** Heat is deposited evenly within this radius; the inclusion's own unless given. */
  readonly heatedRadiusUm?: number;
}

/** `excessK` is the rise per J/cm3 deposited in the heated part, [place * times + time]. */
export interface InclusionHeat {
  readonly timesS: Float64Array;
  readonly placesRadiusUm: readonly number[];
  readonly excessK: Float64Array;
}
