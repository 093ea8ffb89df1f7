import type { Spot } from '../beam/spot.js';
import { type CalibrationPoint, isSameSpot, sameLineNm } from './calibration.js';

/** How a factor was come by: at a measured setting, between measured settings, beyond them, or not at all. */
export type ResponseBasis = 'measured' | 'interpolated' | 'outside-range' | 'not-calibrated';

/** What a device delivers over what its panel says, at one time and setting. `calibrationIds` are those it rests on. */
export interface DeviceResponse {
  readonly factor: number;
  readonly relativeUncertainty: number;
  readonly basis: ResponseBasis;
  readonly lapsed: boolean;
  readonly closedByService: boolean;
  readonly calibrationIds: readonly string[];
}

/** One use of a device. */
export interface DeviceUse {
  readonly atMs: number;
  readonly wavelengthNm: number;
  readonly spot: Spot;
  readonly pulseDurationS: number;
  readonly handpiece: string | null;
  readonly setEnergyJ: number;
}

/** Week-to-week variation of a healthy device, taken as the half-width of a rectangular distribution.
 *  @source DermatologyAudit2018 (4 to 5 % over six weeks; abstract) */
export const healthyVariationFraction = 0.05;
const rectangular = Math.sqrt(3); // JCGM100 4.3.7: half-width over standard uncertainty

interface Knot {
  readonly at: number;
  readonly factor: number;
  readonly variance: number;
  readonly outside: boolean;
  readonly interpolated: boolean;
  readonly points: readonly CalibrationPoint[];
}

/** What a device delivers at a use, from its calibrations (not superseded, traceable) and services. In force are the latest at each measured
 *  setting before the use and after the last service; those that have lapsed count only when no other is left. Factors are interpolated
 *  in set energy, and in the logarithm of pulse duration; beyond the measured range the nearest one is taken, flagged and widened.
 *  Variation since the measurement grows to that of a healthy device at the end of validity; once lapsed, or never measured, only the
 *  outer tolerance of the device is known. Valid: 0 < toleranceFraction < 1. @source JCGM100 4.3.7, 5.1.2 */
export function responseAt(
  points: readonly CalibrationPoint[],
  serviceTimesMs: readonly number[],
  use: DeviceUse,
  toleranceFraction: number,
): DeviceResponse {
  const lastServiceMs = serviceTimesMs.reduce((last, ms) => (ms <= use.atMs && ms > last ? ms : last), Number.NEGATIVE_INFINITY);
  const fitting = points.filter((point) => point.measuredAtMs <= use.atMs && isForUse(point, use));
  const open = fitting.filter((point) => point.measuredAtMs >= lastServiceMs);
  if (open.length === 0) return uncalibrated(toleranceFraction, fitting.length > 0);
  const valid = open.filter((point) => point.validUntilMs >= use.atMs);
  const lapsed = valid.length === 0;
  const variance = (point: CalibrationPoint) =>
    point.relativeUncertainty ** 2 + variation(point, use.atMs, toleranceFraction) ** 2;
  const knot = factorOverPulse(latestPerSetting(lapsed ? open : valid), use, variance);
  const widening = knot.outside ? (healthyVariationFraction / rectangular) ** 2 : 0;
  return {
    factor: knot.factor,
    relativeUncertainty: Math.sqrt(knot.variance + widening),
    basis: knot.outside ? 'outside-range' : knot.interpolated ? 'interpolated' : 'measured',
    lapsed,
    closedByService: false,
    calibrationIds: [...new Set(knot.points.map((point) => point.id))],
  };
}

function uncalibrated(toleranceFraction: number, closedByService: boolean): DeviceResponse {
  return {
    factor: 1,
    relativeUncertainty: toleranceFraction / rectangular,
    basis: 'not-calibrated',
    lapsed: false,
    closedByService,
    calibrationIds: [],
  };
}

function isForUse(point: CalibrationPoint, use: DeviceUse): boolean {
  return (
    Math.abs(point.wavelengthNm - use.wavelengthNm) <= sameLineNm &&
    (point.handpiece === null || use.handpiece === null || point.handpiece === use.handpiece) &&
    isSameSpot(point.spot, use.spot)
  );
}

function variation(point: CalibrationPoint, atMs: number, toleranceFraction: number): number {
  if (atMs > point.validUntilMs) return toleranceFraction / rectangular;
  const age = (atMs - point.measuredAtMs) / Math.max(1, point.validUntilMs - point.measuredAtMs);
  return (Math.min(healthyVariationFraction, toleranceFraction) / rectangular) * age;
}

function latestPerSetting(points: readonly CalibrationPoint[]): CalibrationPoint[] {
  const latest = new Map<string, CalibrationPoint>();
  for (const point of points) {
    const key = `${point.pulseDurationS} ${point.setEnergyJ.toPrecision(9)}`; // nine digits: the same setting by energy or by fluence
    const known = latest.get(key);
    if (!known || point.measuredAtMs >= known.measuredAtMs) latest.set(key, point);
  }
  return [...latest.values()];
}

type Variance = (point: CalibrationPoint) => number;

function factorOverPulse(points: readonly CalibrationPoint[], use: DeviceUse, variance: Variance): Knot {
  const groups = new Map<number | null, CalibrationPoint[]>();
  for (const point of points) {
    const group = groups.get(point.pulseDurationS);
    if (group) group.push(point);
    else groups.set(point.pulseDurationS, [point]);
  }
  const timed = [...groups].flatMap(([durationS, group]) =>
    durationS === null ? [] : [factorOverEnergy(group, use, variance, Math.log(durationS))],
  );
  const anyPulse = groups.get(null);
  const between = timed.length > 0 ? interpolate(timed, Math.log(use.pulseDurationS)) : null;
  if (anyPulse && (between === null || between.outside)) return factorOverEnergy(anyPulse, use, variance, 0);
  return between!;
}

function factorOverEnergy(points: readonly CalibrationPoint[], use: DeviceUse, variance: Variance, at: number): Knot {
  const knots = points.map((point) => ({
    at: point.setEnergyJ,
    factor: point.factor,
    variance: variance(point),
    outside: false,
    interpolated: false,
    points: [point],
  }));
  return { ...interpolate(knots, use.setEnergyJ), at };
}

const sameSetting = 1e-6; // relative; energy from a fluence and an area is rounded in the last digits

function interpolate(knots: readonly Knot[], at: number): Knot {
  let below: Knot | undefined;
  let above: Knot | undefined;
  const slack = sameSetting * Math.max(1e-3, Math.abs(at));
  for (const knot of knots) {
    if (Math.abs(knot.at - at) <= slack) return knot;
    if (knot.at < at && (!below || knot.at > below.at)) below = knot;
    if (knot.at > at && (!above || knot.at < above.at)) above = knot;
  }
  if (!below || !above) return { ...(below ?? above)!, outside: true };
  const share = (at - below.at) / (above.at - below.at);
  const factor = below.factor + share * (above.factor - below.factor);
  return {
    at,
    factor,
    variance: Math.max(below.variance, above.variance), // one meter measured both: fully correlated, so no gain from two
    outside: below.outside || above.outside,
    interpolated: true,
    points: [...below.points, ...above.points],
  };
}
