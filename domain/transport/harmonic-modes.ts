import { solveDenseInPlace, symmetricEigenInPlace } from '../numeric/dense.js';
import type { OpticalLayer } from '../tissue/optical-layer.js';
import { axialCoupling, type Harmonics, harmonicPosition, lateralCoupling, raiseDegree } from './harmonics.js';

/** A layer scaled for harmonics up to a degree N: the forward peak g^(N+1) counts as unscattered. Per cm. */
export interface ScaledLayer {
  readonly thicknessCm: number;
  readonly index2: number;
  readonly absorption: number;
  readonly scattering: number;
  readonly extinction: number;
  /** Scattering within the forward peak, the peak's share of all scattering, and -ln g; for g under 0.1 no peak is followed. */
  readonly peakScattering: number;
  readonly peak: number;
  readonly peakRate: number;
  /** Moments of the scaled phase function, degree 0 to N. */
  readonly moments: Float64Array;
}

/** Delta-M scaling. @source Wiscombe1977 */
export function scaleLayer(layer: OpticalLayer, degree: number): ScaledLayer {
  const g = layer.anisotropy;
  const forward = g ** (degree + 1);
  const scattering = layer.scatteringPerCm * (1 - forward);
  return {
    thicknessCm: layer.thicknessUm * 1e-4,
    index2: layer.refractiveIndex ** 2,
    absorption: layer.absorptionPerCm,
    scattering,
    extinction: layer.absorptionPerCm + scattering,
    peakScattering: g > 0.1 ? layer.scatteringPerCm * forward : 0,
    peak: forward,
    peakRate: -Math.log(Math.max(g, 0.1)),
    moments: Float64Array.from({ length: degree + 1 }, (_, l) => (g ** l - forward) / (1 - forward)),
  };
}

/** Modes exp(i k x - kappa z) of a layer at one lateral frequency, and its answer to the beam exp(-extinction z).
 *  Shape: `vectors` holds mode after mode, one entry per harmonic; the upward mode has its odd entries turned. */
export interface HarmonicModes {
  readonly kappas: Float64Array;
  readonly vectors: Float64Array;
  readonly beamAnswer: Float64Array;
  /** What is left of each mode across the whole layer. */
  readonly fades: Float64Array;
}

/** Fills and gives the modes of one layer at a lateral frequency; the arrays are reused by the next call. */
export type ModeSolver = (k: number) => HarmonicModes;

const rotationRoom = 5e6; // 1e-9 over double precision: k nu to the power of the degree may grow so far and leave noise under 1e-4

/** Modes of a layer by rotating those of the plane problem into the complex direction (-i k nu, 0, kappa nu),
 *  kappa^2 = k^2 + 1/nu^2. Absorption is lifted where the diffusion length exceeds so many 1/k that the modes would lie too
 *  close together for double precision: light of that frequency does not live as long.
 *  @source Panasyuk2006 (rotated reference frames); Liemert2012 */
export function modeSolver(harmonics: Harmonics, layer: ScaledLayer): ModeSolver {
  const { degree, count, modeCount } = harmonics;
  const greatestTilt = rotationRoom ** (1 / degree);
  const transport = layer.scattering * (1 - layer.moments[1]!);
  const modes: HarmonicModes = {
    kappas: new Float64Array(modeCount),
    vectors: new Float64Array(modeCount * count),
    beamAnswer: new Float64Array(count),
    fades: new Float64Array(modeCount),
  };
  const sigma = new Float64Array(degree + 1);
  const equations = new Float64Array(count * count);
  const turned = Array.from({ length: degree }, () => new Float64Array(count));
  let plane: PlaneMode[] = [];
  return (k) => {
    const least = (-transport + Math.sqrt(transport * transport + (4 / 3) * (k / greatestTilt) ** 2)) / 2;
    const absorption = Math.max(layer.absorption, least, 1e-9);
    if (absorption !== sigma[0]) {
      for (let l = 0; l <= degree; l++) sigma[l] = absorption + layer.scattering * (1 - layer.moments[l]!);
      plane = planeModes(sigma);
    }
    for (const [at, mode] of plane.entries()) {
      const kappa = Math.sqrt(k * k + 1 / mode.nu ** 2);
      modes.kappas[at] = kappa;
      modes.fades[at] = Math.exp(-kappa * layer.thicknessCm);
      rotate(harmonics, mode, kappa * mode.nu, k * mode.nu, turned, modes.vectors, at * count);
    }
    answerToBeam(harmonics, layer, sigma, modes, k, equations);
    return modes;
  };
}

/** A mode of the plane problem: azimuthal order, attenuation length, amplitude at each degree. */
interface PlaneMode {
  readonly order: number;
  readonly nu: number;
  readonly amplitudes: Float64Array;
}

/** Plane modes from nu Sigma b = Z b: per order, nu^2 are the eigenvalues of a symmetric problem in the odd degrees. */
function planeModes(sigma: Float64Array): PlaneMode[] {
  const degree = sigma.length - 1;
  const modes: PlaneMode[] = [];
  for (let order = 0; order < degree; order++) {
    const size = Math.floor((degree - order + 1) / 2);
    const matrix = new Float64Array(size * size);
    for (let i = 0; i < size; i++) {
      const l = order + 1 + 2 * i;
      const lower = axialCoupling(l, order) ** 2 / sigma[l - 1]!;
      const upper = l < degree ? axialCoupling(l + 1, order) ** 2 / sigma[l + 1]! : 0;
      matrix[i * size + i] = (lower + upper) / sigma[l]!;
      if (i + 1 < size) {
        const next = (axialCoupling(l + 1, order) * axialCoupling(l + 2, order)) / sigma[l + 1]!;
        matrix[i * size + i + 1] = matrix[(i + 1) * size + i] = next / Math.sqrt(sigma[l]! * sigma[l + 2]!);
      }
    }
    const values = new Float64Array(size);
    symmetricEigenInPlace(matrix, size, values, new Float64Array(size));
    for (let k = 0; k < size; k++) {
      const nu = Math.sqrt(values[k]!);
      const amplitudes = new Float64Array(degree + 1);
      for (let i = 0; i < size; i++) {
        const l = order + 1 + 2 * i;
        amplitudes[l] = matrix[i * size + k]! / Math.sqrt(sigma[l]!);
      }
      for (let l = order; l <= degree; l += 2) {
        const lower = l > order ? axialCoupling(l, order) * amplitudes[l - 1]! : 0;
        const upper = l < degree ? axialCoupling(l + 1, order) * amplitudes[l + 1]! : 0;
        amplitudes[l] = (lower + upper) / (nu * sigma[l]!);
      }
      modes.push({ order, nu, amplitudes });
    }
  }
  return modes;
}

/** Writes a plane mode, rotated by cosine `cosine` and sine -i `sine`, at unit length. `turned` holds, for each order about the
 *  turned axis, its harmonics in terms of the upright ones. */
function rotate(
  harmonics: Harmonics,
  { order, amplitudes }: PlaneMode,
  cosine: number,
  sine: number,
  turned: readonly Float64Array[],
  result: Float64Array,
  offset: number,
): void {
  const { degree, count, degrees } = harmonics;
  turned[0]![0] = 1;
  for (let m = 0; ; m++) {
    const current = turned[m]!;
    const last = m === order ? degree : m + 2;
    for (let l = m; l < last; l++) raiseDegree(harmonics, current, l, cosine, -sine, current, 1 / axialCoupling(l + 1, m));
    if (m === order) break;
    const above = turned[m + 1]!;
    const to = harmonicPosition(m + 1, 0);
    raiseDegree(harmonics, current, m, -sine, cosine, above, 1 / lateralCoupling(m, m, 1));
    if (m > 0) {
      const ratio = lateralCoupling(m, m, -1) / lateralCoupling(m, m, 1);
      for (let i = 0; i <= m + 1; i++) above[to + i]! -= ratio * turned[m - 1]![to + i]!;
    }
  }
  const own = turned[order]!;
  let norm2 = 0;
  for (let i = 0; i < count; i++) {
    const l = degrees[i]!;
    const value = l >= order ? amplitudes[l]! * own[i]! : 0;
    result[offset + i] = value;
    norm2 += value * value;
  }
  const scale = 1 / Math.sqrt(norm2);
  for (let i = 0; i < count; i++) result[offset + i]! *= scale;
}

/** Solves (Sigma + k X - extinction Z) f = source for a beam of unit irradiance. */
function answerToBeam(
  { degree, count, degrees, orders }: Harmonics,
  layer: ScaledLayer,
  sigma: Float64Array,
  modes: HarmonicModes,
  k: number,
  equations: Float64Array,
): void {
  let decay = layer.extinction;
  for (const kappa of modes.kappas) if (Math.abs(decay - kappa) < 1e-6 * kappa) decay = kappa * (1 + 1e-6); // resonance
  equations.fill(0);
  for (let i = 0; i < count; i++) {
    const l = degrees[i]!;
    const m = orders[i]!;
    equations[i * count + i] = sigma[l]!;
    if (l === degree) continue;
    const above = harmonicPosition(l + 1, m);
    const axial = -decay * axialCoupling(l + 1, m);
    equations[i * count + above] = axial;
    equations[above * count + i] = axial;
    const outer = above + 1;
    const side = k * lateralCoupling(l, m, 1);
    equations[outer * count + i] = side;
    equations[i * count + outer] = -side;
    if (m > 0) {
      const inner = above - 1;
      const other = k * lateralCoupling(l, m, -1);
      equations[inner * count + i] = other;
      equations[i * count + inner] = -other;
    }
  }
  const answer = modes.beamAnswer;
  answer.fill(0);
  for (let l = 0; l <= degree; l++) {
    answer[harmonicPosition(l, 0)] = (layer.scattering / layer.index2) * layer.moments[l]! * Math.sqrt((2 * l + 1) / 2);
  }
  solveDenseInPlace(equations, answer);
}
