import { hankelWeights } from '../numeric/hankel.js';
import type { OpticalLayer } from '../tissue/optical-layer.js';
import { type BeamProfile, beamTransform } from './beam-profile.js';
import { isClear } from './clear-layers.js';
import { collimatedBeam } from './collimated.js';
import { type ScaledLayer, scaleLayer } from './harmonic-modes.js';
import { harmonicsUpTo } from './harmonics.js';
import { type LateralSolution, lateralSolver, scatteredFluence } from './lateral-frequency.js';

/** Points on the beam axis at which lateral spread is worked out once for every spot. */
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

/** Lateral frequencies per cm, even in their logarithm, from waves of a meter to some way under the mean free path; the spline
 *  between them is good to 1e-4 of the incident irradiance. */
const frequencies = Float64Array.from({ length: 25 }, (_, i) => 0.05 * 30_000 ** (i / 24));

/** Spherical harmonics up to an odd degree at every lateral frequency of one grid, joined through all layers with Fresnel
 *  reflection and refraction. The beam itself keeps its edges but for the width of its forward peak; what it scatters spreads.
 *  Frequencies do not depend on the spot, so every spot of a stack shares them. */
export function solveSpotSpread(layers: readonly OpticalLayer[], degree: number): SpotSpread {
  const scaled = layers.map((layer) => scaleLayer(layer, degree));
  const beam = collimatedBeam(
    layers,
    scaled.map((layer) => layer.extinction * layer.thicknessCm),
  );
  let solutions: { broad: LateralSolution; each: LateralSolution[] } | undefined;
  const tables = new WeakMap<SpreadPoints, Float64Array>();
  const width = frequencies.length + 1;

  const first = layers.findIndex((layer) => !isClear(layer));
  const last = layers.findLastIndex((layer) => !isClear(layer));
  const solveFrequencies = () => {
    const solve = lateralSolver(harmonicsUpTo(degree), {
      layers: layers.slice(first, last + 1),
      scaled: scaled.slice(first, last + 1),
      above: layers.slice(0, first).reverse(),
      below: layers.slice(last + 1),
      beamDown: beam.down.slice(first, last + 1),
      beamUp: beam.up.slice(first, last + 1),
    });
    return { broad: solve(broadFrequency), each: Array.from(frequencies, solve) };
  };

  const beamAt = (j: number, depth: number, rest: number): number =>
    beam.down[j]! * Math.exp(-scaled[j]!.extinction * depth) + beam.up[j]! * Math.exp(-scaled[j]!.extinction * rest);

  /** Per point: fluence of the broad beam, then fluence at each frequency. */
  const tabulate = (points: SpreadPoints): Float64Array => {
    const kept = tables.get(points);
    if (kept) return kept;
    solutions ??= solveFrequencies();
    const table = new Float64Array(width * points.layers.length);
    for (let i = 0; i < points.layers.length; i++) {
      const j = points.layers[i]!;
      const layer = scaled[j]!;
      const depth = points.belowTopsUm[i]! * 1e-4;
      const rest = Math.max(0, layer.thicknessCm - depth);
      const own = beamAt(j, depth, rest);
      // clear layers hold the light scattered at the face they border on
      const at = Math.min(Math.max(j, first), last);
      const down = j < first ? 0 : j > last ? scaled[at]!.thicknessCm : depth;
      const up = scaled[at]!.thicknessCm - down;
      const along = at === j ? own : beamAt(at, down, up);
      table[i * width] = own + scatteredFluence(solutions.broad, at - first, down, up, along);
      for (let q = 0; q < frequencies.length; q++) {
        const narrowed = own * Math.exp(-peakLoss(scaled, degree, j, depth, frequencies[q]!));
        table[i * width + 1 + q] = narrowed + scatteredFluence(solutions.each[q]!, at - first, down, up, along);
      }
    }
    tables.set(points, table);
    return table;
  };

  return {
    ratios: (profile, points) => {
      if (first < 0) return new Float64Array(points.layers.length).fill(1); // nothing scatters
      const weights = beamWeights(profile);
      const table = tabulate(points);
      const ratios = new Float64Array(points.layers.length);
      for (let i = 0; i < ratios.length; i++) {
        let fluence = 0;
        for (let q = 0; q < frequencies.length; q++) fluence += weights[q]! * table[i * width + 1 + q]!;
        const whole = table[i * width]!;
        ratios[i] = whole > 0 ? Math.min(1, Math.max(0, fluence / whole)) : 1;
      }
      return ratios;
    },
  };
}

const keptWeights = new Map<string, Float64Array>();

function beamWeights(profile: BeamProfile): Float64Array {
  const key = JSON.stringify(profile);
  let weights = keptWeights.get(key);
  if (!weights) {
    const { powerBelow, reachCm } = beamTransform(profile);
    weights = hankelWeights(frequencies, powerBelow, reachCm);
    if (keptWeights.size >= 64) keptWeights.clear();
    keptWeights.set(key, weights);
  }
  return weights;
}

/** Exponent by which the beam loses fluence at lateral frequency k because the forward peak, which counts as unscattered, has a
 *  width: the integral of mu_s (g^(N+1) - g^(k u)) over the way above, u the distance from the point, where k u exceeds N + 1.
 *  The small-angle solution, for the moments of the phase function beyond those that the harmonics follow. @source Wells1969 */
function peakLoss(layers: readonly ScaledLayer[], degree: number, layer: number, depth: number, k: number): number {
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
