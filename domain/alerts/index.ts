import type { AlertFinding, AlertRule, ExposureFacts } from './alert.js';
import { calibrationLapsed } from './calibration-lapsed.js';
import { doublePass } from './double-pass.js';
import { inconsistentNumbers } from './inconsistent-numbers.js';
import { outsideDevice } from './outside-device.js';
import { outsideProtocol } from './outside-protocol.js';
import { overdose } from './overdose.js';
import { shortInterval } from './short-interval.js';
import { wrongSpot } from './wrong-spot.js';
import { wrongWavelength } from './wrong-wavelength.js';

/** Every rule that is put to an exposure. `drift` speaks of devices and is asked after a check. */
export const alertRules: readonly AlertRule[] = [
  outsideProtocol,
  overdose,
  wrongWavelength,
  wrongSpot,
  outsideDevice,
  calibrationLapsed,
  shortInterval,
  doublePass,
  inconsistentNumbers,
];

/** Rules by name, that of devices included. */
export const alertRuleIds: readonly string[] = [...alertRules.map(({ id }) => id), 'drift'];

/** What the rules say about an exposure, in their order. */
export function evaluateAlerts(facts: ExposureFacts): (AlertFinding & { readonly rule: string })[] {
  const found: (AlertFinding & { readonly rule: string })[] = [];
  for (const rule of alertRules) {
    const finding = rule.judge(facts);
    if (finding) found.push({ rule: rule.id, ...finding });
  }
  return found;
}
