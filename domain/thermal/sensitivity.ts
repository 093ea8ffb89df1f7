import type { EmissionInterval } from './emission.js';
import { Excitation } from './excitation.js';
import { fourDots } from './four-dots.js';
import type { HeatGrid } from './heat-grid.js';
import type { ChainModes, HeatModes } from './heat-modes.js';
import type { PhaseModes } from './phase-modes.js';

/** Times that are worked out together. */
export const blockTimes = 4;

/** What heat in each cell does to one place at up to four successive times, K per J/cm2 incident and per 1/cm of source:
 *  perCell[(cell - firstCell) * 4 + i] belongs to entry row + i of the answer. Cells outside add nothing. */
export interface SensitivityBlock {
  readonly row: number;
  readonly times: number;
  readonly firstCell: number;
  readonly endCell: number;
  readonly perCell: Float64Array;
}

/** Sensitivities of all places and times, by the adjoint: what a place sees is carried back in time, mode by mode and across the
 *  switches of cooling, to where the light was emitted. Rows before the emission are left out (they are 0). */
export function sensitivityBlocks(
  grid: HeatGrid,
  phases: readonly PhaseModes[],
  emission: readonly EmissionInterval[],
  timesS: Float64Array,
  placesUm: readonly number[],
  known: HeatModes,
): SensitivityBlock[] {
  const beginS = emission[0]!.startS;
  const lit = phases.filter((phase) => phase.toS > beginS).map((phase) => ({ ...phase, fromS: Math.max(phase.fromS, beginS) }));
  const atEnd = lit.map((phase) => amplitudesAtEnd(phase, emission));
  const blocks: SensitivityBlock[] = [];
  let time = timesS.findIndex((timeS) => timeS > beginS);
  if (time < 0) return blocks;
  lit.forEach((phase, index) => {
    const excitation = new Excitation(phase.modes.ratesPerS, emission, phase.fromS);
    while (time < timesS.length && timesS[time]! < phase.toS) {
      let times = 0;
      while (times < blockTimes && time + times < timesS.length && timesS[time + times]! < phase.toS) times++;
      const sampleS = timesS.subarray(time, time + times);
      const amplitudes = interleaved(sampleS, phase.modes.size, (timeS) => {
        excitation.advanceTo(timeS);
        return excitation.amplitudes;
      });
      const remaining =
        index > 0 ? interleaved(sampleS, phase.modes.size, (timeS) => decays(phase, timeS - phase.fromS)) : amplitudes;
      const reachUm = 1e4 * Math.sqrt(grid.diffusivityMaxMm2PerS * (sampleS[times - 1]! - beginS));
      placesUm.forEach((placeUm, place) => {
        const [firstCell, endCell] = cellsWithin(grid, placeUm - reachUm, placeUm + reachUm);
        const perCell = new Float64Array(blockTimes * (endCell - firstCell));
        const seen = phase.observation.subarray(place * phase.modes.size, (place + 1) * phase.modes.size);
        addModes(perCell, timesModes(amplitudes, seen), phase.modes, firstCell, endCell);
        let adjoint = timesModes(remaining, seen);
        for (let earlier = index - 1; earlier >= 0; earlier--) {
          const before = lit[earlier]!;
          adjoint = carriedBack(adjoint, lit[earlier + 1]!.modes, before.modes, grid, known);
          const left = atEnd[earlier];
          if (left) addModes(perCell, timesModes(adjoint, left), before.modes, firstCell, endCell);
          if (earlier > 0) adjoint = timesModes(adjoint, decays(before, before.toS - before.fromS));
        }
        for (let i = 0; i < perCell.length; i++) {
          const cell = firstCell + (i >> 2);
          perCell[i]! *= grid.facesUm[cell + 1]! - grid.facesUm[cell]!;
        }
        blocks.push({ row: place * timesS.length + time, times, firstCell, endCell, perCell });
      });
      time += times;
    }
  });
  return blocks;
}

// Amplitudes at the end of a phase from light emitted within it; null when there was none.
function amplitudesAtEnd(phase: PhaseModes, emission: readonly EmissionInterval[]): Float64Array | null {
  if (phase.toS === Number.POSITIVE_INFINITY) return null;
  const excitation = new Excitation(phase.modes.ratesPerS, emission, phase.fromS);
  excitation.advanceTo(phase.toS);
  return excitation.amplitudes.some((amplitude) => amplitude > 0) ? excitation.amplitudes : null;
}

function interleaved(timesS: Float64Array, size: number, valuesAt: (timeS: number) => Float64Array): Float64Array {
  const result = new Float64Array(blockTimes * size);
  timesS.forEach((timeS, i) => {
    const values = valuesAt(timeS);
    for (let mode = 0; mode < size; mode++) result[blockTimes * mode + i] = values[mode]!;
  });
  return result;
}

function decays({ modes }: PhaseModes, durationS: number): Float64Array {
  const result = new Float64Array(modes.size);
  // Rates ascend: once a mode is gone, so are all that follow.
  for (let mode = 0, left = 1; mode < modes.size && left > 0; mode++) {
    left = Math.exp(-modes.ratesPerS[mode]! * durationS);
    result[mode] = left;
  }
  return result;
}

function timesModes(four: Float64Array, perMode: Float64Array): Float64Array {
  const result = new Float64Array(four.length);
  for (let i = 0; i < four.length; i++) result[i] = four[i]! * perMode[i >> 2]!;
  return result;
}

// Ten times the root of diffusivity x time: what lies beyond weighs less than exp(-25).
function cellsWithin(grid: HeatGrid, fromUm: number, toUm: number): [first: number, end: number] {
  const { facesUm } = grid;
  const size = facesUm.length - 1;
  let first = 0;
  while (first < size - 1 && facesUm[first + 1]! < fromUm) first++;
  let end = size;
  while (end > first + 1 && facesUm[end - 1]! > toUm) end--;
  return [Math.max(0, first - 2), Math.min(size, end + 2)];
}

// Amplitudes seen through the switch into the earlier phase: the transposed transfer, row by row.
function carriedBack(
  adjoint: Float64Array,
  later: ChainModes,
  earlier: ChainModes,
  grid: HeatGrid,
  known: HeatModes,
): Float64Array {
  if (later === earlier) return adjoint;
  const { size } = later;
  const matrix = known.transfer(grid, earlier, later);
  const live = liveModes(adjoint, size);
  const result = new Float64Array(adjoint.length);
  const sums = new Float64Array(blockTimes);
  for (let mode = 0; mode < size; mode++) {
    fourDots(adjoint, matrix.subarray(mode * size, mode * size + live), 0, live, sums);
    for (let i = 0; i < blockTimes; i++) result[blockTimes * mode + i] = sums[i]!;
  }
  return result;
}

// Adds the sum over modes of weight x mode to each cell.
function addModes(perCell: Float64Array, weights: Float64Array, modes: ChainModes, firstCell: number, endCell: number): void {
  const { size, cellOfMode } = modes;
  const live = liveModes(weights, size);
  const sums = new Float64Array(blockTimes);
  for (let cell = firstCell, at = 0; cell < endCell; cell++, at += blockTimes) {
    fourDots(weights, cellOfMode.subarray(cell * size, cell * size + live), 0, live, sums);
    for (let i = 0; i < blockTimes; i++) perCell[at + i]! += sums[i]!;
  }
}

// Modes ascend in rate, so those that have died out stand at the end.
function liveModes(four: Float64Array, size: number): number {
  let greatest = 0;
  for (let i = 0; i < four.length; i++) greatest = Math.max(greatest, Math.abs(four[i]!));
  let last = four.length - 1;
  while (last > 0 && Math.abs(four[last]!) < 1e-16 * greatest) last--;
  return Math.min(size, (last >> 2) + 1);
}
