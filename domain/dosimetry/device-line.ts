import type { Spot } from '../beam/spot.js';

/** One wavelength that a device emits, with the limits of its panel. `energyMaxJ` is per pulse. */
export interface DeviceLine {
  readonly deviceId: string;
  readonly name: string;
  readonly medium: string;
  readonly wavelengthNm: number;
  readonly pulseMinS: number;
  readonly pulseMaxS: number;
  readonly energyMaxJ?: number;
  readonly fluenceMaxJPerCm2?: number;
  readonly repetitionMaxHz: number;
  readonly spots: readonly Spot[];
}

/** A handpiece by name, with its own spots where it has fewer than the line. */
export interface Handpiece {
  readonly name: string;
  readonly spots?: readonly Spot[] | undefined;
}
