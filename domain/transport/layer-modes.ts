import { choleskyInPlace, symmetricEigenInPlace } from '../numeric/dense.js';
import type { OpticalLayer } from '../tissue/optical-layer.js';
import type { LayerOrdinates } from './ordinates.js';

/** The radiance of one layer split into decoupled modes along depth, in delta-M scaled optical depth tau.
 *  With v' = -w + alpha, w' = -kappa^2 v + beta for each mode, radiance over 2 pi n^2 down and up the rays is
 *  (sums v +- differences w)/2. Shape of `sums`, `differences`: count x count, row = ray, column = mode. */
export interface LayerModes extends DepthModes {
  readonly sums: Float64Array;
  readonly differences: Float64Array;
  /** Source of upward radiance over 2 pi n^2 along each ray from a downward beam of unit irradiance. */
  readonly backScattering: Float64Array;
}

/** What of a layer's modes is needed to follow them along depth once their amplitudes are known. */
export interface DepthModes {
  readonly count: number;
  /** Scaled optical thickness, and scaled extinction per um. */
  readonly opticalThickness: number;
  readonly extinctionPerUm: number;
  readonly kappas: Float64Array;
  /** Fluence rate of a mode per v; net downward flux of a mode per w. */
  readonly fluenceFactors: Float64Array;
  readonly fluxFactors: Float64Array;
  /** Source strengths alpha and beta for a downward beam of unit irradiance; for an upward beam alpha changes sign. */
  readonly alphas: Float64Array;
  readonly betas: Float64Array;
}

const faintest = 1e-11; // least optical thickness: rays trapped in a wholly clear layer need a loss to have an answer

/** Eigenmodes of one layer with the Henyey-Greenstein phase function, delta-M scaled at `moments` terms.
 *  The phase function is expanded in polynomials orthonormal on the layer's own ordinates (Legendre polynomials where the
 *  quadrature is exact), so scattering keeps energy exactly with any ordinates.
 *  @source Wiscombe1977 (delta-M); NakajimaTanaka1986 (symmetric eigenproblem); Stamnes1988 */
export function layerModes(layer: OpticalLayer, rays: LayerOrdinates, moments: number): LayerModes {
  const { count, cosines, weights } = rays;
  const extinction = Math.max(layer.absorptionPerCm + layer.scatteringPerCm, faintest / (layer.thicknessUm * 1e-4));
  const albedo = extinction > 0 ? layer.scatteringPerCm / extinction : 0;
  const g = layer.anisotropy;
  const forward = g ** moments;
  const scaledAlbedo = (albedo * (1 - forward)) / (1 - albedo * forward);
  const extinctionPerUm = extinction * (1 - albedo * forward) * 1e-4;
  const index2 = layer.refractiveIndex ** 2;

  const odd = new Float64Array(count * count);
  const even = new Float64Array(count * count);
  const oddSource = new Float64Array(count);
  const evenSource = new Float64Array(count);
  for (let i = 0; i < count; i++) {
    odd[i * count + i] = 1 / cosines[i]!;
    even[i * count + i] = 1 / cosines[i]!;
  }
  let below = new Float64Array(count);
  let current = new Float64Array(count);
  let total = 0;
  for (let i = 0; i < count; i++) total += weights[i]!;
  current.fill(1 / Math.sqrt(total));
  let belowAtOne = 0;
  let atOne = current[0]!;
  let coupling = 0;
  let power = 1; // g^l
  for (let l = 0; l < moments; l++) {
    const strength = (scaledAlbedo * (power - forward)) / (1 - forward);
    const matrix = l % 2 === 0 ? even : odd;
    const source = l % 2 === 0 ? evenSource : oddSource;
    for (let i = 0; i < count; i++) {
      const scale = Math.sqrt(weights[i]! / cosines[i]!);
      const left = strength * scale * current[i]!;
      source[i]! += (left * atOne) / index2;
      for (let j = 0; j < count; j++) matrix[i * count + j]! -= left * Math.sqrt(weights[j]! / cosines[j]!) * current[j]!;
    }
    power *= g;
    let norm2 = 0;
    for (let i = 0; i < count; i++) {
      below[i] = cosines[i]! * current[i]! - coupling * below[i]!;
      norm2 += weights[i]! * below[i]! * below[i]!;
    }
    const nextCoupling = Math.sqrt(norm2);
    for (let i = 0; i < count; i++) below[i]! /= nextCoupling;
    const nextAtOne = (atOne - coupling * belowAtOne) / nextCoupling;
    [below, current] = [current, below];
    belowAtOne = atOne;
    atOne = nextAtOne;
    coupling = nextCoupling;
  }

  choleskyInPlace(odd, count);
  const product = new Float64Array(count * count); // G^T even G
  const half = new Float64Array(count * count);
  for (let i = 0; i < count; i++) {
    for (let j = 0; j < count; j++) {
      let sum = 0;
      for (let k = j; k < count; k++) sum += even[i * count + k]! * odd[k * count + j]!;
      half[i * count + j] = sum;
    }
  }
  for (let i = 0; i < count; i++) {
    for (let j = 0; j <= i; j++) {
      let sum = 0;
      for (let k = i; k < count; k++) sum += odd[k * count + i]! * half[k * count + j]!;
      product[i * count + j] = sum;
      product[j * count + i] = sum;
    }
  }
  const kappas = new Float64Array(count);
  symmetricEigenInPlace(product, count, kappas, new Float64Array(count));

  const sums = new Float64Array(count * count);
  const differences = new Float64Array(count * count);
  const fluenceFactors = new Float64Array(count);
  const fluxFactors = new Float64Array(count);
  const alphas = new Float64Array(count);
  const betas = new Float64Array(count);
  const inverse = new Float64Array(count); // G^-T u
  for (let k = 0; k < count; k++) {
    kappas[k] = Math.sqrt(Math.max(0, kappas[k]!));
    for (let i = count - 1; i >= 0; i--) {
      let sum = product[i * count + k]!;
      for (let j = i + 1; j < count; j++) sum -= odd[j * count + i]! * inverse[j]!;
      inverse[i] = sum / odd[i * count + i]!;
    }
    for (let i = 0; i < count; i++) {
      let forwardSum = 0;
      for (let j = 0; j <= i; j++) forwardSum += odd[i * count + j]! * product[j * count + k]!;
      const scale = 1 / Math.sqrt(weights[i]! * cosines[i]!);
      sums[i * count + k] = forwardSum * scale;
      differences[i * count + k] = inverse[i]! * scale;
      fluenceFactors[k]! += index2 * weights[i]! * forwardSum * scale;
      fluxFactors[k]! += index2 * weights[i]! * cosines[i]! * inverse[i]! * scale;
      betas[k]! += forwardSum * evenSource[i]!;
      alphas[k]! += inverse[i]! * oddSource[i]!;
    }
  }
  return {
    count,
    opticalThickness: extinctionPerUm * layer.thicknessUm,
    extinctionPerUm,
    kappas,
    sums,
    differences,
    backScattering: cosines.map((cosine, i) => (evenSource[i]! - oddSource[i]!) / (2 * Math.sqrt(weights[i]! / cosine))),
    fluenceFactors,
    fluxFactors,
    alphas,
    betas,
  };
}
