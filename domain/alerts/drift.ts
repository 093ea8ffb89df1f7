import type { ConstancyVerdict, DriftChart } from '../dosimetry/drift.js';
import type { AlertFinding } from './alert.js';

/** What to tell about a device after a constancy check: its verdict, or a chart that has left its limits. Null when all is well. */
export function driftFinding(verdict: ConstancyVerdict, chart: DriftChart): AlertFinding | null {
  if (verdict !== 'action' && verdict !== 'suspend' && !chart.alarm) return null;
  const { slopePerDay, actionLevelAtMs } = chart;
  const severity = verdict === 'suspend' ? 'high' : 'moderate';
  const trend = slopePerDay === null ? '' : ` Trend ${(slopePerDay * 700).toFixed(2)} % a week.`;
  const reason =
    verdict === 'suspend'
      ? 'The check is beyond the suspend level: do not use the device.'
      : verdict === 'action'
        ? 'The check is beyond the action level.'
        : 'The control chart has left its limits: the output drifts.';
  return { severity, text: `${reason}${trend}`, evidence: { verdict, slopePerDay, actionLevelAtMs } };
}
