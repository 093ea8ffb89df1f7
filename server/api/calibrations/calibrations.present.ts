import type { Reader } from '../../db/reader.js';
import { listServices } from '../services/services.store.js';
import { type CalibrationRecord, listCalibrations, supersededBy } from './calibrations.store.js';

/** Reply fields of calibrations of one device, with their status at a time. */
export function presentCalibrations(
  reader: Reader,
  deviceId: string,
  records: readonly CalibrationRecord[],
  at: string,
  asOf: string | undefined,
) {
  const replaced = supersededBy(listCalibrations(reader, deviceId, { asOf }));
  const serviceTimesMs = listServices(reader, deviceId, { asOf }).map(({ atMs }) => atMs!);
  const nowMs = Date.parse(at);
  return records.map(({ id, recordedAt, atMs, content }) => {
    const { notTraceableBecause, ...fields } = content;
    const untraceable = notTraceableBecause.length > 0;
    const closed = serviceTimesMs.some((ms) => ms > atMs! && ms <= nowMs);
    const status = replaced.has(id)
      ? 'superseded'
      : untraceable
        ? 'not-traceable'
        : closed
          ? 'closed-by-service'
          : Date.parse(content.validUntil) < nowMs
            ? 'lapsed'
            : 'in-force';
    return {
      id,
      deviceId,
      recordedAt,
      ...fields,
      traceability: untraceable ? 'not-traceable' : content.meterId === undefined ? 'no-meter-named' : 'traceable',
      notTraceableBecause,
      status,
      supersededBy: replaced.get(id) ?? null,
    };
  });
}
