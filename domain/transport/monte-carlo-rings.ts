import { gaussLegendre } from '../numeric/quadrature.js';
import type { BeamProfile } from './beam-profile.js';

const curvedRings = 64; // rings over which a profile that is not flat is averaged; error below 1e-4 of the fluence

/** Radii in cm at which a beam's scores are parted. A flat-top needs its edge alone. */
export function ringRadiiCm(beam: BeamProfile): number[] {
  const spaced = (from: number, to: number) =>
    Array.from({ length: curvedRings }, (_, i) => from + ((to - from) * (i + 1)) / curvedRings);
  // Finer toward the axis, where unscattered light falls.
  const fromAxis = (to: number) => Array.from({ length: curvedRings }, (_, i) => to * ((i + 1) / curvedRings) ** 2);
  switch (beam.shape) {
    case 'circle':
      return [beam.diameterMm / 20];
    case 'gaussian':
      return fromAxis((beam.diameterMm / 20) * 2.7); // exp(-2 * 2.7^2) = 5e-7 of the axis beyond
    case 'square':
      return [beam.widthMm / 20, ...spaced(beam.widthMm / 20, (beam.widthMm / 20) * Math.SQRT2)];
    case 'rectangle': {
      const [near, far] = [Math.min(beam.widthMm, beam.heightMm) / 20, Math.max(beam.widthMm, beam.heightMm) / 20];
      return [near, ...spaced(near, far), ...spaced(far, Math.hypot(near, far))];
    }
    case 'measured':
      return beam.radiiMm.flatMap((radiusMm, i) => {
        const from = (beam.radiiMm[i - 1] ?? 0) / 10;
        if (from === 0) return radiusMm > 0 ? fromAxis(radiusMm / 10) : [];
        return Array.from({ length: 8 }, (_, k) => from + ((radiusMm / 10 - from) * (k + 1)) / 8);
      });
  }
}

/** Irradiance over that on the axis, averaged over azimuth, at a radius. */
function relativeIrradiance(beam: BeamProfile, radiusCm: number): number {
  switch (beam.shape) {
    case 'circle':
      return radiusCm < beam.diameterMm / 20 ? 1 : 0;
    case 'gaussian':
      return Math.exp(-2 * (radiusCm / (beam.diameterMm / 20)) ** 2);
    case 'square':
      return withinRectangle(radiusCm, beam.widthMm / 20, beam.widthMm / 20);
    case 'rectangle':
      return withinRectangle(radiusCm, beam.widthMm / 20, beam.heightMm / 20);
    case 'measured': {
      const radius = radiusCm * 10;
      const after = beam.radiiMm.findIndex((edge) => edge > radius);
      if (after < 0) return 0;
      if (after === 0) return beam.relativeIrradiances[0]!;
      const [r0, r1] = [beam.radiiMm[after - 1]!, beam.radiiMm[after]!];
      const part = (radius - r0) / (r1 - r0);
      return beam.relativeIrradiances[after - 1]! * (1 - part) + beam.relativeIrradiances[after]! * part;
    }
  }
}

/** Share of a circle about the center of a rectangle that lies within it. */
function withinRectangle(radius: number, halfWidth: number, halfHeight: number): number {
  const beyond = (half: number) => (radius > half ? Math.acos(half / radius) : 0);
  return Math.max(0, 1 - (2 / Math.PI) * (beyond(halfWidth) + beyond(halfHeight)));
}

/** Mean over each ring of the beam's irradiance relative to the axis, and 0 beyond the last ring; all 1 for a broad beam.
 *  The fluence on the axis under a beam is the fluence of a pencil beam weighted by the beam's irradiance, since a displaced
 *  start and a displaced detector are the same thing in layers without sideways structure.
 *  Shape: one entry a ring, then one for the outside. Means are by area, Gauss-Legendre of 8 points in the squared radius. */
export function ringWeights(beam: BeamProfile | null, radiiCm: ArrayLike<number>): Float64Array {
  const weights = new Float64Array(radiiCm.length + 1);
  if (beam === null) return weights.fill(1);
  const { nodes, weights: shares } = gaussLegendre(8);
  for (let ring = 0; ring < radiiCm.length; ring++) {
    const inner = ring > 0 ? radiiCm[ring - 1]! ** 2 : 0;
    const outer = radiiCm[ring]! ** 2;
    for (let i = 0; i < 8; i++) {
      const square = inner + ((outer - inner) * (nodes[i]! + 1)) / 2;
      weights[ring]! += (shares[i]! / 2) * relativeIrradiance(beam, Math.sqrt(square));
    }
  }
  return weights;
}
