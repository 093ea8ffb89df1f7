import { type EigenSystem, symmetricTridiagonalEigen } from '../numeric/eigen.js';
import { type HeatGrid, inSeries } from './heat-grid.js';

/** Decaying temperature profiles of a grid whose surface exchanges heat through one coefficient: the solution of
 *  C dT/dt = -K T is a sum of modes, each falling as exp(-rate t). Rates in 1/s, ascending.
 *  `modeOfCell[mode * cells + cell]` is the orthonormal vector divided by the square root of the cell's capacity. */
export interface SurfaceModes {
  readonly size: number;
  readonly ratesPerS: Float64Array;
  readonly modeOfCell: Float64Array;
  /** From the cooling medium to the center of the first cell. */
  readonly exchangeWPerM2K: number;
}

/** Modes of one grid for every heat transfer coefficient met so far; share one between requests on the same grid. */
export class HeatModes {
  readonly #byCoefficient = new Map<number, SurfaceModes>();
  readonly #transfers = new Map<string, Float64Array>();

  constructor(readonly grid: HeatGrid) {}

  forCoefficient(heatTransferWPerM2K: number): SurfaceModes {
    let modes = this.#byCoefficient.get(heatTransferWPerM2K);
    if (modes === undefined) {
      modes = surfaceModes(this.grid, heatTransferWPerM2K);
      this.#byCoefficient.set(heatTransferWPerM2K, modes);
    }
    return modes;
  }

  /** Matrix [later * size + earlier] that rewrites amplitudes under one coefficient as amplitudes under another. */
  transfer(earlierWPerM2K: number, laterWPerM2K: number): Float64Array {
    const key = `${earlierWPerM2K} ${laterWPerM2K}`;
    let matrix = this.#transfers.get(key);
    if (matrix === undefined) {
      matrix = transferMatrix(this.grid, this.forCoefficient(earlierWPerM2K), this.forCoefficient(laterWPerM2K));
      this.#transfers.set(key, matrix);
    }
    return matrix;
  }
}

function surfaceModes(grid: HeatGrid, heatTransferWPerM2K: number): SurfaceModes {
  const { capacityJPerM2K: capacity, conductanceWPerM2K: conductance } = grid;
  const size = capacity.length;
  const exchangeWPerM2K = heatTransferWPerM2K === 0 ? 0 : inSeries(heatTransferWPerM2K, grid.halfConductanceWPerM2K[0]!);
  const diagonal = Float64Array.from(capacity, (c, i) => {
    const above = i === 0 ? exchangeWPerM2K : conductance[i - 1]!;
    const below = i === size - 1 ? 0 : conductance[i]!;
    return (above + below) / c;
  });
  const offDiagonal = Float64Array.from(conductance, (g, i) => -g / Math.sqrt(capacity[i]! * capacity[i + 1]!));
  return { size, exchangeWPerM2K, ...scaled(symmetricTridiagonalEigen(diagonal, offDiagonal), capacity) };
}

function scaled(system: EigenSystem, capacity: Float64Array): { ratesPerS: Float64Array; modeOfCell: Float64Array } {
  const { size, values, vectors } = system;
  const modeOfCell = new Float64Array(size * size);
  for (let mode = 0; mode < size; mode++) {
    for (let cell = 0; cell < size; cell++) {
      modeOfCell[mode * size + cell] = vectors[mode * size + cell]! / Math.sqrt(capacity[cell]!);
    }
  }
  return { ratesPerS: values.map((value) => Math.max(value, 0)), modeOfCell };
}

function transferMatrix(grid: HeatGrid, earlier: SurfaceModes, later: SurfaceModes): Float64Array {
  const { size } = earlier;
  const matrix = new Float64Array(size * size);
  const weighted = new Float64Array(size);
  for (let to = 0; to < size; to++) {
    for (let cell = 0; cell < size; cell++) weighted[cell] = later.modeOfCell[to * size + cell]! * grid.capacityJPerM2K[cell]!;
    for (let from = 0; from < size; from++) {
      let sum = 0;
      for (let cell = 0; cell < size; cell++) sum += weighted[cell]! * earlier.modeOfCell[from * size + cell]!;
      matrix[to * size + from] = sum;
    }
  }
  return matrix;
}
