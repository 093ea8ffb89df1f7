import { type BandedMatrix, bandedPosition, makeBanded, solveBanded } from '../numeric/banded.js';
import type { OpticalLayer } from '../tissue/optical-layer.js';
import { outsideReflectance } from './clear-layers.js';
import { faceCondition, outerCondition } from './harmonic-faces.js';
import { type HarmonicModes, modeSolver, type ScaledLayer } from './harmonic-modes.js';
import type { Harmonics } from './harmonics.js';

/** Scattered light at one lateral frequency. Shape: per layer, amplitudes of fluence of each mode downward (from the layer's top)
 *  and upward (from its bottom), their attenuations per cm, and the fluence that goes along with the beam. */
export interface LateralSolution {
  readonly modeCount: number;
  readonly kappas: Float64Array;
  readonly downward: Float64Array;
  readonly upward: Float64Array;
  readonly beamFluences: Float64Array;
}

/** The part of a stack that scatters, between clear layers listed outward from it. */
export interface ScatteringPart {
  readonly layers: readonly OpticalLayer[];
  readonly scaled: readonly ScaledLayer[];
  readonly above: readonly OpticalLayer[];
  readonly below: readonly OpticalLayer[];
  /** Irradiances of the beam at the top (downward) and bottom (upward) of each scattering layer. */
  readonly beamDown: Float64Array;
  readonly beamUp: Float64Array;
}

/** Prepares a stack for any number of lateral frequencies: conditions at inner faces do not depend on them.
 *  @source Davison1957 (method of spherical harmonics); Liemert2012 (Hankel transform of the lateral plane) */
export function lateralSolver(harmonics: Harmonics, part: ScatteringPart): (k: number) => LateralSolution {
  const { layers, scaled } = part;
  const last = layers.length - 1;
  const inner = layers.slice(0, last).map((layer, j) => ({
    upper: faceCondition(harmonics, layer.refractiveIndex, layers[j + 1]!.refractiveIndex, false),
    lower: faceCondition(harmonics, layers[j + 1]!.refractiveIndex, layer.refractiveIndex, true),
  }));
  const top = outerFace(harmonics, layers[0]!, part.above, true);
  const bottom = outerFace(harmonics, layers[last]!, part.below, false);
  const solvers = scaled.map((layer) => modeSolver(harmonics, layer));
  const { count, modeCount } = harmonics;
  const size = 2 * modeCount * layers.length;
  const band = Math.min(size - 1, 3 * modeCount - 1);
  const matrix = makeBanded(size, band, band);

  return (k) => {
    const modes = solvers.map((solver) => solver(k));
    const right = new Float64Array(size);
    matrix.values.fill(0);
    const add = (row: number, moments: Float64Array, j: number, atTop: boolean): void =>
      addFace(harmonics, matrix, right, row, moments, scaled[j]!, modes[j]!, part.beamDown[j]!, part.beamUp[j]!, j, atTop);
    add(0, top(k), 0, true);
    for (let j = 0; j < last; j++) {
      const row = modeCount * (2 * j + 1);
      add(row, inner[j]!.upper.own, j, false);
      add(row, inner[j]!.upper.beyond, j + 1, true);
      add(row + modeCount, inner[j]!.lower.own, j + 1, true);
      add(row + modeCount, inner[j]!.lower.beyond, j, false);
    }
    add(size - modeCount, bottom(k), last, false);
    solveBanded(matrix, right);
    const solution: LateralSolution = {
      modeCount,
      kappas: new Float64Array(size / 2),
      downward: new Float64Array(size / 2),
      upward: new Float64Array(size / 2),
      beamFluences: new Float64Array(layers.length),
    };
    for (let j = 0; j <= last; j++) {
      const toFluence = Math.SQRT2 * scaled[j]!.index2;
      solution.beamFluences[j] = toFluence * modes[j]!.beamAnswer[0]!;
      for (let i = 0; i < modeCount; i++) {
        const at = j * modeCount + i;
        const factor = toFluence * modes[j]!.vectors[i * count]!;
        solution.kappas[at] = modes[j]!.kappas[i]!;
        solution.downward[at] = factor * right[2 * modeCount * j + i]!;
        solution.upward[at] = factor * right[2 * modeCount * j + modeCount + i]!;
      }
    }
    return solution;
  };
}

/** Condition at an outermost face by frequency; worked out once where the face borders on air. */
function outerFace(
  harmonics: Harmonics,
  layer: OpticalLayer,
  outward: readonly OpticalLayer[],
  downward: boolean,
): (k: number) => Float64Array {
  const index = layer.refractiveIndex;
  const edges = [1, ...outward.map((clear) => clear.refractiveIndex)].filter((edge, i, all) => all.indexOf(edge) === i);
  const at = (k: number): Float64Array =>
    outerCondition(harmonics, index, edges, (invariant) => outsideReflectance(index, outward, invariant, k), downward);
  if (outward.length > 0) return at;
  const fixed = at(0);
  return () => fixed;
}

/** Scattered fluence at a depth in a layer, `depth` and `rest` in cm from its faces, `beam` the beam's own fluence there. */
export function scatteredFluence(s: LateralSolution, layer: number, depth: number, rest: number, beam: number): number {
  let sum = s.beamFluences[layer]! * beam;
  for (let i = layer * s.modeCount; i < (layer + 1) * s.modeCount; i++) {
    const kappa = s.kappas[i]!;
    if (kappa * depth < 40) sum += s.downward[i]! * Math.exp(-kappa * depth);
    if (kappa * rest < 40) sum += s.upward[i]! * Math.exp(-kappa * rest);
  }
  return sum;
}

/** Adds the moments of one layer's light at its top or bottom face to the equations from `row` on. */
function addFace(
  { count, modeCount, reflectionSigns, testedPositions }: Harmonics,
  matrix: BandedMatrix,
  right: Float64Array,
  row: number,
  moments: Float64Array,
  layer: ScaledLayer,
  modes: HarmonicModes,
  beamDown: number,
  beamUp: number,
  index: number,
  atTop: boolean,
): void {
  const across = Math.exp(-layer.extinction * layer.thicknessCm);
  const down = atTop ? beamDown : beamDown * across;
  const up = atTop ? beamUp * across : beamUp;
  const { values } = matrix;
  const { vectors, fades, beamAnswer } = modes;
  for (let r = 0; r < modeCount; r++) {
    const base = r * count;
    const listed = testedPositions[r]!;
    const first = bandedPosition(matrix, row + r, 2 * modeCount * index);
    for (let i = 0; i < modeCount; i++) {
      let even = 0;
      let odd = 0;
      for (let n = 0; n < listed.length; n++) {
        const h = listed[n]!;
        const term = moments[base + h]! * vectors[i * count + h]!;
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
