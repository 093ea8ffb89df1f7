import { standardNormalQuantile } from '../numeric/distributions.js';
import { sobolPoints } from '../numeric/low-discrepancy.js';
import { greatestFluenceJPerCm2 } from './fluence-window.js';
import { type JudgedCandidate, orderCandidates } from './rank.js';
import type { UncertainInput } from './uncertain-inputs.js';
import type { WindowSpread } from './window-spread.js';

/** Logarithms of both thresholds of one candidate as sums of parabolas, one in each uncertain input in units of its deviation. */
interface WindowSurface {
  readonly threshold: LogSurface | null;
  readonly limit: LogSurface | null;
}

interface LogSurface {
  readonly center: number;
  readonly slopes: Float64Array;
  readonly curvatures: Float64Array;
}

export interface SamplingResult {
  readonly ordered: JudgedCandidate[];
  /** Greatest relative error of a threshold or limit taken from the surfaces, where it was computed directly as well. */
  readonly surfaceErrorFraction: number;
  /** Change of the probability of a window of the first candidate from half to all of the samples. */
  readonly probabilityShift: number;
}

const quantiles = [0.05, 0.5, 0.95];
const directPoints = 3; // samples at which windows are computed directly to measure the surfaces

/** Samples both thresholds of every candidate. Each input is moved down and up by 1.2 deviations and the windows computed anew; parabolas
 *  of the logarithms stand for what lies between; seeded, scrambled low-discrepancy points draw from them; and at a few of the points the
 *  windows are computed directly, which gives the error that is reported. Interactions between inputs are in that error.
 *  `judge` computes the windows of all candidates, in their order, with all inputs moved by the given numbers of deviations.
 *  @source JCGM101 propagation of distributions */
export function sampleWindows(options: {
  readonly judged: readonly JudgedCandidate[];
  readonly inputs: readonly UncertainInput[];
  readonly judge: (deviations: Float64Array) => readonly JudgedCandidate[];
  readonly samples: number;
  readonly seed: number;
  readonly safetyFactor: number;
}): SamplingResult {
  const { judged, inputs, judge, samples, seed, safetyFactor } = options;
  const step = 1.2;
  const moved = inputs.map((_, i) =>
    [-step, step].map((by) => judge(Float64Array.from(inputs, (_input, j) => (i === j ? by : 0)))),
  );
  const surfaces = judged.map((item, c): WindowSurface => {
    const side = (read: (item: JudgedCandidate) => number | null) =>
      surfaceOf(
        read(item),
        moved.map((pair) => pair.map((run) => read(run[c]!))),
        step,
      );
    return {
      threshold: side((one) => one.window?.targetThresholdJPerCm2 ?? null),
      limit: side((one) => one.window?.epidermalLimitJPerCm2 ?? null),
    };
  });
  const points = sobolPoints(samples, inputs.length, seed);
  const deviations = Float64Array.from(points, (share) => standardNormalQuantile(Math.min(Math.max(share, 1e-6), 1 - 1e-6)));
  const at = (surface: LogSurface, sample: number) => valueAt(surface, deviations, sample * inputs.length);
  const spreads = surfaces.map((surface) => spreadOf(surface, inputs, samples, at, safetyFactor));
  const ordered = orderCandidates(
    judged.map((item, c) => ({ ...item, spread: spreads[c]! })),
    safetyFactor,
  );
  const firstIndex = judged.findIndex((item) => item.candidate === ordered[0]?.candidate);
  const first = surfaces[firstIndex];
  const half = first ? spreadOf(first, inputs, Math.floor(samples / 2), at, safetyFactor) : null;
  return {
    ordered,
    surfaceErrorFraction: surfaceError(options, surfaces, deviations, at),
    probabilityShift: half ? Math.abs(half.probabilityOfWindow - spreads[firstIndex]!.probabilityOfWindow) : 0,
  };
}

function surfaceOf(center: number | null, sides: readonly (readonly (number | null)[])[], step: number): LogSurface | null {
  if (center === null || !(center > 0)) return null;
  const ln = Math.log(center);
  const slopes = new Float64Array(sides.length);
  const curvatures = new Float64Array(sides.length);
  sides.forEach(([down, up], i) => {
    const below = Math.log(down ?? 2 * greatestFluenceJPerCm2); // beyond what is looked at: told apart from a window all the same
    const above = Math.log(up ?? 2 * greatestFluenceJPerCm2);
    slopes[i] = (above - below) / (2 * step);
    curvatures[i] = (above + below - 2 * ln) / (2 * step * step);
  });
  return { center: ln, slopes, curvatures };
}

function valueAt(surface: LogSurface, deviations: Float64Array, offset: number): number {
  let ln = surface.center;
  for (let i = 0; i < surface.slopes.length; i++) {
    const x = deviations[offset + i]!;
    ln += x * (surface.slopes[i]! + x * surface.curvatures[i]!);
  }
  return Math.exp(ln);
}

function spreadOf(
  { threshold, limit }: WindowSurface,
  inputs: readonly UncertainInput[],
  samples: number,
  at: (surface: LogSurface, sample: number) => number,
  safetyFactor: number,
): WindowSpread {
  const limits = limit ? Float64Array.from({ length: samples }, (_, s) => at(limit, s)) : new Float64Array(0);
  const thresholds = threshold ? Float64Array.from({ length: samples }, (_, s) => at(threshold, s)) : new Float64Array(0);
  let open = 0;
  if (limit && threshold) {
    for (let s = 0; s < samples; s++) {
      const ratio = limits[s]! / thresholds[s]!;
      if (thresholds[s]! <= greatestFluenceJPerCm2 && ratio > 1 && ratio >= safetyFactor) open++;
    }
  }
  const variances = inputs.map((_, i) => ((limit?.slopes[i] ?? 0) - (threshold?.slopes[i] ?? 0)) ** 2);
  const total = variances.reduce((sum, variance) => sum + variance, 0);
  const quantileOf = (values: Float64Array) => {
    const sorted = Float64Array.from(values).sort();
    return quantiles.map((share) => sorted[Math.min(samples - 1, Math.floor(share * samples))]!);
  };
  return {
    probabilityOfWindow: open / samples,
    targetThresholdQuantilesJPerCm2: threshold
      ? quantileOf(thresholds).map((value) => (value <= greatestFluenceJPerCm2 ? value : null))
      : [null, null, null],
    epidermalLimitQuantilesJPerCm2: limit ? quantileOf(limits) : [],
    dominantInputs: inputs
      .map(({ input }, i) => ({ input, varianceFraction: total > 0 ? variances[i]! / total : 0 }))
      .sort((a, b) => b.varianceFraction - a.varianceFraction)
      .slice(0, 3),
  };
}

function surfaceError(
  { judge, inputs, samples }: Parameters<typeof sampleWindows>[0],
  surfaces: readonly WindowSurface[],
  deviations: Float64Array,
  at: (surface: LogSurface, sample: number) => number,
): number {
  let worst = 0;
  for (let point = 0; point < directPoints; point++) {
    const sample = Math.floor(((point + 0.5) * samples) / directPoints);
    const direct = judge(deviations.subarray(sample * inputs.length, (sample + 1) * inputs.length));
    direct.forEach((item, c) => {
      const { threshold, limit } = surfaces[c]!;
      const known = [item.window?.targetThresholdJPerCm2 ?? null, item.window?.epidermalLimitJPerCm2 ?? null];
      [threshold, limit].forEach((surface, side) => {
        const exact = known[side];
        if (surface && exact) worst = Math.max(worst, Math.abs(at(surface, sample) / exact - 1));
      });
    });
  }
  return worst;
}
