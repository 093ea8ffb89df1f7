import type { HeatGrid } from './heat-grid.js';
import type { ChainModes, HeatModes } from './heat-modes.js';
import { placeWeights } from './place.js';
import type { SurfacePhase } from './surface-cooling.js';

/** A cooling phase with the modes of the skin under it. */
export interface PhaseModes extends SurfacePhase {
  readonly modes: ChainModes;
  /** Temperature of each place in modes, [place * size + mode]. */
  readonly observation: Float64Array;
  /** Share of the cooling medium's temperature in that of each place; not 0 only above the center of the first cell. */
  readonly mediumShares: readonly number[];
}

/** Modes of a grid under the coefficient of a phase, and how places see them. */
export function phaseModes(grid: HeatGrid, phase: SurfacePhase, placesUm: readonly number[], known: HeatModes): PhaseModes {
  const modes = known.layered(grid, phase.heatTransferWPerM2K);
  const { size, modeOfCell } = modes;
  const half = grid.halfConductanceWPerM2K;
  const surfaceShare = phase.heatTransferWPerM2K / (phase.heatTransferWPerM2K + half[0]!);
  const observation = new Float64Array(placesUm.length * size);
  const mediumShares = placesUm.map((placeUm, place) => {
    const { cell, weight, nextWeight } = placeWeights(placeUm, grid.facesUm, grid.centersUm, (i) => half[i]!);
    const mediumShare = surfaceShare * Math.max(0, 1 - placeUm / grid.centersUm[0]!);
    for (let mode = 0; mode < size; mode++) {
      const ofMode = weight * modeOfCell[mode * size + cell]! + nextWeight * modeOfCell[mode * size + cell + 1]!;
      observation[place * size + mode] = (1 - mediumShare) * ofMode;
    }
    return mediumShare;
  });
  return { ...phase, modes, observation, mediumShares };
}
