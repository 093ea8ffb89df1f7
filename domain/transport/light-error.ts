import type { BeamProfile } from './beam-profile.js';

/** Least width of a flat beam, in mm, and the greatest error seen in fluence for beams from that width on. */
const measuredErrors: readonly (readonly [number, number])[] = [
  [6, 0.01],
  [3, 0.02],
  [2, 0.03],
  [1, 0.05],
  [0.7, 0.09],
  [0.5, 0.16],
  [0.25, 0.31],
  [0.12, 0.4],
];
const beyondMeasured = 0.5; // narrower than any beam that was tried

/** Greatest relative error of the fast solver's fluence for a beam, wherever fluence exceeds 1 % of incident.
 *  Measured against Monte Carlo in skin from 400 to 2200 nm, phototypes I to VI; beams of 1 mm or more meet the worst only deep
 *  in water bands, and stay within 0.025 elsewhere. A null beam is of unlimited width.
 *  Letters: a Gaussian beam of 1/e^2 diameter d spreads like a flat one of d/sqrt(2), which has its power at its peak irradiance. */
export function lightErrorFraction(beam: BeamProfile | null): number {
  if (beam === null) return 0.01;
  const widthMm = flatWidthMm(beam);
  for (const [least, error] of measuredErrors) if (widthMm >= least) return error;
  return beyondMeasured;
}

function flatWidthMm(beam: BeamProfile): number {
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
