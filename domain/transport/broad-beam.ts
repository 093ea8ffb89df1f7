import { bandedPosition, makeBanded, solveBanded } from '../numeric/banded.js';
import type { OpticalLayer } from '../tissue/optical-layer.js';
import { type CollimatedBeam, collimatedBeam } from './collimated.js';
import { fresnelReflectance } from './fresnel.js';
import { type LayerModes, layerModes } from './layer-modes.js';
import { makeOrdinates, type Ordinates } from './ordinates.js';

/** Radiative transfer solved in a stack of layers under a broad beam at normal incidence, per incident irradiance. */
export interface BroadBeam {
  readonly specularReflectance: number;
  readonly diffuseReflectance: number;
  readonly transmittance: number;
  /** Fluence rate, and net downward flux, at a depth inside layer `layer`, `belowTopUm` under its top. */
  fluence(layer: number, belowTopUm: number): number;
  flux(layer: number, belowTopUm: number): number;
}

/** Discrete ordinates with analytic depth dependence in each layer: two amplitudes per mode and layer, joined by Fresnel
 *  reflection and refraction at every interface, in one banded system. Air above and below.
 *  Shape: `perRegion` directions per hemisphere on either side of the critical angle.
 *  @source Chandrasekhar1960 chapter 3; Stamnes1988; Stamnes2017 section 3.3 */
export function solveBroadBeam(layers: readonly OpticalLayer[], perRegion: number): BroadBeam {
  const ordinates = makeOrdinates(
    layers.map((layer) => layer.refractiveIndex),
    perRegion,
  );
  const modes = layers.map((layer, j) => layerModes(layer, ordinates.layers[j]!, 2 * perRegion));
  const beam = collimatedBeam(
    layers,
    modes.map((mode) => mode.opticalThickness),
  );
  const amplitudes = joinLayers(layers, ordinates, modes, beam);
  const starts = amplitudeStarts(modes);

  const evaluate = (layer: number, belowTopUm: number, wantFlux: boolean): number => {
    const mode = modes[layer]!;
    const depth = Math.min(mode.extinctionPerUm * belowTopUm, mode.opticalThickness);
    const rest = Math.max(0, mode.opticalThickness - depth);
    const down = beam.down[layer]! * Math.exp(-depth);
    const up = beam.up[layer]! * Math.exp(-rest);
    const whole = layers[layer]!.thicknessUm;
    let sum = wantFlux ? down - up : down + up;
    for (let k = 0; k < mode.count; k++) {
      const start = starts[layer]! + k;
      const state = modeState(mode, k, depth, rest, belowTopUm / whole, beam.down[layer]!, beam.up[layer]!);
      const even = amplitudes[start]!;
      const odd = amplitudes[start + mode.count]!;
      sum += wantFlux
        ? mode.fluxFactors[k]! * (even * state.evenW + odd * state.oddW + state.sourceW)
        : mode.fluenceFactors[k]! * (even * state.evenV + odd * state.oddV + state.sourceV);
    }
    return sum;
  };

  const topFlux = evaluate(0, 0, true);
  const last = layers.length - 1;
  return {
    specularReflectance: beam.surfaceReflectance,
    diffuseReflectance: 1 - beam.surfaceReflectance - topFlux,
    transmittance: evaluate(last, layers[last]!.thicknessUm, true),
    fluence: (layer, belowTopUm) => Math.max(0, evaluate(layer, belowTopUm, false)),
    flux: (layer, belowTopUm) => evaluate(layer, belowTopUm, true),
  };
}

interface ModeState {
  evenV: number;
  evenW: number;
  oddV: number;
  oddW: number;
  sourceV: number;
  sourceW: number;
}

const state: ModeState = { evenV: 0, evenW: 0, oddV: 0, oddW: 0, sourceV: 0, sourceW: 0 };

/** The two homogeneous solutions of a mode (even and odd about the middle of the layer) and its answer to the beams.
 *  The even one is 1 at both faces; the odd one is scaled so that neither v nor w exceeds 1 there, at any kappa T.
 *  The answer to a beam, (exp(-tau) - exp(-kappa tau))/(1 - kappa^2), is written so that kappa = 1 is no exception. */
function modeState(m: LayerModes, k: number, depth: number, rest: number, place: number, down: number, up: number): ModeState {
  const kappa = m.kappas[k]!;
  const fromTop = Math.exp(-kappa * depth);
  const fromBottom = Math.exp(-kappa * rest);
  const across = kappa * m.opticalThickness;
  const whole = Math.exp(-across);
  state.evenV = (fromTop + fromBottom) / (1 + whole);
  state.evenW = (-kappa * (fromBottom - fromTop)) / (1 + whole);
  if (across < 1e-8) {
    // sinh linear in depth
    const scale = 1 / (m.opticalThickness + 2);
    state.oddV = (2 * place - 1) * m.opticalThickness * scale;
    state.oddW = -2 * scale;
  } else {
    const gap = -Math.expm1(-across);
    const scale = 1 / (gap + kappa * (1 + whole));
    state.oddV = (fromBottom - fromTop) * scale;
    state.oddW = -kappa * (fromBottom + fromTop) * scale;
  }
  const strength = m.alphas[k]! + m.betas[k]!;
  const alpha = m.alphas[k]!;
  const beamTop = Math.exp(-depth);
  const beamBottom = Math.exp(-rest);
  const answerTop = beamAnswer(kappa, depth, beamTop);
  const answerBottom = beamAnswer(kappa, rest, beamBottom);
  const slopeTop = -kappa * answerTop - beamTop / (1 + kappa);
  const slopeBottom = -kappa * answerBottom - beamBottom / (1 + kappa);
  state.sourceV = -strength * (down * answerTop + up * answerBottom);
  state.sourceW = down * (alpha * beamTop + strength * slopeTop) - up * (alpha * beamBottom + strength * slopeBottom);
  return state;
}

function beamAnswer(kappa: number, depth: number, beam: number): number {
  const excess = (kappa - 1) * depth;
  if (Math.abs(excess) < 1e-5) return (-depth * beam * (1 - excess / 2)) / (1 + kappa);
  if (excess < -30) return (beam - Math.exp(-kappa * depth)) / (1 - kappa * kappa);
  return (beam * Math.expm1(-excess)) / ((kappa - 1) * (1 + kappa));
}

function amplitudeStarts(modes: readonly LayerModes[]): number[] {
  const starts: number[] = [];
  let next = 0;
  for (const mode of modes) {
    starts.push(next);
    next += 2 * mode.count;
  }
  return starts;
}

function joinLayers(
  layers: readonly OpticalLayer[],
  ordinates: Ordinates,
  modes: readonly LayerModes[],
  beam: CollimatedBeam,
): Float64Array {
  const starts = amplitudeStarts(modes);
  const widest = Math.max(...modes.map((mode) => mode.count));
  const size = modes.reduce((sum, mode) => sum + 2 * mode.count, 0);
  const band = 3 * widest - 1;
  const matrix = makeBanded(size, Math.min(size - 1, band), Math.min(size - 1, band));
  const right = new Float64Array(size);

  /** Adds factor x (radiance down or up ray `ray` at the top or bottom of a layer) to an equation. */
  const addRadiance = (row: number, layer: number, ray: number, sign: 1 | -1, atTop: boolean, factor: number): void => {
    if (factor === 0) return;
    const mode = modes[layer]!;
    const depth = atTop ? 0 : mode.opticalThickness;
    const rest = mode.opticalThickness - depth;
    for (let k = 0; k < mode.count; k++) {
      const s = modeState(mode, k, depth, rest, atTop ? 0 : 1, beam.down[layer]!, beam.up[layer]!);
      const sum = (factor / 2) * mode.sums[ray * mode.count + k]!;
      const difference = ((sign * factor) / 2) * mode.differences[ray * mode.count + k]!;
      const column = starts[layer]! + k;
      matrix.values[bandedPosition(matrix, row, column)]! += sum * s.evenV + difference * s.evenW;
      matrix.values[bandedPosition(matrix, row, column + mode.count)]! += sum * s.oddV + difference * s.oddW;
      right[row]! -= sum * s.sourceV + difference * s.sourceW;
    }
  };

  let row = 0;
  const last = layers.length - 1;
  for (let face = -1; face <= last; face++) {
    const above = layers[face]?.refractiveIndex ?? 1;
    const below = layers[face + 1]?.refractiveIndex ?? 1;
    const raysAbove = face >= 0 ? modes[face]!.count : 0;
    const raysBelow = face < last ? modes[face + 1]!.count : 0;
    for (let ray = 0; ray < Math.max(raysAbove, raysBelow); ray++) {
      const sine = ordinates.invariants[ray]!;
      const cosine = Math.sqrt(Math.max(0, 1 - (sine / Math.max(above, below)) ** 2));
      const reflectance =
        sine >= Math.min(above, below) ? 1 : fresnelReflectance(Math.max(above, below), Math.min(above, below), cosine);
      if (ray < raysAbove) {
        addRadiance(row, face, ray, -1, false, 1);
        addRadiance(row, face, ray, 1, false, -reflectance);
        if (ray < raysBelow) addRadiance(row, face + 1, ray, -1, true, reflectance - 1);
        row++;
      }
      if (ray < raysBelow) {
        addRadiance(row, face + 1, ray, 1, true, 1);
        addRadiance(row, face + 1, ray, -1, true, -reflectance);
        if (ray < raysAbove) addRadiance(row, face, ray, 1, false, reflectance - 1);
        row++;
      }
    }
  }
  return solveBanded(matrix, right);
}
