import type { Spot } from '../beam/spot.js';
import type { PanelSetting } from '../dosimetry/calibration.js';
import type { DeliveredExposure } from '../dosimetry/delivered-exposure.js';
import type { DeviceLine, Handpiece } from '../dosimetry/device-line.js';
import type { DeviceResponse } from '../dosimetry/device-response.js';
import type { ProtocolInForce } from './protocol-envelope.js';

export type AlertSeverity = 'low' | 'moderate' | 'high';

/** What a rule says about one exposure. `evidence` holds the figures it rests on. */
export interface AlertFinding {
  readonly severity: AlertSeverity;
  readonly text: string;
  readonly evidence: Readonly<Record<string, unknown>>;
}

/** An earlier exposure of the same course and site. `isGroup`: it covered more than one place. */
export interface EarlierExposure {
  readonly atMs: number;
  readonly passNumber: number | null;
  readonly isGroup: boolean;
}

/** Everything the rules may look at. Times are milliseconds since 1970. `protocol` is `none` when the record names none and
 *  `not-in-force` when the one it names was not approved at the time. */
export interface ExposureFacts {
  readonly atMs: number;
  readonly wavelengthNm: number;
  readonly spot: Spot;
  readonly pulseDurationS: number;
  readonly set: PanelSetting;
  readonly pulseCount: number;
  readonly stackCount: number;
  readonly repetitionRateHz: number | null;
  readonly handpiece: string | null;
  readonly coolingKind: string | null;
  readonly passNumber: number | null;
  readonly site: string | null;
  readonly itaDegrees: number | null;
  readonly phototype: string | null;
  readonly lines: readonly DeviceLine[];
  readonly handpieces: readonly Handpiece[];
  readonly outputToleranceFraction: number;
  readonly response: DeviceResponse;
  readonly delivered: DeliveredExposure;
  readonly protocol: ProtocolInForce | 'none' | 'not-in-force';
  /** The exposure of the same course and site that came last before this one. */
  readonly last: EarlierExposure | null;
}

/** One thing about an exposure that someone should be told. */
export interface AlertRule {
  readonly id: string;
  readonly title: string;
  readonly judge: (facts: ExposureFacts) => AlertFinding | null;
}

/** Declares an entry of the list of rules. */
export function defineAlert(rule: AlertRule): AlertRule {
  return Object.freeze(rule);
}

/** The line of the device that emits the exposure's wavelength; undefined when there is none. */
export function lineOf(facts: Pick<ExposureFacts, 'lines' | 'wavelengthNm'>, sameLineNm: number): DeviceLine | undefined {
  return facts.lines.find((line) => Math.abs(line.wavelengthNm - facts.wavelengthNm) <= sameLineNm);
}
