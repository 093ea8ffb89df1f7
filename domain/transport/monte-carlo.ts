import { assertWithin } from '../quantities/errors.js';
import type { OpticalLayer } from '../tissue/optical-layer.js';
import type { BeamProfile } from './beam-profile.js';
import { ringRadiiCm, ringWeights } from './monte-carlo-rings.js';
import { tallyPlaces, type WalkPlan, walkPhotons } from './monte-carlo-walk.js';
import { standardErrors, type Tally } from './tally.js';

/** What a reference run is asked: fluence on the axis of each beam at each depth. A null beam is one of unlimited width. */
export interface RunQuestion {
  readonly layers: readonly OpticalLayer[];
  readonly beams: readonly (BeamProfile | null)[];
  readonly depthsUm: readonly number[];
}

/** A prepared run: the walk's arrays, and how its scores become figures. */
export interface RunPlan {
  readonly question: RunQuestion;
  readonly walk: WalkPlan;
  /** Half the height of the slice over which each depth's fluence is averaged. */
  readonly resolutionsUm: Float64Array;
  /** Score bin of each depth. */
  readonly binOfDepth: Int32Array;
  /** Ring weights of each beam. */
  readonly weights: readonly Float64Array[];
}

/** Answer of a run with the standard error of every figure. */
export interface RunAnswer {
  readonly photons: number;
  readonly specularReflectance: number;
  readonly diffuseReflectance: Estimate;
  readonly transmittance: Estimate;
  readonly absorbedFraction: Estimate;
  readonly layerAbsorbedFractions: readonly Estimate[];
  /** Fluence rate on the axis over incident irradiance there. Shape: beam by beam, depth within. */
  readonly fluenceRatios: readonly (readonly Estimate[])[];
  /** Light given up on after a million events in layers that hardly absorb; 0 in tissue. */
  readonly abandonedFraction: number;
  /** Reflected, transmitted and absorbed light, weight given up on, less the net gain by roulette, less 1: rounding alone. */
  readonly balanceError: number;
}

/** A mean over chunks with its standard error. */
export interface Estimate {
  readonly value: number;
  readonly standardError: number;
}

const depthCells = 2048; // look-up cells from the surface to the deepest score bin
const ringCells = 2048; // look-up cells from the axis to the widest ring
const clearPerCm = 1e-9; // interaction given to a layer without any, so that every step is finite

/** Prepares a run. Light arrives down the axis from air (index 1); below the last layer is air too.
 *  Score slices are thin against the distance over which fluence changes (0.03 of the diffusion length either way, at most 25 um;
 *  0.05 of a free path while much light is still unscattered, and 5e-4 of one where a layer's edge is nearer, since fluence is
 *  steepest there), so that averaging over them costs less than 0.1 %.
 *  Throws: out-of-range for a faulty layer, more than 32 layers, 64 depths or 16 beams, or a depth outside the stack. */
export function planRun(question: RunQuestion): RunPlan {
  const { layers, beams, depthsUm } = question;
  checkQuestion(question);
  const bottoms: number[] = [];
  for (const layer of layers) bottoms.push((bottoms.at(-1) ?? 0) + layer.thicknessUm * 1e-4);
  const tops = [0, ...bottoms.slice(0, -1)];
  const indices = Float64Array.of(1, ...layers.map((layer) => layer.refractiveIndex), 1);

  const slices = depthsUm.map((depthUm) => scoreSlice(depthUm * 1e-4, layers, tops, bottoms));
  const order = slices.map((_, i) => i).sort((i, k) => slices[i]!.upper - slices[k]!.upper || i - k);
  const binOfDepth = new Int32Array(depthsUm.length);
  order.forEach((depth, bin) => {
    binOfDepth[depth] = bin;
  });
  const binUppersCm = Float64Array.of(...order.map((i) => slices[i]!.upper), Number.POSITIVE_INFINITY);
  const binLowersCm = Float64Array.of(...order.map((i) => slices[i]!.lower), Number.POSITIVE_INFINITY);
  const deepestCm = Math.max(0, ...slices.map((slice) => slice.lower));
  const radii = [...new Set(beams.flatMap((beam) => (beam ? ringRadiiCm(beam) : [])))].sort((a, b) => a - b);
  const widestCm = radii.at(-1) ?? 1;
  const firsts = (count: number, cells: number, cellCm: number, ends: ArrayLike<number>) =>
    Int32Array.from({ length: cells + 1 }, (_, cell) => {
      let first = 0;
      while (first < count && ends[first]! <= cell * cellCm) first++;
      return first;
    });
  const walk: WalkPlan = {
    layerCount: layers.length,
    topsCm: Float64Array.from(tops),
    bottomsCm: Float64Array.from(bottoms),
    interactionPerCm: Float64Array.from(layers, (layer) => Math.max(clearPerCm, layer.absorptionPerCm + layer.scatteringPerCm)),
    absorbedShares: Float64Array.from(layers, (layer) =>
      layer.absorptionPerCm > 0 ? layer.absorptionPerCm / (layer.absorptionPerCm + layer.scatteringPerCm) : 0,
    ),
    anisotropies: Float64Array.from(layers, (layer) => layer.anisotropy),
    indices,
    specularReflectance: ((indices[1]! - 1) / (indices[1]! + 1)) ** 2,
    binUppersCm,
    binLowersCm,
    deepestCm,
    depthCellsPerCm: depthCells / deepestCm,
    firstBins: firsts(depthsUm.length, depthCells, deepestCm / depthCells, binLowersCm),
    ringRadiiCm: Float64Array.from(radii),
    ringCellsPerCm: ringCells / widestCm,
    firstRings: firsts(radii.length - 1, ringCells, widestCm / ringCells, radii),
  };
  return {
    question,
    walk,
    resolutionsUm: Float64Array.from(slices, (slice) => ((slice.lower - slice.upper) / 2) * 1e4),
    binOfDepth,
    weights: beams.map((beam) => ringWeights(beam, radii)),
  };
}

function checkQuestion({ layers, beams, depthsUm }: RunQuestion): void {
  assertWithin('number of layers', layers.length, 1, 32);
  assertWithin('number of depths', depthsUm.length, 1, 64);
  assertWithin('number of beams', beams.length, 1, 16);
  let bottomUm = 0;
  for (const layer of layers) {
    assertWithin(`thickness of ${layer.name} in um`, layer.thicknessUm, 1e-3, 1e9);
    assertWithin(`absorption of ${layer.name} per cm`, layer.absorptionPerCm, 0, 1e7);
    assertWithin(`scattering of ${layer.name} per cm`, layer.scatteringPerCm, 0, 1e7);
    assertWithin(`anisotropy of ${layer.name}`, layer.anisotropy, -0.999, 0.999);
    assertWithin(`refractive index of ${layer.name}`, layer.refractiveIndex, 1, 2);
    bottomUm += layer.thicknessUm;
  }
  for (const depthUm of depthsUm) assertWithin('depth in um', depthUm, 0, bottomUm);
}

const eventsPerCm = (layer: OpticalLayer) => layer.absorptionPerCm + layer.scatteringPerCm;

/** Slice about a depth, in cm. It straddles a boundary only within the finer height, and never one where the index changes: there
 *  fluence jumps, and the depth of the boundary belongs to the layer below. */
function scoreSlice(depth: number, layers: readonly OpticalLayer[], tops: readonly number[], bottoms: readonly number[]) {
  const last = layers.length - 1;
  let at = 0;
  while (at < last && depth >= bottoms[at]! * (1 - 1e-12)) at++;
  const reach = (layer: OpticalLayer) => {
    const reduced = layer.absorptionPerCm + layer.scatteringPerCm * (1 - layer.anisotropy);
    return 0.03 / Math.max(1, Math.sqrt(3 * layer.absorptionPerCm * reduced), 0.3 * layer.absorptionPerCm, 0.3 * reduced);
  };
  let events = 0; // optical depth, which says how much light has not met anything yet
  for (let i = 0; i <= at; i++) events += (Math.min(depth, bottoms[i]!) - tops[i]!) * eventsPerCm(layers[i]!);
  const unmet = (0.05 * Math.exp(Math.min(20, events / 2))) / Math.max(1, eventsPerCm(layers[at]!));
  const coarse = Math.min(reach(layers[at]!), unmet, 25e-4, layers[at]!.thicknessUm * 1e-4 * 0.25);
  const mostEvents = Math.max(...[at - 1, at, at + 1].map((i) => eventsPerCm(layers[Math.min(last, Math.max(0, i))]!)));
  const fine = Math.min(coarse / 10, 5e-4 / Math.max(1, mostEvents));
  const half = Math.max(fine, Math.min(coarse, depth - tops[at]!, bottoms[at]! - depth));
  const sharedBelow = at < last && layers[at]!.refractiveIndex === layers[at + 1]!.refractiveIndex;
  const sharedAbove = at > 0 && layers[at]!.refractiveIndex === layers[at - 1]!.refractiveIndex;
  const floor = sharedAbove ? 0 : tops[at]!;
  const ceiling = sharedBelow ? bottoms[last]! : bottoms[at]!;
  const center = Math.min(Math.max(depth, floor + half), ceiling - half);
  return { upper: center - half, lower: center + half };
}

/** Figures of one chunk: fluence ratios (beam by beam, depth within), diffuse reflectance, transmittance, roulette gain,
 *  abandoned weight, absorbed fraction of each layer and of all together; all per photon that reaches the surface. */
export function runChunk(plan: RunPlan, seed: number, chunk: number, photons: number): Float64Array {
  const { walk, weights, binOfDepth, question } = plan;
  const scores = walkPhotons(walk, seed, chunk, photons);
  const rings = walk.ringRadiiCm.length + 1;
  const start = tallyPlaces.absorbed + walk.layerCount;
  const depths = question.depthsUm.length;
  const figures = new Float64Array(figureCount(plan));
  for (let beam = 0; beam < weights.length; beam++) {
    for (let depth = 0; depth < depths; depth++) {
      const bin = binOfDepth[depth]!;
      let sum = 0;
      for (let ring = 0; ring < rings; ring++) sum += weights[beam]![ring]! * scores[start + bin * rings + ring]!;
      figures[beam * depths + depth] = sum / (photons * (walk.binLowersCm[bin]! - walk.binUppersCm[bin]!));
    }
  }
  for (let i = 0; i < start; i++) figures[weights.length * depths + i] = scores[i]! / photons;
  for (let i = tallyPlaces.absorbed; i < start; i++) figures[figures.length - 1]! += scores[i]! / photons;
  return figures;
}

/** How many figures `runChunk` gives. */
export function figureCount(plan: RunPlan): number {
  return plan.weights.length * plan.question.depthsUm.length + tallyPlaces.absorbed + plan.walk.layerCount + 1;
}

/** Greatest standard error over value among the fluence ratios; infinite while one of them is zero. */
export function worstRelativeError(plan: RunPlan, tally: Tally): number {
  const errors = standardErrors(tally);
  let worst = 0;
  for (let i = 0; i < plan.weights.length * plan.question.depthsUm.length; i++) {
    worst = Math.max(worst, tally.means[i]! > 0 ? errors[i]! / tally.means[i]! : Number.POSITIVE_INFINITY);
  }
  return worst;
}

/** Turns a tally of `runChunk` figures into the answer. Throws: out-of-range with fewer than two chunks. */
export function answerRun(plan: RunPlan, tally: Tally, photonsPerChunk: number): RunAnswer {
  const errors = standardErrors(tally);
  const estimate = (i: number): Estimate => ({ value: tally.means[i]!, standardError: errors[i]! });
  const depths = plan.question.depthsUm.length;
  const rest = plan.weights.length * depths;
  const layers = Array.from({ length: plan.walk.layerCount }, (_, i) => estimate(rest + tallyPlaces.absorbed + i));
  const mean = (place: number) => tally.means[rest + place]!;
  const absorbed = estimate(tally.means.length - 1);
  const specularReflectance = plan.walk.specularReflectance;
  const { diffuseReflectance, transmittance, rouletteGain, abandoned } = tallyPlaces;
  return {
    photons: tally.chunks * photonsPerChunk,
    specularReflectance,
    diffuseReflectance: estimate(rest + diffuseReflectance),
    transmittance: estimate(rest + transmittance),
    absorbedFraction: absorbed,
    layerAbsorbedFractions: layers,
    fluenceRatios: plan.weights.map((_, beam) => Array.from({ length: depths }, (_, depth) => estimate(beam * depths + depth))),
    abandonedFraction: mean(abandoned),
    balanceError:
      specularReflectance +
      mean(diffuseReflectance) +
      mean(transmittance) +
      absorbed.value +
      mean(abandoned) -
      mean(rouletteGain) -
      1,
  };
}
