import type { HeatGrid } from './heat-grid.js';
import { type HeatModes, surfaceExchange } from './heat-modes.js';
import type { PhaseModes } from './phase-modes.js';
import { placeWeights } from './place.js';
import type { SkinAtRest } from './surface-cooling.js';

/** Temperatures [place * times + time] that cooling alone gives, and the coldest that the surface gets. The deviation from the profile
 *  at rest is followed by its modes under the constant forcing of each phase; heat lost at rest is replaced all along, so that skin
 *  in still air stays as it is. */
export function cooledBaseline(
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
    const stateAt = (elapsedS: number): Float64Array => {
      const state = new Float64Array(size);
      for (let mode = 0; mode < size; mode++) {
        const rate = ratesPerS[mode]!;
        const lost = -Math.expm1(-rate * elapsedS);
        const gained = rate > 0 ? lost / rate : elapsedS;
        state[mode] = start[mode]! * (1 - lost) + forcing * modeOfCell[mode * size]! * gained;
      }
      return state;
    };
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

// Amplitudes in the modes of a later phase: transfer is laid out [earlier * size + later].
function product(transfer: Float64Array, amplitudes: Float64Array): Float64Array {
  const size = amplitudes.length;
  return amplitudes.map((_, later) => {
    let sum = 0;
    for (let earlier = 0; earlier < size; earlier++) sum += transfer[earlier * size + later]! * amplitudes[earlier]!;
    return sum;
  });
}
