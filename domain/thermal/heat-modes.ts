import { symmetricTridiagonalEigen } from '../numeric/eigen.js';
import { type HeatGrid, inSeries } from './heat-grid.js';

/** Decaying temperature profiles of a row of cells. The solution of C dT/dt = -K T is a sum of modes that each fall as
 *  exp(-rate t); rates ascend. `modeOfCell[mode * size + cell]` is the orthonormal vector over the root of the cell's capacity,
 *  so that the amplitude of a mode is the sum over cells of capacity x temperature x modeOfCell. */
export interface ChainModes {
  readonly size: number;
  readonly ratesPerS: Float64Array;
  readonly modeOfCell: Float64Array;
  /** The same, [cell * size + mode]. */
  readonly cellOfMode: Float64Array;
}

/** Modes of cells in a row, given their capacities, the conductances between neighbors and the one from the first cell outward.
 *  The far end is insulated. Throws: not-converged. */
export function chainModes(capacity: Float64Array, conductance: Float64Array, exchange: number): ChainModes {
  const size = capacity.length;
  const diagonal = capacity.map((c, i) => ((i === 0 ? exchange : conductance[i - 1]!) + (conductance[i] ?? 0)) / c);
  const offDiagonal = conductance.map((g, i) => -g / Math.sqrt(capacity[i]! * capacity[i + 1]!));
  const { values, vectors } = symmetricTridiagonalEigen(diagonal, offDiagonal);
  const rootCapacity = capacity.map(Math.sqrt);
  const modeOfCell = vectors.map((component, index) => component / rootCapacity[index % size]!);
  const cellOfMode = modeOfCell.map((_, index) => modeOfCell[(index % size) * size + Math.floor(index / size)]!);
  return { size, ratesPerS: values.map((value) => Math.max(value, 0)), modeOfCell, cellOfMode };
}

/** Modes already worked out, to be shared between requests: layered ones by grid and heat transfer coefficient, others by a key. */
export class HeatModes {
  readonly #layered = new WeakMap<HeatGrid, Map<string, ChainModes>>();
  readonly #transfers = new WeakMap<ChainModes, WeakMap<ChainModes, Float64Array>>();
  readonly #keyed = new Map<string, unknown>();

  /** Modes of a grid whose surface gives heat to a medium through this coefficient. */
  layered(grid: HeatGrid, heatTransferWPerM2K: number): ChainModes {
    const known = this.#layered.get(grid) ?? new Map<string, ChainModes>();
    this.#layered.set(grid, known);
    return remember(known, String(heatTransferWPerM2K), () =>
      chainModes(grid.capacityJPerM2K, grid.conductanceWPerM2K, surfaceExchange(grid, heatTransferWPerM2K)),
    );
  }

  /** Matrix [earlier * size + later] that rewrites amplitudes of one set of modes as amplitudes of another on the same grid. */
  transfer(grid: HeatGrid, earlier: ChainModes, later: ChainModes): Float64Array {
    const known = this.#transfers.get(earlier) ?? new WeakMap<ChainModes, Float64Array>();
    this.#transfers.set(earlier, known);
    const matrix = known.get(later) ?? transferMatrix(grid.capacityJPerM2K, earlier, later);
    known.set(later, matrix);
    return matrix;
  }

  keyed<Value>(key: string, make: () => Value): Value {
    return remember(this.#keyed as Map<string, Value>, key, make);
  }
}

/** Coefficient from the cooling medium to the center of the first cell. */
export function surfaceExchange(grid: HeatGrid, heatTransferWPerM2K: number): number {
  return heatTransferWPerM2K === 0 ? 0 : inSeries(heatTransferWPerM2K, grid.halfConductanceWPerM2K[0]!);
}

function remember<Value>(known: Map<string, Value>, key: string, make: () => Value): Value {
  const value = known.get(key) ?? make();
  known.set(key, value);
  return value;
}

function transferMatrix(capacity: Float64Array, earlier: ChainModes, later: ChainModes): Float64Array {
  const { size } = earlier;
  const matrix = new Float64Array(size * size);
  for (let from = 0; from < size; from++) {
    for (let cell = 0; cell < size; cell++) {
      const weighted = earlier.modeOfCell[from * size + cell]! * capacity[cell]!;
      for (let to = 0; to < size; to++) matrix[from * size + to]! += weighted * later.cellOfMode[cell * size + to]!;
    }
  }
  return matrix;
}
