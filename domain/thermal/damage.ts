import { gasConstantJPerMolK, zeroCelsiusK } from '../quantities/constants.js';
import { assertWithin } from '../quantities/errors.js';
import type { DamagePair } from './thermal-figures.js';

/** Damage integrals at which skin shows a burn of the first degree, and one of the third (1 is the second degree).
 *  @source Henriques1947 (read where other texts quote it) */
export const firstDegreeDamage = 0.53;
export const secondDegreeDamage = 1;
export const fullThicknessDamage = 1e4;

/** Arrhenius damage integral of a temperature history: integral of A exp(-Ea / (R T)) dt; exp(-integral) is the share unharmed.
 *  Between samples the rate is taken as exponential in time, which is exact for a temperature linear in time up to its curvature in
 *  1/T. Temperatures are not capped: above boiling the history itself no longer holds, and the caller reports that.
 *  @source Henriques1947 */
export function damageIntegral(timesS: ArrayLike<number>, temperaturesC: ArrayLike<number>, pair: DamagePair): number {
  return Math.min(Math.exp(lnDamage(timesS, temperaturesC, null, 0, pair)), Number.MAX_VALUE);
}

/** Time at a constant temperature until the damage integral is 1. */
export function timeToDamageS(pair: DamagePair, temperatureC: number): number {
  assertWithin('temperatureC', temperatureC, -zeroCelsiusK + 1, 5000);
  return Math.exp(activationK(pair) / (temperatureC + zeroCelsiusK) - Math.log(pair.frequencyFactorPerS));
}

/** Temperature at which the damage rate is 1 per second. Letters: Ea / (R ln A). */
export function criticalTemperatureC(pair: DamagePair): number {
  return activationK(pair) / Math.log(pair.frequencyFactorPerS) - zeroCelsiusK;
}

/** Minutes at 43 C with the same effect: sum of R^(43 - T) dt with R = 0.5 above 43 C and 0.25 below, over histories that are linear
 *  between samples (integrated exactly). Above about 60 C the rule is far outside the data it summarizes.
 *  @source SaparetoDewey1984 */
export function cem43Min(timesS: ArrayLike<number>, temperaturesC: ArrayLike<number>): number {
  let sumS = 0;
  for (let i = 1; i < timesS.length; i++) {
    const durationS = timesS[i]! - timesS[i - 1]!;
    const [from, to] = [temperaturesC[i - 1]! - 43, temperaturesC[i]! - 43];
    if (from < 0 !== to < 0) {
      const crossing = from / (from - to);
      sumS += durationS * (crossing * meanFactor(from, 0) + (1 - crossing) * meanFactor(0, to));
    } else sumS += durationS * meanFactor(from, to);
  }
  return Math.min(sumS / 60, Number.MAX_VALUE);
}

function meanFactor(from: number, to: number): number {
  const base = from + to < 0 ? Math.log(4) : Math.log(2);
  return meanExponential(base * from, base * to);
}

// Mean of exp(x) while x runs linearly from one end to the other.
function meanExponential(from: number, to: number): number {
  const span = Math.abs(to - from);
  return Math.exp(Math.max(from, to)) * (span < 1e-8 ? 1 - span / 2 : -Math.expm1(-span) / span);
}

export interface DamageFluenceRequest {
  readonly timesS: ArrayLike<number>;
  /** Without light, by time. */
  readonly baselineC: ArrayLike<number>;
  /** Rise per J/cm2, by time. */
  readonly responseK: ArrayLike<number>;
  readonly pair: DamagePair;
  /** Damage integral to reach; default 1. */
  readonly target?: number;
  /** Default 1000. */
  readonly maxFluenceJPerCm2?: number;
}

const maxSteps = 80;
const usualDurationS = 1e-3; // scales the effective temperature only; any duration gives the same root

/** Fluence at which baseline + fluence x response reaches a damage integral: null when none up to the greatest does, 0 when the
 *  baseline alone does. The root is sought not in ln(integral) but in the effective temperature Ea / (R ln(A t / integral)), which is
 *  nearly linear in fluence, by secants that are kept inside a bracket. Relative accuracy 1e-5. */
export function fluenceForDamage(request: DamageFluenceRequest): number | null {
  const { timesS, baselineC, responseK, pair, target = 1, maxFluenceJPerCm2 = 1000 } = request;
  const activation = activationK(pair);
  const peakPerJ = greatest(responseK);
  const lnScale = Math.log(pair.frequencyFactorPerS * usualDurationS);
  const wantedK = activation / (lnScale - Math.log(target));
  const effectiveK = (fluence: number): number =>
    activation / Math.max(lnScale - lnDamage(timesS, baselineC, responseK, fluence, pair), 1);
  if (!(peakPerJ > 0)) return effectiveK(0) >= wantedK ? 0 : null;
  let low = 0;
  let high = maxFluenceJPerCm2;
  const guess = Math.max(wantedK - zeroCelsiusK - greatest(baselineC), 1) / peakPerJ;
  let fluence = guess > 0.7 * high ? high : guess; // where the greatest may not suffice, ask that first
  let kPerJ = peakPerJ;
  for (let step = 0, before = 0, beforeK = 0; step < maxSteps; step++) {
    const reachedK = effectiveK(fluence);
    if (reachedK >= wantedK) high = fluence;
    else if (fluence === maxFluenceJPerCm2) return null;
    else low = fluence;
    if (step > 0) kPerJ = (reachedK - beforeK) / (fluence - before);
    const next = fluence + (wantedK - reachedK) / kPerJ;
    // A secant's error is about the product of the last two steps.
    const isClose = step > 0 && Math.abs((next - fluence) * (fluence - before)) <= 4e-4 * fluence * fluence;
    if (isClose || high - low <= 1e-7 * high) return Math.min(next, maxFluenceJPerCm2);
    [before, beforeK] = [fluence, reachedK];
    if (next <= 0 && effectiveK(0) >= wantedK) return 0;
    if (next > low && next < high) fluence = next;
    else if (next >= high && high === maxFluenceJPerCm2) fluence = high;
    else fluence = 0.5 * (low + high);
  }
  return low; // so many halvings leave nothing but a root at 0
}

function activationK(pair: DamagePair): number {
  return pair.activationEnergyJPerMol / gasConstantJPerMolK;
}

function greatest(values: ArrayLike<number>): number {
  let result = Number.NEGATIVE_INFINITY;
  for (let i = 0; i < values.length; i++) if (values[i]! > result) result = values[i]!;
  return result;
}

const negligible = -36; // exp(-36) = 2e-16 of the fastest rate

// Logarithm of the damage integral of baseline + fluence x rise, summed relative to the fastest rate so that nothing overflows.
function lnDamage(
  timesS: ArrayLike<number>,
  baselineC: ArrayLike<number>,
  riseK: ArrayLike<number> | null,
  fluence: number,
  pair: DamagePair,
): number {
  const activation = activationK(pair);
  const count = timesS.length;
  let hottestC = 1 - zeroCelsiusK;
  for (let i = 0; i < count; i++) {
    const temperatureC = riseK === null ? baselineC[i]! : baselineC[i]! + fluence * riseK[i]!;
    if (temperatureC > hottestC) hottestC = temperatureC;
  }
  const fastest = -activation / (hottestC + zeroCelsiusK);
  let sum = 0;
  let [earlier, earlierRate] = [0, 0];
  for (let i = 0; i < count; i++) {
    const rise = riseK === null ? 0 : fluence * riseK[i]!;
    const later = -activation / Math.max(baselineC[i]! + rise + zeroCelsiusK, 1) - fastest;
    const laterRate = later < negligible ? 0 : Math.exp(later);
    if (i > 0 && laterRate + earlierRate > 0) {
      const span = later - earlier;
      const mean = Math.abs(span) < 1e-4 ? 0.5 * (earlierRate + laterRate) : (laterRate - earlierRate) / span;
      sum += mean * (timesS[i]! - timesS[i - 1]!);
    }
    earlier = later;
    earlierRate = laterRate;
  }
  return Math.log(pair.frequencyFactorPerS) + fastest + Math.log(sum);
}
