import type { Reader } from '../../db/reader.js';
import { type AlertRecord, acknowledgmentOf } from './alerts.store.js';

/** Reply fields of an alert, with its acknowledgment as known at a time. */
export function presentAlert(reader: Reader, { content, atMs, ...alert }: AlertRecord, asOf: string | undefined) {
  const known = acknowledgmentOf(reader, alert.id, asOf);
  const acknowledgment = known && { id: known.id, recordedAt: known.recordedAt, ...known.content };
  return { ...alert, ...content, at: new Date(atMs).toISOString(), acknowledgment };
}
