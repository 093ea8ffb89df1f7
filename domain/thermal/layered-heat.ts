import { DomainError } from '../quantities/errors.js';
import type { EmissionInterval } from './emission.js';
import { Excitation } from './excitation.js';
import type { HeatGrid } from './heat-grid.js';
import { type ChainModes, HeatModes, surfaceExchange } from './heat-modes.js';
import { placeWeights } from './place.js';
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

interface PhaseModes extends SurfacePhase {
  readonly modes: ChainModes;
  /** Observation of each place in modes, [place * size + mode], and the share of the medium's temperature in it. */
  readonly observation: Float64Array;
  readonly mediumShares: readonly number[];
}

/** Conduction in layered skin under changing cooling, exact in time: in each cooling phase the finite-volume equations are solved by
 *  their modes, and the state is carried over each switch. The response is the adjoint: for each place and time the sensitivity to
 *  heat in every cell is worked out once, after which any source costs one matrix-vector product.
 *  Throws: contradiction (phases with gaps, times not ascending), not-converged. @source CarslawJaeger1959 ch. 14 (modes) */
export function prepareLayeredHeat(request: LayeredHeatRequest): LayeredHeat {
  const { grid, emission, placesUm, rest = skinAtRest, modes = new HeatModes() } = request;
  const timesS = Float64Array.from(request.timesS);
  assertOrder(request.phases, timesS);
  const phases = request.phases.map((phase) => phaseModes(grid, phase, placesUm, modes));
  const { baselineC, coldestSurfaceC } = baseline(grid, phases, timesS, placesUm, rest, modes);
  const rows = sensitivities(grid, phases, emission, timesS, placesUm, modes);
  const responseK = (sourcePerCm: ArrayLike<number>, into = new Float64Array(baselineC.length)): Float64Array => {
    const { matrix, firstCell, endCell } = rows;
    const size = grid.centersUm.length;
    for (let row = 0; row < into.length; row++) {
      let sum = 0;
      for (let cell = firstCell[row]!, at = row * size + cell; cell < endCell[row]!; cell++, at++)
        sum += matrix[at]! * sourcePerCm[cell]!;
      into[row] = sum;
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

function phaseModes(grid: HeatGrid, phase: SurfacePhase, placesUm: readonly number[], known: HeatModes): PhaseModes {
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

// Deviation from the profile at rest: amplitudes under the constant forcing of each phase.
function baseline(
  grid: HeatGrid,
  phases: readonly PhaseModes[],
  timesS: Float64Array,
  placesUm: readonly number[],
  rest: SkinAtRest,
  known: HeatModes,
): { baselineC: Float64Array; coldestSurfaceC: number } {
  const restC = restProfile(grid, rest);
  const lossWPerM2 = rest.heatTransferWPerM2K * (rest.surfaceC - rest.airC);
  const half = grid.halfConductanceWPerM2K;
  const restAtPlacesC = placesUm.map((placeUm) => {
    const { cell, weight, nextWeight } = placeWeights(placeUm, grid.facesUm, grid.centersUm, (i) => half[i]!);
    return weight * restC[cell]! + nextWeight * restC[cell + 1]!;
  });
  const baselineC = new Float64Array(placesUm.length * timesS.length);
  let coldestSurfaceC = rest.surfaceC;
  let start: Float64Array = new Float64Array(grid.centersUm.length);
  let time = 0;
  phases.forEach((phase, index) => {
    const { size, ratesPerS, modeOfCell } = phase.modes;
    const previous = phases[index - 1];
    if (previous && previous.modes !== phase.modes) start = product(known.transfer(grid, previous.modes, phase.modes), start);
    const forcing = surfaceExchange(grid, phase.heatTransferWPerM2K) * (phase.temperatureC - restC[0]!) + lossWPerM2;
    const stateAt = (elapsedS: number): Float64Array =>
      start.map((amplitude, mode) => {
        const lost = -Math.expm1(-ratesPerS[mode]! * elapsedS);
        const gained = ratesPerS[mode]! > 0 ? lost / ratesPerS[mode]! : elapsedS;
        return amplitude * (1 - lost) + forcing * modeOfCell[mode * size]! * gained;
      });
    const surfaceC = (state: Float64Array): number => {
      let cellC = restC[0]!;
      for (let mode = 0; mode < size; mode++) cellC += modeOfCell[mode * size]! * state[mode]!;
      const { heatTransferWPerM2K: h, temperatureC } = phase;
      return (h * temperatureC + half[0]! * cellC) / (h + half[0]!);
    };
    for (; time < timesS.length && timesS[time]! < phase.toS; time++) {
      const state = stateAt(timesS[time]! - phase.fromS);
      placesUm.forEach((_, place) => {
        const share = phase.mediumShares[place]!;
        let sum = share * phase.temperatureC + (1 - share) * restAtPlacesC[place]!;
        for (let mode = 0; mode < size; mode++) sum += phase.observation[place * size + mode]! * state[mode]!;
        baselineC[place * timesS.length + time] = sum;
      });
    }
    if (phase.toS < Number.POSITIVE_INFINITY) start = stateAt(phase.toS - phase.fromS);
    coldestSurfaceC = Math.min(coldestSurfaceC, surfaceC(start));
  });
  return { baselineC, coldestSurfaceC };
}

// Falls off upward so that the heat lost to the air is conducted from the core, whose temperature is not exceeded.
function restProfile(grid: HeatGrid, rest: SkinAtRest): Float64Array {
  const lossWPerM2 = rest.heatTransferWPerM2K * (rest.surfaceC - rest.airC);
  let resistance = 0;
  return grid.halfConductanceWPerM2K.map((half) => {
    resistance += 1 / half;
    const temperatureC = Math.min(rest.coreC, rest.surfaceC + lossWPerM2 * resistance);
    resistance += 1 / half;
    return temperatureC;
  });
}

interface Sensitivities {
  /** [(place * times + time) * cells + cell], K per J/cm2 and per 1/cm. */
  readonly matrix: Float64Array;
  readonly firstCell: Int32Array;
  readonly endCell: Int32Array;
}

function sensitivities(
  grid: HeatGrid,
  phases: readonly PhaseModes[],
  emission: readonly EmissionInterval[],
  timesS: Float64Array,
  placesUm: readonly number[],
  known: HeatModes,
): Sensitivities {
  const size = grid.centersUm.length;
  const count = timesS.length;
  const rows = placesUm.length * count;
  const result = { matrix: new Float64Array(rows * size), firstCell: new Int32Array(rows), endCell: new Int32Array(rows) };
  const beginS = emission[0]!.startS;
  const fromS = phases.map((phase) => Math.max(phase.fromS, beginS));
  const endAmplitudes = phases.map((phase, index) => {
    if (phase.toS <= beginS || phase.toS === Number.POSITIVE_INFINITY) return null;
    const excitation = new Excitation(phase.modes.ratesPerS, emission, fromS[index]!);
    excitation.advanceTo(phase.toS);
    return excitation.amplitudes.some((amplitude) => amplitude > 0) ? excitation.amplitudes : null;
  });
  let time = 0;
  phases.forEach((phase, index) => {
    const excitation = new Excitation(phase.modes.ratesPerS, emission, fromS[index]!);
    for (; time < count && timesS[time]! < phase.toS; time++) {
      const timeS = timesS[time]!;
      if (timeS <= beginS) continue;
      excitation.advanceTo(timeS);
      for (let place = 0; place < placesUm.length; place++) {
        const row = place * count + time;
        const reachUm = 1e4 * Math.sqrt(grid.diffusivityMaxMm2PerS * (timeS - beginS));
        const [first, end] = cellsWithin(grid, placesUm[place]! - reachUm, placesUm[place]! + reachUm);
        result.firstCell[row] = first;
        result.endCell[row] = end;
        const into = result.matrix.subarray(row * size + first, row * size + end);
        let adjoint: Float64Array = phase.observation.subarray(place * size, (place + 1) * size);
        addModes(into, adjoint, excitation.amplitudes, phase.modes, first);
        let sinceS = timeS - fromS[index]!;
        for (let earlier = index - 1; earlier >= 0 && phases[earlier]!.toS > beginS; earlier--) {
          adjoint = carriedBack(adjoint, phases[earlier + 1]!.modes, phases[earlier]!.modes, sinceS, grid, known);
          const amplitudes = endAmplitudes[earlier];
          if (amplitudes) addModes(into, adjoint, amplitudes, phases[earlier]!.modes, first);
          sinceS = phases[earlier]!.toS - fromS[earlier]!;
        }
        for (let i = 0; i < into.length; i++) into[i]! *= grid.facesUm[first + i + 1]! - grid.facesUm[first + i]!;
      }
    }
  });
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

function carriedBack(
  adjoint: Float64Array,
  later: ChainModes,
  earlier: ChainModes,
  durationS: number,
  grid: HeatGrid,
  known: HeatModes,
): Float64Array {
  const decayed = adjoint.map((value, mode) => value * Math.exp(-later.ratesPerS[mode]! * durationS));
  if (later === earlier) return decayed;
  const { size } = later;
  const matrix = known.transfer(grid, earlier, later);
  const result = new Float64Array(size);
  for (let to = 0; to < size; to++) {
    const value = decayed[to]!;
    if (Math.abs(value) < 1e-300) continue;
    for (let from = 0; from < size; from++) result[from]! += value * matrix[to * size + from]!;
  }
  return result;
}

// Adds sum over modes of observation x amplitude x mode; modes ascend in rate, so those that have died out are cut off at the end.
function addModes(
  into: Float64Array,
  observation: Float64Array,
  amplitudes: Float64Array,
  modes: ChainModes,
  first: number,
): void {
  const { size, modeOfCell } = modes;
  let live = size;
  while (live > 1 && amplitudes[live - 1]! < 1e-16 * amplitudes[0]!) live--;
  for (let mode = 0; mode < live; mode++) {
    const factor = observation[mode]! * amplitudes[mode]!;
    for (let i = 0, at = mode * size + first; i < into.length; i++, at++) into[i]! += factor * modeOfCell[at]!;
  }
}

function product(matrix: Float64Array, vector: Float64Array): Float64Array {
  const size = vector.length;
  return vector.map((_, row) => {
    let sum = 0;
    for (let i = 0; i < size; i++) sum += matrix[row * size + i]! * vector[i]!;
    return sum;
  });
}
