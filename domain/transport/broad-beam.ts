import { bandedPosition, makeBanded, solveBanded } from '../numeric/banded.js';
import type { OpticalLayer } from '../tissue/optical-layer.js';
import { type CollimatedBeam, collimatedBeam } from './collimated.js';
import { fresnelReflectance } from './fresnel.js';
import { type DepthModes, type LayerModes, layerModes } from './layer-modes.js';
import { modeStates } from './mode-states.js';
import { makeOrdinates, type Ordinates } from './ordinates.js';
import { singleScatteringExcess } from './single-scattering.js';

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
 *  @source Chandrasekhar1960 chapters 2 and 3; Stamnes1988; JinStamnes1994 (refracting layers) */
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
  const starts: number[] = [];
  let size = 0;
  for (const mode of modes) {
    starts.push(size);
    size += 2 * mode.count;
  }
  const amplitudes = joinLayers(layers, ordinates, modes, beam, starts);
  const alongDepth = modes.map(({ sums, differences, backScattering, ...rest }): DepthModes => rest); // the rest need not be kept

  const evaluate = (layer: number, belowTopUm: number, wantFlux: boolean): number => {
    const mode = alongDepth[layer]!;
    const depth = Math.min(mode.extinctionPerUm * belowTopUm, mode.opticalThickness);
    const rest = Math.max(0, mode.opticalThickness - depth);
    const place = belowTopUm / layers[layer]!.thicknessUm;
    const states = modeStates(mode, depth, rest, place, beam.down[layer]!, beam.up[layer]!);
    const factors = wantFlux ? mode.fluxFactors : mode.fluenceFactors;
    const start = starts[layer]!;
    const part = wantFlux ? 1 : 0;
    let sum = beam.down[layer]! * Math.exp(-depth) + (wantFlux ? -1 : 1) * beam.up[layer]! * Math.exp(-rest);
    for (let k = 0; k < mode.count; k++) {
      const even = amplitudes[start + k]! * states[6 * k + part]!;
      const odd = amplitudes[start + mode.count + k]! * states[6 * k + 2 + part]!;
      sum += factors[k]! * (even + odd + states[6 * k + 4 + part]!);
    }
    return sum;
  };

  // light that single scattering returns beyond what the ordinates carry is missing from all that is scattered on inside
  const excess = singleScatteringExcess(layers, modes, ordinates, beam.down);
  const inside = 1 - excess / (1 - beam.surfaceReflectance);
  const entering = evaluate(0, 0, true);
  const last = layers.length - 1;
  return {
    specularReflectance: beam.surfaceReflectance,
    diffuseReflectance: 1 - beam.surfaceReflectance - inside * entering,
    transmittance: inside * evaluate(last, layers[last]!.thicknessUm, true),
    fluence: (layer, belowTopUm) => Math.max(0, inside * evaluate(layer, belowTopUm, false)),
    flux: (layer, belowTopUm) => inside * evaluate(layer, belowTopUm, true),
  };
}

/** Writes every ray's equation at every face: what leaves is what is reflected plus what comes through. */
function joinLayers(
  layers: readonly OpticalLayer[],
  ordinates: Ordinates,
  modes: readonly LayerModes[],
  beam: CollimatedBeam,
  starts: readonly number[],
): Float64Array {
  const widest = Math.max(...modes.map((mode) => mode.count));
  const size = starts[starts.length - 1]! + 2 * modes[modes.length - 1]!.count;
  const band = Math.min(size - 1, 3 * widest - 1);
  const matrix = makeBanded(size, band, band);
  const right = new Float64Array(size);
  const tops = modes.map((mode, j) => modeStates(mode, 0, mode.opticalThickness, 0, beam.down[j]!, beam.up[j]!).slice());
  const bottoms = modes.map((mode, j) => modeStates(mode, mode.opticalThickness, 0, 1, beam.down[j]!, beam.up[j]!).slice());

  /** Adds factor x (radiance down or up a ray at the top or bottom of a layer) to an equation. */
  const addRadiance = (row: number, layer: number, ray: number, sign: 1 | -1, atTop: boolean, factor: number): void => {
    if (factor === 0) return;
    const { count, sums, differences } = modes[layer]!;
    const states = atTop ? tops[layer]! : bottoms[layer]!;
    const first = bandedPosition(matrix, row, starts[layer]!);
    for (let k = 0; k < count; k++) {
      const sum = (factor / 2) * sums[ray * count + k]!;
      const difference = ((sign * factor) / 2) * differences[ray * count + k]!;
      matrix.values[first + k]! += sum * states[6 * k]! + difference * states[6 * k + 1]!;
      matrix.values[first + count + k]! += sum * states[6 * k + 2]! + difference * states[6 * k + 3]!;
      right[row]! -= sum * states[6 * k + 4]! + difference * states[6 * k + 5]!;
    }
  };

  let row = 0;
  const last = layers.length - 1;
  for (let face = -1; face <= last; face++) {
    const above = layers[face]?.refractiveIndex ?? 1;
    const below = layers[face + 1]?.refractiveIndex ?? 1;
    const denser = Math.max(above, below);
    const rarer = Math.min(above, below);
    const raysAbove = face >= 0 ? modes[face]!.count : 0;
    const raysBelow = face < last ? modes[face + 1]!.count : 0;
    for (let ray = 0; ray < Math.max(raysAbove, raysBelow); ray++) {
      const sine = ordinates.invariants[ray]!;
      const cosine = Math.sqrt(Math.max(0, 1 - (sine / denser) ** 2));
      const reflectance = sine >= rarer ? 1 : fresnelReflectance(denser, rarer, cosine);
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
