import { type BandedMatrix, bandedPosition, makeBanded, solveBanded } from '../numeric/banded.js';
import { hankelWeights } from '../numeric/hankel.js';
import type { OpticalLayer } from '../tissue/optical-layer.js';
import { type BeamProfile, beamTransform } from './beam-profile.js';
import { type CollimatedBeam, collimatedBeam } from './collimated.js';
import { faceCondition } from './harmonic-faces.js';
import { type HarmonicModes, harmonicModes, reflectionSigns, type ScaledLayer, scaleLayer } from './harmonic-modes.js';
import { harmonicCount, modeCount } from './harmonics.js';

/** Lateral spread of light: how fluence on the axis of a finite beam compares with that of a broad one. */
export interface SpotSpread {
  /** Ratio of finite-spot to broad-beam fluence at points given by layer and depth below that layer's top. */
  ratios(profile: BeamProfile, layers: Int32Array, belowTopsUm: Float64Array): Float64Array;
}

const broadFrequency = 1e-3; // per cm; stands for zero

function frequencyGrid(count: number, least: number, greatest: number): Float64Array {
  return Float64Array.from({ length: count }, (_, i) => least * (greatest / least) ** (i / (count - 1)));
}

const frequencies = frequencyGrid(20, 0.05, 1000); // per cm

/** Third-degree spherical harmonics (P3) at every lateral frequency of one grid, joined through all layers with Fresnel
 *  reflection and refraction. The beam itself keeps its edges; only what it scatters spreads.
 *  @source Davison1957 chapter 12; Liemert2012 (layered media, Hankel transform) */
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
  const broad = solveFrequency(scaled, faces, beam, broadFrequency);
  const solutions = Array.from(frequencies, (k) => solveFrequency(scaled, faces, beam, k));

  return {
    ratios: (profile, where, belowTopsUm) => {
      const { powerBelow, reachCm } = beamTransform(profile);
      const weights = hankelWeights(frequencies, powerBelow, reachCm);
      return Float64Array.from(where, (j, i) => {
        const layer = scaled[j]!;
        const depth = belowTopsUm[i]! * 1e-4;
        const rest = Math.max(0, layer.thicknessCm - depth);
        const down = beam.down[j]! * Math.exp(-layer.extinction * depth);
        const up = beam.up[j]! * Math.exp(-layer.extinction * rest);
        let scattered = 0;
        for (let q = 0; q < weights.length; q++)
          scattered += weights[q]! * scatteredFluence(solutions[q]!, j, depth, rest, down, up);
        const whole = down + up + scatteredFluence(broad, j, depth, rest, down, up);
        return whole > 0 ? Math.min(1, Math.max(0, (down + up + scattered) / whole)) : 1;
      });
    },
  };
}

/** Amplitudes of scattered fluence in every layer at one frequency: per layer, each mode downward and upward, then the beam's own. */
interface FrequencySolution {
  readonly kappas: Float64Array;
  readonly downward: Float64Array;
  readonly upward: Float64Array;
  readonly beamFluences: Float64Array;
}

function scatteredFluence(s: FrequencySolution, layer: number, depth: number, rest: number, down: number, up: number): number {
  let sum = s.beamFluences[layer]! * (down + up);
  for (let i = layer * modeCount; i < (layer + 1) * modeCount; i++) {
    const kappa = s.kappas[i]!;
    sum += s.downward[i]! * Math.exp(-kappa * depth) + s.upward[i]! * Math.exp(-kappa * rest);
  }
  return sum;
}

type Faces = readonly { top: ReturnType<typeof faceCondition>; bottom: ReturnType<typeof faceCondition> }[];

function solveFrequency(layers: readonly ScaledLayer[], faces: Faces, beam: CollimatedBeam, k: number): FrequencySolution {
  const modes = layers.map((layer) => harmonicModes(layer, k));
  const size = 2 * modeCount * layers.length;
  const band = Math.min(size - 1, 3 * modeCount - 1);
  const matrix = makeBanded(size, band, band);
  const right = new Float64Array(size);
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
  const column = 2 * modeCount * index;
  for (let r = 0; r < modeCount; r++) {
    const base = r * harmonicCount;
    for (let i = 0; i < modeCount; i++) {
      let forward = 0;
      let turned = 0;
      for (let h = 0; h < harmonicCount; h++) {
        const term = moments[base + h]! * modes.vectors[i * harmonicCount + h]!;
        forward += term;
        turned += term * reflectionSigns[h]!;
      }
      const fade = Math.exp(-modes.kappas[i]! * layer.thicknessCm);
      matrix.values[bandedPosition(matrix, row + r, column + i)]! += atTop ? forward : forward * fade;
      matrix.values[bandedPosition(matrix, row + r, column + modeCount + i)]! += atTop ? turned * fade : turned;
    }
    for (let h = 0; h < harmonicCount; h++) {
      right[row + r]! -= moments[base + h]! * modes.beamAnswer[h]! * (down + up * reflectionSigns[h]!);
    }
  }
}
