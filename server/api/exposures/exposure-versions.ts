import type { CorrectionRecord, ExposureContent, ExposureRow } from './exposures.store.js';

/** An exposure after its corrections. */
export interface EffectiveExposure {
  readonly row: ExposureRow;
  readonly exposure: ExposureContent;
  readonly status: 'stored' | 'corrected' | 'entered-in-error';
  readonly corrections: number;
}

/** Lays corrections over the record, oldest first. */
export function effective(row: ExposureRow, corrections: readonly CorrectionRecord[]): EffectiveExposure {
  let exposure = JSON.parse(row.content) as ExposureContent;
  let status = 'stored' as EffectiveExposure['status'];
  for (const { content } of corrections) {
    if (content.changes) exposure = { ...exposure, ...content.changes } as ExposureContent;
    status = content.enteredInError || status === 'entered-in-error' ? 'entered-in-error' : 'corrected';
  }
  return { row, exposure, status, corrections: corrections.length };
}
