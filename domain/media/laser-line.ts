import type { DataStatus } from '../quantities/caution.js';

/** One emission of a laser medium with the pulse durations it usually has. */
export interface LaserLine {
  readonly id: string;
  readonly medium: string;
  readonly wavelengthNm: number;
  readonly regime: string;
  readonly pulseMinS: number;
  readonly pulseMaxS: number;
  readonly source: string;
  readonly status: DataStatus;
  readonly note: string;
}
