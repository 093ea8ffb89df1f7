import type { Spot } from '../beam/spot.js';
import { gaussLegendre } from '../numeric/quadrature.js';
import { besselJ0 } from '../numeric/special.js';
import { assertWithin, DomainError } from '../quantities/errors.js';

/** A round beam known by its measured irradiance, relative to the axis, at ascending radii; zero beyond the last. */
export interface MeasuredProfile {
  readonly shape: 'measured';
  readonly radiiMm: readonly number[];
  readonly relativeIrradiances: readonly number[];
}

/** Every cross-section that light transport can follow. */
export type BeamProfile = Spot | MeasuredProfile;

/** Refuses a beam without a size. Throws: out-of-range; contradiction for a measured table that does not start on the axis at 1,
 *  does not ascend, or has columns of unlike length. */
export function checkBeam(profile: BeamProfile): void {
  if (profile.shape === 'measured') {
    const { radiiMm, relativeIrradiances } = profile;
    const ascends = radiiMm.every((radius, i) => (i === 0 ? radius === 0 : radius > radiiMm[i - 1]!));
    if (radiiMm.length < 2 || radiiMm.length !== relativeIrradiances.length || !ascends || relativeIrradiances[0] !== 1) {
      const fields = ['radiiMm', 'relativeIrradiances'];
      throw new DomainError(
        'contradiction',
        'a measured beam starts on its axis at relative irradiance 1 and ascends in radius',
        {
          fields,
        },
      );
    }
    for (const irradiance of relativeIrradiances) assertWithin('relative irradiance', irradiance, 0, 1e3);
  }
  for (const sizeMm of sizesMm(profile)) assertWithin('spot size in mm', sizeMm, 1e-3, 1e3); // a wavelength to a meter
}

function sizesMm(profile: BeamProfile): number[] {
  switch (profile.shape) {
    case 'circle':
    case 'gaussian':
      return [profile.diameterMm];
    case 'square':
      return [profile.widthMm];
    case 'rectangle':
      return [profile.widthMm, profile.heightMm];
    case 'measured':
      return [profile.radiiMm[profile.radiiMm.length - 1]!];
  }
}

/** How a beam's irradiance is spread over spatial frequency, as its center sees it. */
export interface BeamTransform {
  /** C(k), k per cm: integral below k of k times the two-dimensional transform; 0 at k = 0, 1 in the limit. */
  readonly powerBelow: (kPerCm: number) => number;
  /** Greatest distance from the axis that matters, in cm. */
  readonly reachCm: number;
}

/** Least width of the flat beam that spreads about alike. A Gaussian of 1/e^2 diameter d counts as d/sqrt(2): the flat circle of
 *  its power and peak irradiance; a measured profile counts as wide as it is at half its irradiance on the axis. */
export function flatWidthMm(beam: BeamProfile): number {
  switch (beam.shape) {
    case 'circle':
      return beam.diameterMm;
    case 'gaussian':
      return beam.diameterMm * Math.SQRT1_2;
    case 'square':
      return beam.widthMm;
    case 'rectangle':
      return Math.min(beam.widthMm, beam.heightMm);
    case 'measured': {
      const half = beam.relativeIrradiances.findIndex((irradiance) => irradiance < beam.relativeIrradiances[0]! / 2);
      return 2 * beam.radiiMm[half < 0 ? beam.radiiMm.length - 1 : half]!;
    }
  }
}

const azimuths = 24; // Gauss points over one eighth of a rectangle; 1e-6 for sides up to 1:4 at k a = 100

/** Transform of a beam on its axis. A rectangle is the mean over azimuth of round beams that reach to its edge;
 *  a measured profile is a sum of round beams. Diameters of Gaussian beams are 1/e^2.
 *  @source Bracewell2000 chapter 13 (Hankel pairs of disk and Gaussian) */
export function beamTransform(profile: BeamProfile): BeamTransform {
  switch (profile.shape) {
    case 'circle': {
      const radius = profile.diameterMm / 20;
      return { powerBelow: (k) => 1 - besselJ0(k * radius), reachCm: radius };
    }
    case 'gaussian': {
      const radius = profile.diameterMm / 20;
      return { powerBelow: (k) => -Math.expm1((-k * k * radius * radius) / 8), reachCm: radius };
    }
    case 'square':
      return rectangleTransform(profile.widthMm / 20, profile.widthMm / 20);
    case 'rectangle':
      return rectangleTransform(profile.widthMm / 20, profile.heightMm / 20);
    case 'measured':
      return measuredTransform(profile);
  }
}

function rectangleTransform(halfWidth: number, halfHeight: number): BeamTransform {
  const corner = Math.atan2(halfHeight, halfWidth);
  const { nodes, weights } = gaussLegendre(azimuths);
  const radii = new Float64Array(2 * azimuths);
  const shares = new Float64Array(2 * azimuths);
  for (let i = 0; i < azimuths; i++) {
    const x = (nodes[i]! + 1) / 2;
    radii[i] = halfWidth / Math.cos(x * corner);
    shares[i] = (weights[i]! * corner) / Math.PI;
    radii[azimuths + i] = halfHeight / Math.cos(x * (Math.PI / 2 - corner));
    shares[azimuths + i] = (weights[i]! * (Math.PI / 2 - corner)) / Math.PI;
  }
  return {
    powerBelow: (k) => {
      let sum = 0;
      for (let i = 0; i < radii.length; i++) sum += shares[i]! * (1 - besselJ0(k * radii[i]!));
      return sum;
    },
    reachCm: Math.hypot(halfWidth, halfHeight),
  };
}

function measuredTransform(profile: MeasuredProfile): BeamTransform {
  const radii: number[] = [];
  const falls: number[] = [];
  const { nodes, weights } = gaussLegendre(6);
  const last = profile.radiiMm.length - 1;
  for (let i = 0; i < last; i++) {
    const width = profile.radiiMm[i + 1]! - profile.radiiMm[i]!;
    const fall = profile.relativeIrradiances[i]! - profile.relativeIrradiances[i + 1]!;
    for (let q = 0; q < 6; q++) {
      radii.push((profile.radiiMm[i]! + (width * (nodes[q]! + 1)) / 2) / 10);
      falls.push((fall * weights[q]!) / 2);
    }
  }
  radii.push(profile.radiiMm[last]! / 10);
  falls.push(profile.relativeIrradiances[last]!);
  return {
    powerBelow: (k) => {
      let sum = 0;
      for (let i = 0; i < radii.length; i++) sum += falls[i]! * (1 - besselJ0(k * radii[i]!));
      return sum;
    },
    reachCm: profile.radiiMm[last]! / 10,
  };
}
