import type { Spot } from '../beam/spot.js';
import { isSameSpot, sameLineNm } from '../dosimetry/calibration.js';

/** Settings that a protocol allows for one wavelength and band of pigmentation. What is absent is not limited. */
export interface Envelope {
  readonly wavelengthNm: number;
  readonly phototypes?: readonly string[] | undefined;
  readonly itaMinDegrees?: number | undefined;
  readonly itaMaxDegrees?: number | undefined;
  readonly fluenceMinJPerCm2?: number | undefined;
  readonly fluenceMaxJPerCm2?: number | undefined;
  readonly pulseMinS?: number | undefined;
  readonly pulseMaxS?: number | undefined;
  readonly spots?: readonly Spot[] | undefined;
  readonly repetitionMaxHz?: number | undefined;
  readonly stackMaxCount?: number | undefined;
  readonly passMaxCount?: number | undefined;
  readonly coolingKinds?: readonly string[] | undefined;
  readonly intervalMinDays?: number | undefined;
}

/** The version of a protocol that was in force at an exposure's time. */
export interface ProtocolInForce {
  readonly id: string;
  readonly name: string;
  readonly version: number;
  readonly envelopes: readonly Envelope[];
}

/** One way out of an envelope; `excessFraction` of the limit where both are numbers. */
export interface Departure {
  readonly parameter: string;
  readonly value: number | string;
  readonly limit: number | string;
  readonly bound: 'min' | 'max' | 'list';
  readonly excessFraction: number | null;
}

export interface JudgedSetting {
  readonly wavelengthNm: number;
  readonly spot: Spot;
  readonly pulseDurationS: number;
  readonly setFluenceJPerCm2: number;
  readonly repetitionRateHz: number | null;
  readonly stackCount: number;
  readonly passNumber: number | null;
  readonly coolingKind: string | null;
  readonly itaDegrees: number | null;
  readonly phototype: string | null;
}

/** The envelope that fits best, and how the setting leaves it: none of the wavelength, none of the pigmentation, or the fewest departures.
 *  Limits include their edges, to 1e-9 of the limit for figures computed from others. */
export function judgeSetting(
  envelopes: readonly Envelope[],
  setting: JudgedSetting,
): { readonly envelope: Envelope | null; readonly departures: readonly Departure[] } {
  const ofLine = envelopes.filter((envelope) => Math.abs(envelope.wavelengthNm - setting.wavelengthNm) <= sameLineNm);
  if (ofLine.length === 0) {
    const limit = [...new Set(envelopes.map((envelope) => envelope.wavelengthNm))].join(', ');
    return {
      envelope: null,
      departures: [{ parameter: 'wavelengthNm', value: setting.wavelengthNm, limit, bound: 'list', excessFraction: null }],
    };
  }
  const judged = ofLine.map((envelope) => ({ envelope, departures: departuresFrom(envelope, setting) }));
  return judged.reduce((best, next) => (next.departures.length < best.departures.length ? next : best));
}

function departuresFrom(envelope: Envelope, setting: JudgedSetting): Departure[] {
  const out: Departure[] = [];
  const least = (parameter: string, value: number | null, limit: number | undefined) => {
    if (value === null || limit === undefined || value >= limit - Math.abs(limit) * 1e-9) return;
    out.push({ parameter, value, limit, bound: 'min', excessFraction: limit === 0 ? null : (limit - value) / Math.abs(limit) });
  };
  const most = (parameter: string, value: number | null, limit: number | undefined) => {
    if (value === null || limit === undefined || value <= limit + Math.abs(limit) * 1e-9) return;
    out.push({ parameter, value, limit, bound: 'max', excessFraction: limit === 0 ? null : (value - limit) / Math.abs(limit) });
  };
  const listed = (parameter: string, value: string | null, list: readonly string[] | undefined) => {
    if (value === null || list === undefined || list.includes(value)) return;
    out.push({ parameter, value, limit: list.join(', '), bound: 'list', excessFraction: null });
  };
  least('itaDegrees', setting.itaDegrees, envelope.itaMinDegrees);
  most('itaDegrees', setting.itaDegrees, envelope.itaMaxDegrees);
  listed('phototype', setting.phototype, envelope.phototypes);
  least('fluenceJPerCm2', setting.setFluenceJPerCm2, envelope.fluenceMinJPerCm2);
  most('fluenceJPerCm2', setting.setFluenceJPerCm2, envelope.fluenceMaxJPerCm2);
  least('pulseDurationS', setting.pulseDurationS, envelope.pulseMinS);
  most('pulseDurationS', setting.pulseDurationS, envelope.pulseMaxS);
  most('repetitionRateHz', setting.repetitionRateHz, envelope.repetitionMaxHz);
  most('stackCount', setting.stackCount, envelope.stackMaxCount);
  most('passNumber', setting.passNumber, envelope.passMaxCount);
  listed('cooling', setting.coolingKind ?? (envelope.coolingKinds ? 'not recorded' : null), envelope.coolingKinds);
  if (envelope.spots && !envelope.spots.some((spot) => isSameSpot(spot, setting.spot))) {
    const limit = envelope.spots.map(spotText).join(', ');
    out.push({ parameter: 'spot', value: spotText(setting.spot), limit, bound: 'list', excessFraction: null });
  }
  return out;
}

/** A spot in words: shape and size. */
export function spotText(spot: Spot): string {
  if ('diameterMm' in spot) return `${spot.shape} ${spot.diameterMm} mm`;
  return 'heightMm' in spot ? `rectangle ${spot.widthMm} x ${spot.heightMm} mm` : `square ${spot.widthMm} mm`;
}
