import type { OpticalLayer } from '../tissue/optical-layer.js';
import {
  axialCoupling,
  degree,
  degrees,
  harmonicCount,
  harmonicPosition,
  lateralCoupling,
  modeCount,
  orders,
  raiseDegree,
} from './harmonics.js';

/** A layer scaled for third-degree harmonics: the forward peak g^4 counts as unscattered. Per cm. */
export interface ScaledLayer {
  readonly thicknessCm: number;
  readonly index2: number;
  readonly absorption: number;
  readonly scattering: number;
  readonly extinction: number;
  /** Scattering within the forward peak, its share g^4 of all scattering, and -ln g; no peak is followed for g under 0.1. */
  readonly peakScattering: number;
  readonly peak: number;
  readonly peakRate: number;
  /** Moments of the scaled phase function, degree 0 to 3. */
  readonly moments: Float64Array;
}

/** Delta-M scaling at degree 3. @source Wiscombe1977 */
export function scaleLayer(layer: OpticalLayer): ScaledLayer {
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
 *  Shape: `vectors` holds mode after mode, harmonicCount entries each; the upward mode has its odd entries turned. */
export interface HarmonicModes {
  readonly kappas: Float64Array;
  readonly vectors: Float64Array;
  readonly beamAnswer: Float64Array;
  /** What is left of each mode across the whole layer. */
  readonly fades: Float64Array;
}

const greatestTilt = 3000; // k nu above which modes would lie too close together for double precision (error about 1e-16 of its cube)

export function emptyModes(): HarmonicModes {
  return {
    kappas: new Float64Array(modeCount),
    vectors: new Float64Array(modeCount * harmonicCount),
    beamAnswer: new Float64Array(harmonicCount),
    fades: new Float64Array(modeCount),
  };
}

const sigma = new Float64Array(degree + 1);
const plane = new Float64Array(degree + 1);

/** Fills `modes` for one layer and lateral frequency, rotating those of the plane problem into the complex direction
 *  (-i k nu, 0, kappa nu), kappa^2 = k^2 + 1/nu^2.
 *  Absorption is lifted where the diffusion length exceeds 3000/k: light of that frequency does not live as long.
 *  @source Panasyuk2006 (rotated reference frames); Liemert2012 */
export function fillModes(modes: HarmonicModes, layer: ScaledLayer, k: number): void {
  const transport = layer.scattering * (1 - layer.moments[1]!);
  const least = (-transport + Math.sqrt(transport * transport + (4 / 3) * (k / greatestTilt) ** 2)) / 2;
  const absorption = Math.max(layer.absorption, least, 1e-9);
  for (let l = 0; l <= degree; l++) sigma[l] = absorption + layer.scattering * (1 - layer.moments[l]!);

  // order 0: nu^2 are the eigenvalues of a 2 x 2 problem in degrees 1 and 3
  const a1 = axialCoupling(1, 0);
  const a2 = axialCoupling(2, 0);
  const a3 = axialCoupling(3, 0);
  const m11 = (a1 * a1) / sigma[0]! + (a2 * a2) / sigma[2]!;
  const m13 = (a2 * a3) / sigma[2]!;
  const m33 = (a3 * a3) / sigma[2]!;
  const p = m11 / sigma[1]!;
  const q = m33 / sigma[3]!;
  const cross = (m13 * m13) / (sigma[1]! * sigma[3]!);
  const root = Math.sqrt((p - q) ** 2 + 4 * cross);
  const large = (p + q + root) / 2;
  for (const nu2 of [large, (p * q - cross) / large]) {
    const nu = Math.sqrt(nu2);
    const first = nu2 === large ? large - q : m13 / sigma[1]!;
    const third = nu2 === large ? m13 / sigma[3]! : nu2 - p;
    plane[1] = first;
    plane[3] = third;
    plane[0] = (a1 * first) / (nu * sigma[0]!);
    plane[2] = (a2 * first + a3 * third) / (nu * sigma[2]!);
    keepMode(modes, layer, nu2 === large ? 0 : 1, 0, nu, k);
  }
  // orders 1 and 2: one mode each
  const b2 = axialCoupling(2, 1);
  const b3 = axialCoupling(3, 1);
  const nu1 = Math.sqrt(((b2 * b2) / sigma[1]! + (b3 * b3) / sigma[3]!) / sigma[2]!);
  plane[1] = b2 / (nu1 * sigma[1]!);
  plane[2] = 1;
  plane[3] = b3 / (nu1 * sigma[3]!);
  keepMode(modes, layer, 2, 1, nu1, k);
  const c3 = axialCoupling(3, 2);
  const nu2 = c3 / Math.sqrt(sigma[2]! * sigma[3]!);
  plane[2] = c3 / (nu2 * sigma[2]!);
  plane[3] = 1;
  keepMode(modes, layer, 3, 2, nu2, k);
  answerToBeam(modes, layer, k);
}

/** Puts the plane mode in place `at`, rotated to frequency k. */
function keepMode(modes: HarmonicModes, layer: ScaledLayer, at: number, order: number, nu: number, k: number): void {
  const kappa = Math.sqrt(k * k + 1 / (nu * nu));
  modes.kappas[at] = kappa;
  modes.fades[at] = Math.exp(-kappa * layer.thicknessCm);
  rotate(order, kappa * nu, k * nu, modes.vectors, at * harmonicCount);
}

const turned = Array.from({ length: degree }, () => new Float64Array(harmonicCount));

/** Writes the plane mode of azimuthal order `order`, rotated by cosine `cosine` and sine -i `sine`, at unit length. */
function rotate(order: number, cosine: number, sine: number, result: Float64Array, offset: number): void {
  turned[0]![0] = 1;
  for (let m = 0; ; m++) {
    // raise degree within the same order about the turned axis
    const last = m === order ? degree : m + 2;
    for (let l = m; l < last; l++) raiseDegree(turned[m]!, l, cosine, -sine, turned[m]!, 1 / axialCoupling(l + 1, m));
    if (m === order) break;
    const to = harmonicPosition(m + 1, 0);
    raiseDegree(turned[m]!, m, -sine, cosine, turned[m + 1]!, 1 / lateralCoupling(m, m, 1));
    if (m > 0) {
      const ratio = lateralCoupling(m, m, -1) / lateralCoupling(m, m, 1);
      for (let i = 0; i <= m + 1; i++) turned[m + 1]![to + i]! -= ratio * turned[m - 1]![to + i]!;
    }
  }
  let norm2 = 0;
  for (let i = 0; i < harmonicCount; i++) {
    const l = degrees[i]!;
    const value = l >= order ? plane[l]! * turned[order]![i]! : 0;
    result[offset + i] = value;
    norm2 += value * value;
  }
  const scale = 1 / Math.sqrt(norm2);
  for (let i = 0; i < harmonicCount; i++) result[offset + i]! *= scale;
}

const equations = new Float64Array(harmonicCount * harmonicCount);

/** Solves (Sigma + k X - extinction Z) f = source for a beam of unit irradiance. */
function answerToBeam(modes: HarmonicModes, layer: ScaledLayer, k: number): void {
  let decay = layer.extinction;
  for (const kappa of modes.kappas) if (Math.abs(decay - kappa) < 1e-6 * kappa) decay = kappa * (1 + 1e-6); // resonance
  equations.fill(0);
  for (let i = 0; i < harmonicCount; i++) {
    const l = degrees[i]!;
    const m = orders[i]!;
    equations[i * harmonicCount + i] = sigma[l]!;
    if (l === degree) continue;
    const above = harmonicPosition(l + 1, m);
    const axial = -decay * axialCoupling(l + 1, m);
    equations[i * harmonicCount + above] = axial;
    equations[above * harmonicCount + i] = axial;
    const outer = above + 1;
    const side = k * lateralCoupling(l, m, 1);
    equations[outer * harmonicCount + i] = side;
    equations[i * harmonicCount + outer] = -side;
    if (m > 0) {
      const inner = above - 1;
      const other = k * lateralCoupling(l, m, -1);
      equations[inner * harmonicCount + i] = other;
      equations[i * harmonicCount + inner] = -other;
    }
  }
  const answer = modes.beamAnswer;
  answer.fill(0);
  for (let l = 0; l <= degree; l++) {
    answer[harmonicPosition(l, 0)] = (layer.scattering / layer.index2) * layer.moments[l]! * Math.sqrt((2 * l + 1) / 2);
  }
  solveSmall(equations, answer);
}

function solveSmall(a: Float64Array, x: Float64Array): void {
  const n = x.length;
  for (let i = 0; i < n; i++) {
    let pivot = i;
    for (let r = i + 1; r < n; r++) if (Math.abs(a[r * n + i]!) > Math.abs(a[pivot * n + i]!)) pivot = r;
    if (pivot !== i) {
      for (let c = i; c < n; c++) {
        const kept = a[i * n + c]!;
        a[i * n + c] = a[pivot * n + c]!;
        a[pivot * n + c] = kept;
      }
      const kept = x[i]!;
      x[i] = x[pivot]!;
      x[pivot] = kept;
    }
    for (let r = i + 1; r < n; r++) {
      const factor = a[r * n + i]! / a[i * n + i]!;
      if (factor === 0) continue;
      for (let c = i + 1; c < n; c++) a[r * n + c]! -= factor * a[i * n + c]!;
      x[r]! -= factor * x[i]!;
    }
  }
  for (let i = n - 1; i >= 0; i--) {
    let sum = x[i]!;
    for (let c = i + 1; c < n; c++) sum -= a[i * n + c]! * x[c]!;
    x[i] = sum / a[i * n + i]!;
  }
}
