import { assertWithin, DomainError } from '../quantities/errors.js';
import type { OpticalLayer } from '../tissue/optical-layer.js';
import { type BeamProfile, checkBeam, flatWidthMm } from './beam-profile.js';
import { solveBroadBeam } from './broad-beam.js';
import { type SpotSpread, type SpreadPoints, solveSpotSpread } from './spot-spread.js';

export interface LightOptions {
  readonly accuracy: 'ranking' | 'fine';
}

/** Light in a stack of layers under a beam at normal incidence from air. A null spot is a beam of unlimited width. */
export interface LightSolution {
  /** Reflection of the arriving beam at the surface itself. */
  readonly specularReflectance: number;
  /** All other light that comes back out; with `transmittance` and `absorbedFraction` the four sum to 1. */
  readonly diffuseReflectance: number;
  readonly transmittance: number;
  readonly absorbedFraction: number;
  /** Fluence rate on the beam axis at each depth over the incident irradiance on the axis.
   *  Throws: out-of-range for a depth outside the stack; as `checkBeam`. */
  fluenceRatios(spot: BeamProfile | null, depthsUm: ArrayLike<number>): Float64Array;
  /** Mean over each cell between consecutive ascending faces of absorbed power per volume on the axis, over the incident
   *  irradiance there, per cm. Exact in energy for the broad beam. Shape: one fewer than faces.
   *  Throws: out-of-range for a face outside the stack or faces that do not ascend; as `checkBeam`. */
  absorbedPerCm(spot: BeamProfile | null, facesUm: ArrayLike<number>): Float64Array;
  /** Depth at which fluence on the axis has fallen to 1/e of its greatest value; null when it does not within the stack. */
  penetrationDepthMm(spot: BeamProfile | null): number | null;
}

const ordinatesPerRegion = { ranking: 5, fine: 16 } as const; // directions each side of the critical angle

/** Degree of harmonics in the ranking setting: the narrower the beam, the finer the detail of scattering that shows. */
function degreeFor(widthMm: number): number {
  if (widthMm >= 2) return 3;
  return widthMm >= 0.4 ? 5 : 7;
}

const rounding = 1e-12; // a depth summed in another order than the layers may pass the bottom by this much

/** Solves light transport: broad beam by discrete ordinates, finite spots by their ratio to it.
 *  Throws: out-of-range for a faulty layer. */
export function solveLight(layers: readonly OpticalLayer[], options: LightOptions): LightSolution {
  checkLayers(layers);
  const broad = solveBroadBeam(layers, ordinatesPerRegion[options.accuracy]);
  const spreads = new Map<number, SpotSpread>();
  const tops: number[] = [0];
  for (const layer of layers) tops.push(tops[tops.length - 1]! + layer.thicknessUm);
  const bottom = tops[layers.length]!;

  const place = (depthsUm: ArrayLike<number>): SpreadPoints => {
    const where = new Int32Array(depthsUm.length);
    const below = new Float64Array(depthsUm.length);
    for (let i = 0; i < depthsUm.length; i++) {
      const asked = depthsUm[i]!;
      assertWithin('depth in um', asked, 0, bottom * (1 + rounding));
      const depth = Math.min(asked, bottom);
      let j = 0;
      while (j + 1 < layers.length && depth >= tops[j + 1]!) j++;
      where[i] = j;
      below[i] = depth - tops[j]!;
    }
    return { layers: where, belowTopsUm: below };
  };
  const spreadBy = (spot: BeamProfile | null, points: SpreadPoints, broadValues: Float64Array): Float64Array => {
    if (spot === null) return broadValues.slice();
    checkBeam(spot);
    const degree = options.accuracy === 'fine' ? 7 : degreeFor(flatWidthMm(spot));
    const spread = spreads.get(degree) ?? solveSpotSpread(layers, degree);
    spreads.set(degree, spread);
    return spread.ratios(spot, points).map((ratio, i) => ratio * broadValues[i]!);
  };

  const depthQuestion = remembered((depthsUm) => {
    const points = place(depthsUm);
    return { points, values: Float64Array.from(points.layers, (j, i) => broad.fluence(j, points.belowTopsUm[i]!)) };
  });
  const fluenceRatios = (spot: BeamProfile | null, depthsUm: ArrayLike<number>): Float64Array => {
    const { points, values } = depthQuestion(depthsUm);
    return spreadBy(spot, points, values);
  };

  const cellQuestion = remembered((facesUm) => {
    const faces = place(facesUm);
    const cells = Math.max(0, facesUm.length - 1);
    const means = new Float64Array(cells);
    const middles = new Float64Array(cells);
    for (let i = 0, above = 0; i <= cells && facesUm.length > 0; i++) {
      const flux = broad.flux(faces.layers[i]!, faces.belowTopsUm[i]!);
      if (i > 0) {
        const width = facesUm[i]! - facesUm[i - 1]!;
        if (!(width > 0))
          throw new DomainError('out-of-range', 'cell faces must ascend', { quantity: 'facesUm', value: facesUm[i]! });
        means[i - 1] = Math.max(0, (above - flux) / (width * 1e-4));
        middles[i - 1] = facesUm[i - 1]! + width / 2;
      }
      above = flux;
    }
    return { points: place(middles), values: means };
  });
  const absorbedPerCm = (spot: BeamProfile | null, facesUm: ArrayLike<number>): Float64Array => {
    const { points, values } = cellQuestion(facesUm);
    return spreadBy(spot, points, values);
  };

  const penetrationDepthMm = (spot: BeamProfile | null): number | null => {
    const depths: number[] = [];
    for (let depth = 0; depth < bottom; depth = depth * 1.03 + 1) depths.push(depth);
    depths.push(bottom);
    const fluences = fluenceRatios(spot, depths);
    let peak = 0;
    for (let i = 1; i < fluences.length; i++) if (fluences[i]! > fluences[peak]!) peak = i;
    const wanted = fluences[peak]! / Math.E;
    for (let i = peak + 1; i < fluences.length; i++) {
      if (fluences[i]! <= wanted && fluences[i]! > 0) {
        const part = Math.log(fluences[i - 1]! / wanted) / Math.log(fluences[i - 1]! / fluences[i]!);
        return (depths[i - 1]! + part * (depths[i]! - depths[i - 1]!)) / 1000;
      }
    }
    return null;
  };
  const { specularReflectance } = broad;
  const diffuseReflectance = Math.max(0, broad.diffuseReflectance);
  const transmittance = Math.max(0, broad.transmittance);
  const absorbedFraction = Math.max(0, 1 - specularReflectance - diffuseReflectance - transmittance);
  return {
    specularReflectance,
    diffuseReflectance,
    transmittance,
    absorbedFraction,
    fluenceRatios,
    absorbedPerCm,
    penetrationDepthMm,
  };
}

/** Keeps the last answer, so that every spot asked for at the same depths shares the work on them. */
function remembered<T>(answer: (depthsUm: ArrayLike<number>) => T): (depthsUm: ArrayLike<number>) => T {
  let asked = new Float64Array(0);
  let kept: T | undefined;
  return (depthsUm) => {
    let same = kept !== undefined && asked.length === depthsUm.length;
    for (let i = 0; same && i < asked.length; i++) same = asked[i] === depthsUm[i];
    if (!same) {
      kept = answer(depthsUm);
      asked = Float64Array.from(depthsUm);
    }
    return kept as T;
  };
}

/** Refuses layers that transport cannot follow. Throws: out-of-range. */
function checkLayers(layers: readonly OpticalLayer[]): void {
  assertWithin('number of layers', layers.length, 1, 32);
  for (const layer of layers) {
    assertWithin(`thickness of ${layer.name} in um`, layer.thicknessUm, 1e-3, 1e9);
    assertWithin(`absorption of ${layer.name} per cm`, layer.absorptionPerCm, 0, 1e7);
    assertWithin(`scattering of ${layer.name} per cm`, layer.scatteringPerCm, 0, 1e7);
    assertWithin(`anisotropy of ${layer.name}`, layer.anisotropy, -0.999, 0.999);
    assertWithin(`refractive index of ${layer.name}`, layer.refractiveIndex, 1, 2);
  }
}
