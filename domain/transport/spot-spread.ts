import { type BandedMatrix, bandedPosition, makeBanded, solveBanded } from '../numeric/banded.js';
import { hankelWeights } from '../numeric/hankel.js';
import type { OpticalLayer } from '../tissue/optical-layer.js';
import { type BeamProfile, beamTransform } from './beam-profile.js';
import { type CollimatedBeam, collimatedBeam } from './collimated.js';
import { faceCondition } from './harmonic-faces.js';
import { emptyModes, fillModes, type HarmonicModes, type ScaledLayer, scaleLayer } from './harmonic-modes.js';
import { degree, harmonicCount, modeCount, reflectionSigns, testedPositions } from './harmonics.js';

/** Points on the beam axis at which lateral spread has been worked out once for every spot. */
export interface SpreadPoints {
  readonly layers: Int32Array;
  readonly belowTopsUm: Float64Array;
}

/** Lateral spread of light: how fluence on the axis of a finite beam compares with that of a broad one. */
export interface SpotSpread {
  /** Ratio of finite-spot to broad-beam fluence at each point. Asking for the same points again costs next to nothing. */
  ratios(profile: BeamProfile, points: SpreadPoints): Float64Array;
}

const broadFrequency = 1e-3; // per cm; stands for zero
const narrowReachCm = 0.03; // beams within this radius need the higher frequencies

/** Lateral frequencies per cm, even in their logarithm. The grid for usual spots reaches from 50 cm waves to the mean free
 *  path; with 24 points the spline between them is good to 1e-4 of the incident irradiance. */
const usualFrequencies = frequencyGrid(24, 0.05, 1000);
const narrowFrequencies = frequencyGrid(26, 0.5, 30_000);

function frequencyGrid(count: number, least: number, greatest: number): Float64Array {
  return Float64Array.from({ length: count }, (_, i) => least * (greatest / least) ** (i / (count - 1)));
}

/** Third-degree spherical harmonics (P3) at every lateral frequency of one grid, joined through all layers with Fresnel
 *  reflection and refraction. The beam itself keeps its edges; only what it scatters spreads. Frequencies do not depend on
 *  the spot, so every spot of a stack shares them.
 *  @source Davison1957 (method of spherical harmonics); Liemert2012 (Hankel transform of the lateral plane) */
export function solveSpotSpread(layers: readonly OpticalLayer[]): SpotSpread {
  const scaled = layers.map(scaleLayer);
  const beam = collimatedBeam(
    layers,
    scaled.map((layer) => layer.extinction * layer.thicknessCm),
  );
  const faces = layers.map((layer, j) => {
    const above = layers[j - 1]?.refractiveIndex ?? 1;
    const below = layers[j + 1]?.refractiveIndex ?? 1;
    return { top: faceCondition(layer.refractiveIndex, above, true), bottom: faceCondition(layer.refractiveIndex, below, false) };
  });
  const modes = layers.map(emptyModes);
  const size = 2 * modeCount * layers.length;
  const band = Math.min(size - 1, 3 * modeCount - 1);
  const matrix = makeBanded(size, band, band);
  const solve = (k: number): FrequencySolution => {
    for (const [j, layer] of scaled.entries()) fillModes(modes[j]!, layer, k);
    matrix.values.fill(0);
    return joinLayers(scaled, modes, faces, beam, matrix);
  };
  const broad = solve(broadFrequency);
  const solved = new Map<Float64Array, FrequencySolution[]>();
  const tabulated = new WeakMap<SpreadPoints, Map<Float64Array, Float64Array>>();

  /** Per point: fluence of the broad beam, then fluence at each frequency. */
  const tabulate = (points: SpreadPoints, grid: Float64Array): Float64Array => {
    let tables = tabulated.get(points);
    if (!tables) {
      tables = new Map();
      tabulated.set(points, tables);
    }
    const known = tables.get(grid);
    if (known) return known;
    let solutions = solved.get(grid);
    if (!solutions) {
      solutions = Array.from(grid, solve);
      solved.set(grid, solutions);
    }
    const width = grid.length + 1;
    const table = new Float64Array(width * points.layers.length);
    for (let i = 0; i < points.layers.length; i++) {
      const j = points.layers[i]!;
      const layer = scaled[j]!;
      const depth = points.belowTopsUm[i]! * 1e-4;
      const rest = Math.max(0, layer.thicknessCm - depth);
      const down = beam.down[j]! * Math.exp(-layer.extinction * depth);
      const up = beam.up[j]! * Math.exp(-layer.extinction * rest);
      table[i * width] = down + up + scatteredFluence(broad, j, depth, rest, down + up);
      for (let q = 0; q < grid.length; q++) {
        const blur = Math.exp(-peakLoss(scaled, j, depth, grid[q]!));
        table[i * width + 1 + q] = blur * (down + up) + scatteredFluence(solutions[q]!, j, depth, rest, down + up);
      }
    }
    tables.set(grid, table);
    return table;
  };

  return {
    ratios: (profile, points) => {
      const { powerBelow, reachCm } = beamTransform(profile);
      const grid = reachCm < narrowReachCm ? narrowFrequencies : usualFrequencies;
      const weights = beamWeights(profile, grid, powerBelow, reachCm);
      const table = tabulate(points, grid);
      const width = grid.length + 1;
      const ratios = new Float64Array(points.layers.length);
      for (let i = 0; i < ratios.length; i++) {
        let fluence = 0;
        for (let q = 0; q < grid.length; q++) fluence += weights[q]! * table[i * width + 1 + q]!;
        const whole = table[i * width]!;
        ratios[i] = whole > 0 ? Math.min(1, Math.max(0, fluence / whole)) : 1;
      }
      return ratios;
    },
  };
}

const keptWeights = new Map<string, Float64Array>();

function beamWeights(profile: BeamProfile, grid: Float64Array, powerBelow: (k: number) => number, reachCm: number): Float64Array {
  const key = JSON.stringify(profile);
  let weights = keptWeights.get(key);
  if (!weights) {
    if (keptWeights.size >= 64) keptWeights.clear();
    weights = hankelWeights(grid, powerBelow, reachCm);
    keptWeights.set(key, weights);
  }
  return weights;
}

/** Amplitudes of scattered fluence in every layer at one frequency: per layer, each mode downward and upward, then the beam's own. */
interface FrequencySolution {
  readonly kappas: Float64Array;
  readonly downward: Float64Array;
  readonly upward: Float64Array;
  readonly beamFluences: Float64Array;
}

function scatteredFluence(s: FrequencySolution, layer: number, depth: number, rest: number, beam: number): number {
  let sum = s.beamFluences[layer]! * beam;
  for (let i = layer * modeCount; i < (layer + 1) * modeCount; i++) {
    const kappa = s.kappas[i]!;
    if (kappa * depth < 40) sum += s.downward[i]! * Math.exp(-kappa * depth);
    if (kappa * rest < 40) sum += s.upward[i]! * Math.exp(-kappa * rest);
  }
  return sum;
}

/** Fluence of the beam lost at lateral frequency k because the forward peak, which counts as unscattered, has a width: the integral
 *  of mu_s (g^4 - g^(k u)) over the way above, u the distance from the point, where k u exceeds 4.
 *  The small-angle solution for moments of the phase function beyond those that the harmonics follow.
 *  @source Wells1969 */
function peakLoss(layers: readonly ScaledLayer[], layer: number, depth: number, k: number): number {
  let loss = 0;
  let near = 0;
  for (let j = layer; j >= 0; j--) {
    const { thicknessCm, peakScattering, peak, peakRate } = layers[j]!;
    const far = near + (j === layer ? depth : thicknessCm);
    const start = Math.max(near, (degree + 1) / k);
    if (far > start && peakScattering > 0) {
      const rate = k * peakRate;
      loss += peakScattering * (far - start - (Math.exp(-rate * start) - Math.exp(-rate * far)) / (rate * peak));
    }
    near = far;
  }
  return loss;
}

type Faces = readonly { top: ReturnType<typeof faceCondition>; bottom: ReturnType<typeof faceCondition> }[];

/** Joins the modes of all layers through every face; `matrix` is spent. */
function joinLayers(
  layers: readonly ScaledLayer[],
  modes: readonly HarmonicModes[],
  faces: Faces,
  beam: CollimatedBeam,
  matrix: BandedMatrix,
): FrequencySolution {
  const right = new Float64Array(matrix.size);
  const last = layers.length - 1;
  for (let j = 0; j <= last; j++) {
    const topRow = 2 * modeCount * j;
    const bottomRow = topRow + modeCount;
    addFace(matrix, right, topRow, faces[j]!.top.own, layers[j]!, modes[j]!, beam, j, true);
    if (j > 0) addFace(matrix, right, topRow, faces[j]!.top.beyond, layers[j - 1]!, modes[j - 1]!, beam, j - 1, false);
    addFace(matrix, right, bottomRow, faces[j]!.bottom.own, layers[j]!, modes[j]!, beam, j, false);
    if (j < last) addFace(matrix, right, bottomRow, faces[j]!.bottom.beyond, layers[j + 1]!, modes[j + 1]!, beam, j + 1, true);
  }
  solveBanded(matrix, right);
  const count = modeCount * layers.length;
  const solution: FrequencySolution = {
    kappas: new Float64Array(count),
    downward: new Float64Array(count),
    upward: new Float64Array(count),
    beamFluences: new Float64Array(layers.length),
  };
  for (let j = 0; j <= last; j++) {
    const toFluence = Math.SQRT2 * layers[j]!.index2;
    solution.beamFluences[j] = toFluence * modes[j]!.beamAnswer[0]!;
    for (let i = 0; i < modeCount; i++) {
      const at = j * modeCount + i;
      const factor = toFluence * modes[j]!.vectors[i * harmonicCount]!;
      solution.kappas[at] = modes[j]!.kappas[i]!;
      solution.downward[at] = factor * right[2 * modeCount * j + i]!;
      solution.upward[at] = factor * right[2 * modeCount * j + modeCount + i]!;
    }
  }
  return solution;
}

/** Adds the moments of one layer's light at its top or bottom face to modeCount equations from `row` on. */
function addFace(
  matrix: BandedMatrix,
  right: Float64Array,
  row: number,
  moments: Float64Array,
  layer: ScaledLayer,
  modes: HarmonicModes,
  beam: CollimatedBeam,
  index: number,
  atTop: boolean,
): void {
  const across = Math.exp(-layer.extinction * layer.thicknessCm);
  const down = atTop ? beam.down[index]! : beam.down[index]! * across;
  const up = atTop ? beam.up[index]! * across : beam.up[index]!;
  const { values } = matrix;
  const { vectors, fades, beamAnswer } = modes;
  for (let r = 0; r < modeCount; r++) {
    const base = r * harmonicCount;
    const listed = testedPositions[r]!;
    const first = bandedPosition(matrix, row + r, 2 * modeCount * index);
    for (let i = 0; i < modeCount; i++) {
      let even = 0;
      let odd = 0;
      for (let n = 0; n < listed.length; n++) {
        const h = listed[n]!;
        const term = moments[base + h]! * vectors[i * harmonicCount + h]!;
        if (reflectionSigns[h]! > 0) even += term;
        else odd += term;
      }
      values[first + i]! += atTop ? even + odd : (even + odd) * fades[i]!;
      values[first + modeCount + i]! += atTop ? (even - odd) * fades[i]! : even - odd;
    }
    let source = 0;
    for (let n = 0; n < listed.length; n++) {
      const h = listed[n]!;
      source += moments[base + h]! * beamAnswer[h]! * (down + up * reflectionSigns[h]!);
    }
    right[row + r]! -= source;
  }
}
