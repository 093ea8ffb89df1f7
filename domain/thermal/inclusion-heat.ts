import { assertWithin } from '../quantities/errors.js';
import type { EmissionInterval } from './emission.js';
import { Excitation } from './excitation.js';
import { diffusivityMm2PerS, gradedFaces, inSeries } from './heat-grid.js';
import { type ChainModes, chainModes, HeatModes } from './heat-modes.js';
import { placeWeights } from './place.js';
import type { ThermalMaterial } from './thermal-figures.js';

export interface InclusionShape {
  readonly geometry: 'cylinder' | 'sphere';
  readonly radiusUm: number;
  readonly inside: ThermalMaterial;
  readonly outside: ThermalMaterial;
  /** Heat is deposited evenly within this radius; the inclusion's own unless given. */
  readonly heatedRadiusUm?: number;
  /** Cells per radius at the edge, default 40, and growth of cells per distance from it, default 0.08. */
  readonly cellsPerRadius?: number;
  readonly growth?: number;
}

export interface InclusionHeatRequest extends InclusionShape {
  readonly emission: readonly EmissionInterval[];
  /** Ascending, from 0. */
  readonly timesS: ArrayLike<number>;
  readonly placesRadiusUm: readonly number[];
  /** Number of rings of equal width, center first, for which to give the answer apart; default 0. */
  readonly rings?: number;
  /** Shared by requests, so that modes are worked out once. */
  readonly modes?: HeatModes;
}

/** `excessK` is the rise per J/cm3 deposited evenly in the heated part, laid out [place * times + time]. */
export interface InclusionHeat {
  readonly timesS: Float64Array;
  readonly placesRadiusUm: readonly number[];
  readonly excessK: Float64Array;
  /** Rise per J/cm3 deposited in one ring of the heated part, [ring][place * times + time]. */
  readonly ringsK: readonly Float64Array[];
}

/** Finite volumes around a cylinder (per meter of length) or sphere and their modes. */
export interface RadialModes extends ChainModes {
  readonly facesUm: Float64Array;
  readonly centersUm: Float64Array;
  readonly capacity: Float64Array;
  readonly halfConductance: (cell: number, face: number) => number;
  /** Amplitude that each mode gets from 1 J/cm3 in the heated part. */
  readonly amplitudesPerJPerCm3: Float64Array;
  /** The same for heat between two radii; a cell that lies there in part counts in part. */
  readonly amplitudesWithin: (fromUm: number, toUm: number) => Float64Array;
}

/** Temperature rise in and around a heated cylinder or sphere in endless surroundings, exact in time (sum of modes).
 *  Throws: out-of-range (radius), not-converged. @source CarslawJaeger1959 ch. 10 for the limits it is checked against */
export function prepareInclusionHeat(request: InclusionHeatRequest): InclusionHeat {
  const timesS = Float64Array.from(request.timesS);
  const count = timesS.length;
  const radial = radialModes(request, Math.max(timesS[count - 1] ?? 0, 1e-12), request.modes);
  const { size } = radial;
  const weights = request.placesRadiusUm.map((radiusUm) => modalWeights(radial, radiusUm));
  const { heatedRadiusUm = request.radiusUm, rings = 0 } = request;
  const perRing = Array.from({ length: rings }, (_, ring) => {
    return radial.amplitudesWithin((heatedRadiusUm * ring) / rings, (heatedRadiusUm * (ring + 1)) / rings);
  });
  const heats = [radial.amplitudesPerJPerCm3, ...perRing];
  const answers = heats.map(() => new Float64Array(weights.length * count));
  const excitation = new Excitation(radial.ratesPerS, request.emission, 0);
  for (let time = 0; time < count; time++) {
    excitation.advanceTo(timesS[time]!);
    for (let place = 0; place < weights.length; place++) {
      const seen = weights[place]!.map((weight, mode) => weight * excitation.amplitudes[mode]!);
      heats.forEach((heat, i) => {
        let sum = 0;
        for (let mode = 0; mode < size; mode++) sum += seen[mode]! * heat[mode]!;
        answers[i]![place * count + time] = sum;
      });
    }
  }
  const [excessK, ...ringsK] = answers as [Float64Array, ...Float64Array[]];
  return { timesS, placesRadiusUm: request.placesRadiusUm, excessK, ringsK };
}

/** Modes around an inclusion, from the shared store when they are there. The grid reaches six diffusion lengths of the longest time
 *  (rounded up to a power of ten, so that requests share it). Throws: out-of-range. */
export function radialModes(shape: InclusionShape, longestS: number, modes: HeatModes = new HeatModes()): RadialModes {
  const { geometry, radiusUm, inside, outside, heatedRadiusUm = radiusUm, cellsPerRadius = 40, growth = 0.08 } = shape;
  assertWithin('radiusUm', radiusUm, 1e-4, 1e5);
  assertWithin('heatedRadiusUm', heatedRadiusUm, 1e-4, 1e5);
  const decade = Math.ceil(Math.log10(longestS) - 1e-9);
  const figures = [inside, outside].map((m) => `${m.conductivityWPerMK} ${m.densityKgPerM3 * m.specificHeatJPerKgK}`);
  const key = ['radial', geometry, radiusUm, heatedRadiusUm, cellsPerRadius, growth, decade, ...figures].join(' ');
  return modes.keyed(key, () => makeRadialModes({ ...shape, heatedRadiusUm, cellsPerRadius, growth }, 10 ** decade));
}

/** Weight of each mode in the temperature at a radius. At the center the parabola through the innermost two cells is used. */
export function modalWeights(radial: RadialModes, radiusUm: number): Float64Array {
  const { size, modeOfCell, centersUm } = radial;
  let { cell, weight, nextWeight } = placeWeights(radiusUm, radial.facesUm, centersUm, radial.halfConductance);
  if (radiusUm < centersUm[0]!) {
    const [first, second] = [centersUm[0]! ** 2, centersUm[1]! ** 2];
    nextWeight = (radiusUm ** 2 - first) / (second - first);
    weight = 1 - nextWeight;
    cell = 0;
  }
  return Float64Array.from({ length: size }, (_, mode) => {
    return weight * modeOfCell[mode * size + cell]! + nextWeight * modeOfCell[mode * size + cell + 1]!;
  });
}

function makeRadialModes(shape: Required<InclusionShape>, longestS: number): RadialModes {
  const { geometry, radiusUm, heatedRadiusUm, inside, outside, cellsPerRadius, growth } = shape;
  const spread = Math.max(diffusivityMm2PerS(inside), diffusivityMm2PerS(outside));
  const largestUm = Math.max(radiusUm, heatedRadiusUm);
  const edges = [...new Set([radiusUm, heatedRadiusUm])].sort((a, b) => a - b);
  const farUm = largestUm * 1.5 + 6000 * Math.sqrt(spread * longestS);
  const finestUm = edges[0]! / cellsPerRadius;
  const faces = [0];
  [...edges, farUm].forEach((bottom, i) => {
    faces.push(...gradedFaces(i === 0 ? 0 : edges[i - 1]!, bottom, edges, finestUm, growth));
  });
  const facesUm = Float64Array.from(faces);
  const size = facesUm.length - 1;
  const centersUm = Float64Array.from({ length: size }, (_, i) => 0.5 * (facesUm[i]! + facesUm[i + 1]!));
  const material = (cell: number): ThermalMaterial => (centersUm[cell]! < radiusUm ? inside : outside);
  const [areaPerPower, power] = geometry === 'cylinder' ? [2 * Math.PI, 1] : [4 * Math.PI, 2];
  const halfConductance = (cell: number, face: number): number => {
    const areaM = areaPerPower * (facesUm[face]! * 1e-6) ** power;
    return (areaM * material(cell).conductivityWPerMK) / (Math.abs(facesUm[face]! - centersUm[cell]!) * 1e-6);
  };
  const volumeM = Float64Array.from({ length: size }, (_, i) => {
    return (areaPerPower / (power + 1)) * ((facesUm[i + 1]! * 1e-6) ** (power + 1) - (facesUm[i]! * 1e-6) ** (power + 1));
  });
  const capacity = volumeM.map((volume, i) => volume * material(i).densityKgPerM3 * material(i).specificHeatJPerKgK);
  const conductance = Float64Array.from({ length: size - 1 }, (_, i) =>
    inSeries(halfConductance(i, i + 1), halfConductance(i + 1, i + 1)),
  );
  const chain = chainModes(capacity, conductance, 0);
  const amplitudesWithin = (fromUm: number, toUm: number): Float64Array => {
    const amplitudes = new Float64Array(size);
    for (let cell = 0; cell < size && facesUm[cell]! < toUm; cell++) {
      const [innerM, outerM] = [Math.max(facesUm[cell]!, fromUm) * 1e-6, Math.min(facesUm[cell + 1]!, toUm) * 1e-6];
      if (outerM <= innerM) continue;
      const heatJ = (areaPerPower / (power + 1)) * (outerM ** (power + 1) - innerM ** (power + 1)) * 1e6;
      for (let mode = 0; mode < size; mode++) amplitudes[mode]! += chain.modeOfCell[mode * size + cell]! * heatJ;
    }
    return amplitudes;
  };
  const amplitudesPerJPerCm3 = amplitudesWithin(0, heatedRadiusUm);
  return { ...chain, facesUm, centersUm, capacity, halfConductance, amplitudesPerJPerCm3, amplitudesWithin };
}
