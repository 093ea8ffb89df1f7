import { findRoot } from '../numeric/roots.js';
import { assertWithin } from '../quantities/errors.js';
import { gradedFaces, inSeries } from './heat-grid.js';
import { chainModes } from './heat-modes.js';

export interface HeldHeater {
  readonly geometry: 'plane' | 'cylinder' | 'sphere';
  /** Radius (half thickness of a plane) of the absorbing part, held at one temperature. */
  readonly heaterRadiusUm: number;
  /** Radius of the outermost part that is to be damaged. */
  readonly targetRadiusUm: number;
  readonly diffusivityMm2PerS: number;
  readonly heaterC: number;
  readonly damageC: number;
  readonly startC: number;
}

const longestS = 1000;

/** Thermal damage time of the extended theory of selective photothermolysis: how long a heater must be held at its temperature until
 *  the outermost part of the target, which may absorb nothing, reaches the temperature of damage. null when it does not within
 *  1,000 s. Solved by finite volumes outside the heater, exact in time.
 *  Throws: out-of-range (radii, temperatures that do not ascend from start to damage to heater). @source Altshuler2001 */
export function thermalDamageTimeS(held: HeldHeater): number | null {
  const { heaterRadiusUm, targetRadiusUm, diffusivityMm2PerS, heaterC, damageC, startC } = held;
  assertWithin('heaterRadiusUm', heaterRadiusUm, 1e-3, 1e5);
  assertWithin('targetRadiusUm', targetRadiusUm, heaterRadiusUm, 1e5);
  assertWithin('diffusivityMm2PerS', diffusivityMm2PerS, 1e-4, 1e4);
  assertWithin('damageC', damageC, startC, heaterC);
  if (targetRadiusUm === heaterRadiusUm) return 0;
  const wanted = (damageC - startC) / (heaterC - startC);
  const riseAt = relativeRise(held);
  if (!(riseAt(longestS) > wanted)) return null;
  const distanceMm = (targetRadiusUm - heaterRadiusUm) / 1000;
  const earliestS = distanceMm ** 2 / (400 * diffusivityMm2PerS); // rise there below erfc(10)
  if (riseAt(earliestS) >= wanted) return earliestS;
  return Math.exp(findRoot((lnTime) => riseAt(Math.exp(lnTime)) - wanted, Math.log(earliestS), Math.log(longestS)));
}

// Rise at the target's radius over the heater's, by time. One face lies on that radius.
function relativeRise(held: HeldHeater): (timeS: number) => number {
  const { geometry, heaterRadiusUm, targetRadiusUm, diffusivityMm2PerS } = held;
  const power = { plane: 0, cylinder: 1, sphere: 2 }[geometry];
  const gap = targetRadiusUm - heaterRadiusUm;
  const far = targetRadiusUm + 6000 * Math.sqrt(diffusivityMm2PerS * longestS);
  const edges = [heaterRadiusUm, targetRadiusUm];
  const fine = Math.min(gap, heaterRadiusUm) / 40;
  const inner = gradedFaces(heaterRadiusUm, targetRadiusUm, edges, fine, 0.08);
  const faces = [heaterRadiusUm, ...inner, ...gradedFaces(targetRadiusUm, far, edges, fine, 0.08)];
  const size = faces.length - 1;
  const center = (cell: number): number => 0.5 * (faces[cell]! + faces[cell + 1]!);
  // In units of um and of diffusivity in um2/s per unit solid angle: only their ratio counts.
  const kappa = diffusivityMm2PerS * 1e6;
  const half = (cell: number, face: number): number => (kappa * faces[face]! ** power) / Math.abs(faces[face]! - center(cell));
  const capacity = Float64Array.from(
    { length: size },
    (_, i) => (faces[i + 1]! ** (power + 1) - faces[i]! ** (power + 1)) / (power + 1),
  );
  const conductance = Float64Array.from({ length: size - 1 }, (_, i) => inSeries(half(i, i + 1), half(i + 1, i + 1)));
  const { ratesPerS, modeOfCell } = chainModes(capacity, conductance, half(0, 0));
  const before = inner.length - 1;
  const [near, next] = [half(before, before + 1), half(before + 1, before + 1)];
  const weights = ratesPerS.map((_, mode) => {
    let coldAmplitude = 0;
    for (let cell = 0; cell < size; cell++) coldAmplitude += capacity[cell]! * modeOfCell[mode * size + cell]!;
    const atTarget = near * modeOfCell[mode * size + before]! + next * modeOfCell[mode * size + before + 1]!;
    return (coldAmplitude * atTarget) / (near + next);
  });
  return (timeS) => 1 - weights.reduce((sum, weight, mode) => sum + weight * Math.exp(-ratesPerS[mode]! * timeS), 0);
}
