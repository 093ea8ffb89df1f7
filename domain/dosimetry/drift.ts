import { compareWithFraction } from './decimal-tolerance.js';

/** Levels that a constancy check is judged by, as fractions. Proposals of the trade, no source, but the outer one:
 *  @source IEC60601 (20 % output tolerance) */
export interface ConstancyLevels {
  readonly warningFraction: number;
  readonly actionFraction: number;
  readonly suspendFraction: number;
}

export const usualLevels: ConstancyLevels = { warningFraction: 0.05, actionFraction: 0.1, suspendFraction: 0.2 };

export type ConstancyVerdict = 'pass' | 'warning' | 'action' | 'suspend';

/** Verdict on a mean against a reference (display or baseline). A value at a level is still inside it; decimal arithmetic.
 *  Shape: scalar. Valid: reference > 0. */
export function judgeConstancy(meanJ: number, referenceJ: number, levels: ConstancyLevels): ConstancyVerdict {
  if (compareWithFraction(meanJ, referenceJ, levels.suspendFraction) > 0) return 'suspend';
  if (compareWithFraction(meanJ, referenceJ, levels.actionFraction) > 0) return 'action';
  if (compareWithFraction(meanJ, referenceJ, levels.warningFraction) > 0) return 'warning';
  return 'pass';
}

const order: readonly ConstancyVerdict[] = ['pass', 'warning', 'action', 'suspend'];

export function worseVerdict(a: ConstancyVerdict, b: ConstancyVerdict): ConstancyVerdict {
  return order.indexOf(a) >= order.indexOf(b) ? a : b;
}

/** One check: mean reading over reference, at a time in milliseconds since 1970. */
export interface ConstancyPoint {
  readonly atMs: number;
  readonly ratio: number;
}

export interface DriftChart {
  readonly points: readonly {
    readonly atMs: number;
    readonly logRatio: number;
    readonly ewma: number;
    readonly shewhartAlarm: boolean;
    readonly ewmaAlarm: boolean;
  }[];
  readonly standardDeviation: number;
  readonly shewhartLimit: number;
  readonly ewmaLimit: number;
  readonly slopePerDay: number | null;
  readonly slopeStandardError: number | null;
  readonly actionLevelAtMs: number | null;
  readonly alarm: boolean;
}

/** Weight of the newest check and width of the limits: in-control run of about 500 checks for independent normal noise.
 *  @source Lucas1990 table 3 (lambda 0.2, L 2.962, average run length 500; from memory) */
const ewmaWeight = 0.2;
const ewmaWidth = 2.962;
/** False alarms of 0.27 % per check for normal noise. @source Shewhart1931 (three-sigma limits) */
const shewhartWidth = 3;
/** Standard deviation of a healthy device's checks until its own are enough: half of the 5 % that weekly checks of dermatology lasers
 *  varied by, taken as k = 2. @source DermatologyAudit2018 */
const usualStandardDeviation = 0.025;
/** Checks from which a device's own scatter is taken. Common practice, no source. */
const baselineChecks = 10;
const msPerDay = 86_400_000;

/** Control charts of ln(mean over reference): single checks by Shewhart, small shifts by an exponentially weighted mean, and the straight
 *  line through all with the day on which it meets the action level. The scatter is that of differences between neighbors among the
 *  first ten checks, which a slow ramp hardly widens. Shape: one point per check, in time. Valid: ratios > 0, ascending times. */
export function driftChart(series: readonly ConstancyPoint[], levels: ConstancyLevels = usualLevels): DriftChart {
  const logs = series.map(({ ratio }) => Math.log(ratio));
  const sigma = standardDeviation(logs);
  const shewhartLimit = shewhartWidth * sigma;
  const ewmaLimit = ewmaWidth * sigma * Math.sqrt(ewmaWeight / (2 - ewmaWeight));
  let ewma = 0;
  const points = logs.map((logRatio, i) => {
    ewma = ewmaWeight * logRatio + (1 - ewmaWeight) * ewma;
    const started = Math.sqrt(1 - (1 - ewmaWeight) ** (2 * (i + 1))); // exact variance of the mean while it fills
    return {
      atMs: series[i]!.atMs,
      logRatio,
      ewma,
      shewhartAlarm: Math.abs(logRatio) > shewhartLimit,
      ewmaAlarm: Math.abs(ewma) > ewmaLimit * started,
    };
  });
  const line = straightLine(series, logs);
  const last = points[points.length - 1];
  return {
    points,
    standardDeviation: sigma,
    shewhartLimit,
    ewmaLimit,
    slopePerDay: line?.slopePerDay ?? null,
    slopeStandardError: line?.standardError ?? null,
    actionLevelAtMs: line ? meetingTimeMs(line, last!.atMs, levels.actionFraction) : null,
    alarm: last !== undefined && (last.shewhartAlarm || last.ewmaAlarm),
  };
}

function standardDeviation(logs: readonly number[]): number {
  if (logs.length < baselineChecks) return usualStandardDeviation;
  let sum = 0;
  for (let i = 1; i < baselineChecks; i++) sum += Math.abs(logs[i]! - logs[i - 1]!);
  const meanRange = sum / (baselineChecks - 1);
  return Math.max(meanRange / (2 / Math.sqrt(Math.PI)), 0.001); // mean |difference| of two normals is 2 sigma / sqrt(pi); 0.1 %: resolution of a meter
}

interface Line {
  readonly slopePerDay: number;
  readonly standardError: number | null;
  readonly atLast: number;
}

function straightLine(series: readonly ConstancyPoint[], logs: readonly number[]): Line | null {
  const n = series.length;
  if (n < 3) return null;
  const days = series.map(({ atMs }) => (atMs - series[0]!.atMs) / msPerDay);
  const meanDay = days.reduce((sum, day) => sum + day, 0) / n;
  const meanLog = logs.reduce((sum, log) => sum + log, 0) / n;
  const spread = days.reduce((sum, day) => sum + (day - meanDay) ** 2, 0);
  if (spread === 0) return null;
  const slopePerDay = days.reduce((sum, day, i) => sum + (day - meanDay) * (logs[i]! - meanLog), 0) / spread;
  const residual = days.reduce((sum, day, i) => sum + (logs[i]! - meanLog - slopePerDay * (day - meanDay)) ** 2, 0);
  return {
    slopePerDay,
    standardError: Math.sqrt(residual / (n - 2) / spread),
    atLast: meanLog + slopePerDay * (days[n - 1]! - meanDay),
  };
}

// The nearer action level in the direction of the slope; null while the slope is lost in its own scatter or the day is beyond ten years.
function meetingTimeMs(line: Line, lastMs: number, actionFraction: number): number | null {
  const { slopePerDay, standardError, atLast } = line;
  if (slopePerDay === 0 || (standardError !== null && Math.abs(slopePerDay) < 2 * standardError)) return null;
  const level = slopePerDay > 0 ? Math.log(1 + actionFraction) : Math.log(1 - actionFraction);
  const days = (level - atLast) / slopePerDay;
  if (days <= 0) return lastMs;
  return days > 3650 ? null : lastMs + days * msPerDay;
}
