import type { Spot } from '../beam/spot.js';

/** One emission line that can be asked for: of a laser medium in general, or of a device with its own limits. */
export interface CandidateLine {
  readonly wavelengthNm: number;
  readonly medium?: string;
  readonly deviceId?: string;
  readonly pulseMinS?: number;
  readonly pulseMaxS?: number;
  readonly energyMaxJ?: number;
  readonly fluenceMaxJPerCm2?: number;
  /** The device's own spots; absent when any spot can be had. */
  readonly spots?: readonly Spot[];
}

/** One combination to judge. */
export interface Candidate {
  readonly line: CandidateLine;
  readonly pulseDurationS: number;
  readonly spot: Spot;
}

/** Wavelengths from `fromNm` in steps up to and including `toNm` where a step meets it. */
export function wavelengthRangeNm(fromNm: number, toNm: number, stepNm: number): number[] {
  const count = Math.floor((toNm - fromNm) / stepNm + 1e-9) + 1; // 1e-9: a last step that rounding puts just beyond the end
  return Array.from({ length: count }, (_, i) => fromNm + i * stepNm);
}

/** `count` durations spaced evenly in their logarithm, both ends included. */
export function logSpacedS(fromS: number, toS: number, count: number): number[] {
  if (count === 1 || fromS === toS) return [fromS];
  const step = Math.log(toS / fromS) / (count - 1);
  return Array.from({ length: count }, (_, i) => (i === count - 1 ? toS : fromS * Math.exp(i * step)));
}

/** Pulse durations worth trying when none were asked for: fractions and multiples of the target's relaxation time, and the same
 *  inside what the line can emit. The factors span the published argument from well confined to heat diffusing through the target. */
export function defaultPulsesS(line: CandidateLine, relaxationTimeS: number): number[] {
  const factors = [0.01, 0.03, 0.1, 0.3, 1, 3, 10];
  const wanted = factors.map((factor) => factor * relaxationTimeS);
  const { pulseMinS, pulseMaxS } = line;
  if (pulseMinS === undefined || pulseMaxS === undefined) return wanted;
  const inside = wanted.filter((s) => s > pulseMinS && s < pulseMaxS);
  return [...new Set([pulseMinS, ...inside, pulseMaxS])];
}

/** All combinations of lines, pulse durations and spots, wavelength slowest and spot fastest. A line with spots of its own takes
 *  those when the request gives none. */
export function listCandidates(options: {
  readonly lines: readonly CandidateLine[];
  readonly pulseDurationsS: readonly number[] | null;
  readonly spots: readonly Spot[];
  readonly relaxationTimeS: number;
}): Candidate[] {
  return options.lines.flatMap((line) => {
    const pulses = options.pulseDurationsS ?? defaultPulsesS(line, options.relaxationTimeS);
    return pulses.flatMap((pulseDurationS) => options.spots.map((spot) => ({ line, pulseDurationS, spot })));
  });
}
