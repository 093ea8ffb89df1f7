import { assertWithin } from '../quantities/errors.js';

/** The shapes whose cooling is known in closed form. `sizeUm` is thickness of a plane, diameter of a cylinder or sphere. */
export type HeatGeometry = 'plane' | 'cylinder' | 'sphere';

/** Thermal diffusivity of soft tissue, lower end of the usual 0.11-0.13 mm2/s (from memory).
 *  @source Altshuler2001 */
export const tissueDiffusivityMm2PerS = 0.11;

/** Divisors F of relaxation time = size^2 / (F diffusivity). Other texts print 4 (plane) and 27 (sphere).
 *  @source Altshuler2001 (8, 16, 24); AndersonParrish1983 (16 for a cylinder) */
export const geometryFactor: Readonly<Record<HeatGeometry, number>> = { plane: 8, cylinder: 16, sphere: 24 };

/** Time in which a heated body gives most of its excess heat to its surroundings.
 *  Letters: size^2 / (F kappa). Valid: sizes 1e-4 to 1e5 um.
 *  Throws: out-of-range. @source AndersonParrish1983; Altshuler2001 */
export function relaxationTimeS(
  geometry: HeatGeometry,
  sizeUm: number,
  diffusivityMm2PerS: number = tissueDiffusivityMm2PerS,
): number {
  assertWithin('sizeUm', sizeUm, 1e-4, 1e5);
  assertWithin('diffusivityMm2PerS', diffusivityMm2PerS, 1e-4, 1e4);
  const sizeMm = sizeUm / 1000;
  return (sizeMm * sizeMm) / (geometryFactor[geometry] * diffusivityMm2PerS);
}

/** Time that sound needs to cross a body: in shorter pulses pressure builds up before the body can expand.
 *  Throws: out-of-range. @source JacquesMcAuliffe1991 */
export function stressConfinementTimeS(sizeUm: number, soundSpeedMPerS: number): number {
  assertWithin('sizeUm', sizeUm, 1e-4, 1e5);
  assertWithin('soundSpeedMPerS', soundSpeedMPerS, 100, 2e4);
  return (sizeUm * 1e-6) / soundSpeedMPerS;
}

/** Divisor F of the time size^2 / (F diffusivity) in which the center of a body heated as exp(-(2 r / size)^2) in an endless
 *  medium falls to half its rise: 16 for a cylinder and 27.24 for a sphere, whence the two published factors; 5.33 for a plane.
 *  The center decays as (1 + 16 kappa t / size^2)^(-n/2) in n dimensions.
 *  @source CarslawJaeger1959 ch. 10 (instantaneous sources) */
export function halfDecayFactor(geometry: HeatGeometry): number {
  const dimensions = { plane: 1, cylinder: 2, sphere: 3 }[geometry];
  return 16 / (2 ** (2 / dimensions) - 1);
}
