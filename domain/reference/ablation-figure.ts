import type { DataStatus } from '../quantities/caution.js';

/** One published figure of ablation, or of absorption where no spectrum reaches; a single figure stands as low and high. */
export interface AblationFigure {
  readonly id: string;
  readonly laser: string;
  readonly wavelengthNm: number;
  readonly tissue: string;
  readonly quantity: string;
  readonly low: number;
  readonly high: number;
  readonly unit: string;
  readonly source: string;
  readonly status: DataStatus;
  readonly note: string;
}
