import { stringify } from 'csv-stringify/sync';
import { coverageFactor } from '../../../domain/dosimetry/delivered-exposure.js';
import type { Reader } from '../../db/reader.js';
import type { Fault } from '../../http/request-error.js';
import type { AlertRecord } from '../alerts/alerts.store.js';
import type { ClinicBook } from './clinic-book.store.js';
import { doseOf, known, missingFields } from './exposure-facts.js';
import { effective } from './exposure-versions.js';
import type { Logged } from './exposures.actions.js';
import { type ExposureRow, hasCorrections, listCorrections } from './exposures.store.js';

export type ExposureReply = ReturnType<ReturnType<typeof exposurePresenter>>;

/** Makes reply fields of rows under what a book knows. */
export function exposurePresenter(reader: Reader, book: ClinicBook) {
  const corrected = hasCorrections(reader);
  return (row: ExposureRow) => {
    const corrections = corrected ? listCorrections(reader, row.id, { asOf: book.asOf }) : [];
    const { exposure, status, corrections: count } = effective(row, corrections);
    const { response, delivered } = doseOf(exposure, book.device(row.deviceId)!);
    const { basis, factor, lapsed, closedByService, calibrationIds } = response;
    return {
      id: row.id,
      recordedAt: row.recordedAt,
      ...exposure,
      status,
      ...delivered,
      coverageFactor,
      calibration: { basis, factor, lapsed, closedByService, calibrationIds: [...calibrationIds] },
      asFirstRecorded: {
        deliveredFluenceJPerCm2: row.deliveredFluenceJPerCm2,
        lowJPerCm2: row.lowJPerCm2,
        highJPerCm2: row.highJPerCm2,
        calibrationIds: row.calibrationIds === '' ? [] : row.calibrationIds.split(' '),
        model: row.model,
      },
      restated: delivered.deliveredFluenceJPerCm2 !== row.deliveredFluenceJPerCm2,
      incomplete: missingFields(exposure),
      corrections: count,
    };
  };
}

function alertBrief({ id, rule, severity, content }: AlertRecord) {
  return { id, rule, severity, text: content.text };
}

type Accepted = Extract<Logged, { status: 'stored' | 'duplicate' }>;

export function presentStored({ id, status, exposure, dose, alerts }: Accepted) {
  const { relativeUncertainty: _, ...figures } = dose.delivered;
  return { id, status, ...figures, incomplete: missingFields(exposure), alerts: alerts.map(alertBrief) };
}

export interface BatchItem {
  readonly index: number;
  readonly status: 'stored' | 'duplicate' | 'rejected';
  readonly id?: string;
  readonly errors?: readonly Fault[];
  readonly deliveredFluenceJPerCm2?: number;
  readonly lowJPerCm2?: number;
  readonly highJPerCm2?: number;
  readonly alerts?: readonly { readonly id: string; readonly rule: string; readonly severity: string; readonly text: string }[];
}

export function presentLogged(index: number, logged: Logged): BatchItem {
  if ('errors' in logged) return { index, status: 'rejected', errors: logged.errors };
  const { deliveredFluenceJPerCm2, lowJPerCm2, highJPerCm2 } = logged.dose.delivered;
  return {
    index,
    status: logged.status,
    id: logged.id,
    deliveredFluenceJPerCm2,
    lowJPerCm2,
    highJPerCm2,
    alerts: logged.alerts.map(alertBrief),
  };
}

const csvColumns = [
  'id',
  'device_id',
  'external_id',
  'at',
  'recorded_at',
  'status',
  'course_id',
  'protocol_id',
  'wavelength_nm',
  'spot_shape',
  'spot_diameter_mm',
  'spot_width_mm',
  'spot_height_mm',
  'pulse_duration_s',
  'set_pulse_energy_j',
  'set_fluence_j_per_cm2',
  'pulse_count',
  'stack_count',
  'delivered_fluence_j_per_cm2',
  'low_j_per_cm2',
  'high_j_per_cm2',
  'calibration_basis',
  'calibration_lapsed',
  'handpiece',
  'repetition_rate_hz',
  'cooling',
  'pass_number',
  'site',
  'end_point',
  'operator',
];

function csvRow(item: ExposureReply): (string | number | boolean | null)[] {
  const { spot, pulse } = item;
  return [
    item.id,
    item.deviceId,
    item.externalId,
    item.at,
    item.recordedAt,
    item.status,
    item.courseId ?? null,
    item.protocolId ?? null,
    item.wavelengthNm,
    spot.shape,
    'diameterMm' in spot ? spot.diameterMm : null,
    'widthMm' in spot ? spot.widthMm : null,
    'heightMm' in spot ? spot.heightMm : null,
    'durationS' in pulse ? pulse.durationS : null,
    item.set.pulseEnergyJ ?? null,
    item.setFluenceJPerCm2,
    item.pulseCount,
    item.stackCount ?? 1,
    item.deliveredFluenceJPerCm2,
    item.lowJPerCm2,
    item.highJPerCm2,
    item.calibration.basis,
    item.calibration.lapsed,
    known(item.handpiece),
    known(item.repetitionRateHz),
    known(item.cooling)?.kind ?? null,
    known(item.passNumber),
    known(item.site),
    known(item.endPoint),
    known(item.operator),
  ];
}

/** Rows as CSV; cells that a spreadsheet would take for formulas are made harmless. */
export function csvText(items: readonly ExposureReply[], withHeader: boolean): string {
  const rows: unknown[][] = items.map(csvRow);
  return stringify(withHeader ? [csvColumns, ...rows] : rows, {
    escape_formulas: true,
    record_delimiter: 'windows',
    cast: { boolean: String },
  });
}

export function ndjsonText(items: readonly object[]): string {
  return items.map((item) => `${JSON.stringify(item)}\n`).join('');
}
