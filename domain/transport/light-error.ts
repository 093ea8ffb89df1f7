import { type BeamProfile, flatWidthMm } from './beam-profile.js';

/** Least width of a flat beam, in mm, and the greatest error seen in fluence for beams from that width on. */
const measuredErrors: readonly (readonly [number, number])[] = [
  [6, 0.01],
  [0.7, 0.02],
  [0.5, 0.035],
  [0.25, 0.05],
  [0.12, 0.13],
];
const beyondMeasured = 0.5; // narrower than any beam that was tried

/** Greatest relative error of the fast solver's fluence for a beam, wherever fluence exceeds 1 % of incident.
 *  Measured against Monte Carlo in skin from 400 to 2200 nm, phototypes I to VI, in the ranking setting; the fine setting
 *  errs by a third of it. Under a window of glass or sapphire the error
 *  reaches 0.05 at any width. A null beam is of unlimited width. */
export function lightErrorFraction(beam: BeamProfile | null): number {
  if (beam === null) return 0.01;
  const widthMm = flatWidthMm(beam);
  for (const [least, error] of measuredErrors) if (widthMm >= least) return error;
  return beyondMeasured;
}
