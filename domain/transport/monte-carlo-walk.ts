import { nextWord, streamState } from '../numeric/random.js';
import { fresnelReflectance } from './fresnel.js';
import { azimuthSectors, exponentialZiggurat } from './monte-carlo-tables.js';

/** Layers and score places as flat arrays, in cm; built by `planRun`. Index runs over layers or, where named so, over score bins. */
export interface WalkPlan {
  readonly layerCount: number;
  readonly topsCm: Float64Array;
  readonly bottomsCm: Float64Array;
  readonly interactionPerCm: Float64Array;
  readonly absorbedShares: Float64Array;
  readonly anisotropies: Float64Array;
  /** Refractive indices with the outside above first and the outside below last: layer i has entry i + 1. */
  readonly indices: Float64Array;
  readonly specularReflectance: number;
  /** Depth bins by ascending upper edge, closed by an entry at infinity. */
  readonly binUppersCm: Float64Array;
  readonly binLowersCm: Float64Array;
  readonly deepestCm: number;
  readonly depthCellsPerCm: number;
  /** First bin that may reach into a depth cell. */
  readonly firstBins: Int32Array;
  /** Ascending outer radii of rings; light beyond the last goes to one more ring without end. */
  readonly ringRadiiCm: Float64Array;
  readonly ringCellsPerCm: number;
  readonly firstRings: Int32Array;
}

/** Places in a chunk's tally before the per-layer absorption and the scores of `ring + (rings + 1) * bin`. */
export const tallyPlaces = { diffuseReflectance: 0, transmittance: 1, rouletteGain: 2, abandoned: 3, absorbed: 4 } as const;

/** Length of a chunk's tally. */
function tallyLength(plan: WalkPlan): number {
  return tallyPlaces.absorbed + plan.layerCount + (plan.binUppersCm.length - 1) * (plan.ringRadiiCm.length + 1);
}

const ziggurat = exponentialZiggurat();
const { cosines, sines, turnUnit } = azimuthSectors();

const rouletteBelow = 1e-3; // weight under which one photon in ten goes on; unbiased for any value
const rouletteFactor = 10;
const isotropicBelow = 1e-6; // anisotropy that the inverted distribution cannot tell from none
const mostSteps = 1e6; // a photon caught in a layer that neither absorbs nor lets go; its weight is tallied as abandoned

/** Walks one chunk of photons of a pencil beam down the axis and adds up what happens to them.
 *  Shape: places of `tallyPlaces`, then absorbed weight of each layer, then path length times weight in each ring of each depth bin
 *  in cm; all summed over photons, as shares of the photons that arrive at the surface (specular reflection taken off).
 *  Steps between events are exponential in optical depth; absorption lowers the weight at each event; scattering is
 *  Henyey-Greenstein; at a boundary the whole photon is reflected or refracted by the Fresnel probability.
 *  The sum of reflectance, transmittance, absorption, abandoned weight less roulette gain equals the weight launched, to rounding.
 *  @source Wang1995 sections 3.2 to 3.9 (walk); Marsaglia2000 (step); Duff2017 (turn) */
export function walkPhotons(plan: WalkPlan, seed: number, chunk: number, photons: number): Float64Array {
  const tally = new Float64Array(tallyLength(plan));
  const { topsCm, bottomsCm, interactionPerCm, absorbedShares, anisotropies, indices, layerCount } = plan;
  const { binUppersCm, deepestCm, depthCellsPerCm, firstBins } = plan;
  const { scales, insideBelow, heights, tailStart } = ziggurat;
  const unit = 2 ** -32;
  const launched = 1 - plan.specularReflectance;

  // The generator's state lives in local variables, and its step is written out where speed counts: a fifth faster than calls.
  // Elsewhere the state goes through an array to `nextWord`.
  const state = streamState(seed, chunk);
  let s0 = state[0]!;
  let s1 = state[1]!;
  let s2 = state[2]!;
  let s3 = state[3]!;

  let reflected = 0;
  let transmitted = 0;
  let rouletteGain = 0;
  let abandoned = 0;

  // What the walk needs of the layer it is in, loaded when it enters; absorbed weight is put down when it leaves.
  let loaded = -1;
  let absorbedHere = 0;
  let topCm = 0;
  let bottomCm = 0;
  let freePathCm = 0;
  let absorbedShare = 0;
  let g = 0;
  let hgOver = 0;
  let hgUnder = 0;
  let hgSlope = 0;
  let hgSum = 0;
  let hgScale = 0;

  for (let photon = 0; photon < photons; photon++) {
    let x = 0;
    let y = 0;
    let z = 0;
    let ux = 0;
    let uy = 0;
    let uz = 1;
    let weight = launched;
    let layer = 0;
    let steps = 0;
    walk: for (;;) {
      let depth: number; // optical depth to the next event
      for (;;) {
        const shifted = s1 << 9;
        const sum = (s0 + s3) | 0;
        const word = (((sum << 7) | (sum >>> 25)) + s0) | 0;
        s2 ^= s0;
        s3 ^= s1;
        s1 ^= s2;
        s0 ^= s3;
        s2 ^= shifted;
        s3 = (s3 << 11) | (s3 >>> 21);

        const strip = word & 255;
        const position = word >>> 8;
        depth = (position + 0.5) * scales[strip]!;
        if (position < insideBelow[strip]!) break;
        state[0] = s0;
        state[1] = s1;
        state[2] = s2;
        state[3] = s3;
        const second = nextWord(state);
        s0 = state[0]!;
        s1 = state[1]!;
        s2 = state[2]!;
        s3 = state[3]!;
        const height = second * unit + 0.5 + unit / 2;
        if (strip === 0) {
          depth = tailStart - Math.log(height);
          break;
        }
        if (heights[strip]! + height * (heights[strip + 1]! - heights[strip]!) < Math.exp(-depth)) break;
      }

      for (;;) {
        if (layer !== loaded) {
          if (loaded >= 0) tally[tallyPlaces.absorbed + loaded]! += absorbedHere;
          absorbedHere = 0;
          loaded = layer;
          topCm = topsCm[layer]!;
          bottomCm = bottomsCm[layer]!;
          freePathCm = 1 / interactionPerCm[layer]!;
          absorbedShare = absorbedShares[layer]!;
          g = Math.abs(anisotropies[layer]!) < isotropicBelow ? 0 : anisotropies[layer]!;
          hgOver = 1 - g * g;
          hgUnder = 1 - g;
          hgSlope = 2 * g;
          hgSum = 1 + g * g;
          hgScale = 0.5 / g;
        }
        let length = depth * freePathCm;
        let after = z + uz * length;
        const leaves = after >= bottomCm || after < topCm;
        if (leaves) {
          after = uz > 0 ? bottomCm : topCm;
          length = uz === 0 ? 0 : (after - z) / uz;
        }
        const upper = Math.min(z, after);
        if (upper < deepestCm) {
          const lower = Math.max(z, after);
          const bin = firstBins[(upper * depthCellsPerCm) | 0]!;
          if (binUppersCm[bin]! < lower) {
            state[0] = s0;
            state[1] = s1;
            state[2] = s2;
            state[3] = s3;
            scoreStep(plan, tally, state, bin, upper, lower, uz > 0, x, y, ux * length, uy * length, weight * length);
            s0 = state[0]!;
            s1 = state[1]!;
            s2 = state[2]!;
            s3 = state[3]!;
          }
        }
        x += ux * length;
        y += uy * length;
        z = after;
        if (!leaves) break;

        if (++steps > mostSteps) {
          abandoned += weight;
          break walk;
        }
        depth = Math.max(0, depth - length / freePathCm);
        const down = uz > 0;
        const next = down ? layer + 1 : layer - 1;
        const fromIndex = indices[layer + 1]!;
        const toIndex = indices[next + 1]!;
        if (fromIndex !== toIndex) {
          state[0] = s0;
          state[1] = s1;
          state[2] = s2;
          state[3] = s3;
          const choice = nextWord(state);
          s0 = state[0]!;
          s1 = state[1]!;
          s2 = state[2]!;
          s3 = state[3]!;
          if (choice * unit + 0.5 < fresnelReflectance(fromIndex, toIndex, down ? uz : -uz)) {
            uz = -uz;
            continue;
          }
          const ratio = fromIndex / toIndex;
          ux *= ratio;
          uy *= ratio;
          const sine2 = ux * ux + uy * uy;
          uz = sine2 < 1 ? Math.sqrt(1 - sine2) : 1e-12;
          if (!down) uz = -uz;
        }
        if (next < 0) {
          reflected += weight;
          break walk;
        }
        if (next === layerCount) {
          transmitted += weight;
          break walk;
        }
        layer = next;
      }

      const absorbed = weight * absorbedShare;
      absorbedHere += absorbed;
      weight -= absorbed;
      if (weight < rouletteBelow) {
        if (!(weight > 0)) break;
        state[0] = s0;
        state[1] = s1;
        state[2] = s2;
        state[3] = s3;
        const chance = nextWord(state);
        s0 = state[0]!;
        s1 = state[1]!;
        s2 = state[2]!;
        s3 = state[3]!;
        if (chance * unit + 0.5 >= 1 / rouletteFactor) {
          rouletteGain -= weight;
          break;
        }
        rouletteGain += weight * (rouletteFactor - 1);
        weight *= rouletteFactor;
      }
      if (++steps > mostSteps) {
        abandoned += weight;
        break;
      }

      let cosine: number; // of the scattering angle
      {
        const shifted = s1 << 9;
        const sum = (s0 + s3) | 0;
        const word = (((sum << 7) | (sum >>> 25)) + s0) | 0;
        s2 ^= s0;
        s3 ^= s1;
        s1 ^= s2;
        s0 ^= s3;
        s2 ^= shifted;
        s3 = (s3 << 11) | (s3 >>> 21);

        const draw = word * unit + 0.5 + unit / 2;
        if (g === 0) cosine = 2 * draw - 1;
        else {
          const term = hgOver / (hgUnder + hgSlope * draw);
          cosine = (hgSum - term * term) * hgScale;
        }
      }
      let a: number; // the azimuth: the middle of a sector turned by an angle within it, by series good to 3e-12
      let b: number;
      {
        const shifted = s1 << 9;
        const sum = (s0 + s3) | 0;
        const word = (((sum << 7) | (sum >>> 25)) + s0) | 0;
        s2 ^= s0;
        s3 ^= s1;
        s1 ^= s2;
        s0 ^= s3;
        s2 ^= shifted;
        s3 = (s3 << 11) | (s3 >>> 21);

        const sector = word & 255;
        const turn = ((word >>> 8) + 0.5 - 2 ** 23) * turnUnit;
        const square = turn * turn;
        const sinTurn = turn * (1 - square / 6);
        const cosTurn = 1 - square * (0.5 - square / 24);
        const sine = Math.sqrt(Math.max(0, 1 - cosine * cosine));
        a = sine * (cosines[sector]! * cosTurn - sines[sector]! * sinTurn);
        b = sine * (sines[sector]! * cosTurn + cosines[sector]! * sinTurn);
      }
      const sign = uz >= 0 ? 1 : -1;
      const p = -1 / (sign + uz);
      const q = ux * uy * p;
      const nx = a * (1 + sign * ux * ux * p) + b * q + cosine * ux;
      const ny = a * sign * q + b * (sign + uy * uy * p) + cosine * uy;
      uz = -a * sign * ux - b * uy + cosine * uz;
      ux = nx;
      uy = ny;
    }
  }
  if (loaded >= 0) tally[tallyPlaces.absorbed + loaded]! += absorbedHere;
  tally[tallyPlaces.diffuseReflectance] = reflected;
  tally[tallyPlaces.transmittance] = transmitted;
  tally[tallyPlaces.rouletteGain] = rouletteGain;
  tally[tallyPlaces.abandoned] = abandoned;
  return tally;
}

/** Adds the path of one step to the bins it crosses. Within a bin the whole path counts at a point drawn evenly along it, so that
 *  each ring gets its share on average. `along` is the step's sideways reach, `pathWeight` its length times its weight. */
function scoreStep(
  plan: WalkPlan,
  tally: Float64Array,
  state: Int32Array,
  firstBin: number,
  upper: number,
  lower: number,
  down: boolean,
  x: number,
  y: number,
  alongX: number,
  alongY: number,
  pathWeight: number,
): void {
  const { binUppersCm, binLowersCm, ringRadiiCm, ringCellsPerCm, firstRings } = plan;
  const rings = ringRadiiCm.length;
  for (let bin = firstBin; binUppersCm[bin]! < lower; bin++) {
    const from = Math.max(upper, binUppersCm[bin]!);
    const overlap = Math.min(lower, binLowersCm[bin]!) - from;
    if (!(overlap > 0)) continue;
    const below = (from + (nextWord(state) * 2 ** -32 + 0.5) * overlap - upper) / (lower - upper);
    const part = down ? below : 1 - below;
    const px = x + alongX * part;
    const py = y + alongY * part;
    const radius = Math.sqrt(px * px + py * py);
    let ring = rings;
    if (rings > 0 && radius < ringRadiiCm[rings - 1]!) {
      ring = firstRings[(radius * ringCellsPerCm) | 0]!;
      while (radius >= ringRadiiCm[ring]!) ring++;
    }
    const place = tallyPlaces.absorbed + plan.layerCount + bin * (rings + 1) + ring;
    tally[place]! += (pathWeight * overlap) / (lower - upper);
  }
}
