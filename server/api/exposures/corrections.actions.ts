import { uuidv7 } from 'uuidv7';
import { evaluateAlerts } from '../../../domain/alerts/index.js';
import type { Writer } from '../../audit/with-audit.js';
import type { Actor } from '../../http/actor.js';
import { RequestError } from '../../http/request-error.js';
import { faultsOf } from '../../http/validation.js';
import type { Parts } from '../../parts.js';
import { alertsOfExposure, insertAlert } from '../alerts/alerts.store.js';
import { presentBook } from './clinic-book.store.js';
import { doseOf, factsOf } from './exposure-facts.js';
import { type EffectiveExposure, effective } from './exposure-versions.js';
import { ExposureRequest } from './exposures.schema.js';
import {
  type CorrectionBody,
  type CorrectionRecord,
  findExposure,
  insertCorrection,
  listCorrections,
} from './exposures.store.js';

/** Keeps the right values beside the wrong ones, and puts the corrected exposure to the rules. */
export function correctExposure({ ledger }: Parts, actor: Actor, exposureId: string, body: CorrectionBody): CorrectionRecord {
  const id = uuidv7();
  return ledger.change({ clinicId: actor.clinicId, actor, kind: 'exposure.corrected', subject: exposureId }, (writer) => {
    const row = findExposure(writer, exposureId)!;
    const earlier = listCorrections(writer, exposureId);
    if (earlier.some(({ content }) => content.enteredInError))
      throw new RequestError(
        'conflict',
        'This exposure is marked as entered in error; store the right one under another external id.',
      );
    const correction = insertCorrection(writer, id, exposureId, { ...body, by: body.by ?? `key ${actor.keyId}` });
    if (body.changes) judge(writer, effective(row, [...earlier, correction]));
    return correction;
  });
}

function judge(writer: Writer, { row, exposure }: EffectiveExposure): void {
  const parsed = ExposureRequest.safeParse(exposure);
  if (!parsed.success) {
    const errors = faultsOf(parsed.error.issues, false, ['changes']);
    throw new RequestError('invalid-request', 'The corrected exposure would not be valid; see errors.', errors);
  }
  const book = presentBook(writer);
  const file = book.device(row.deviceId)!;
  const protocol = exposure.protocolId === undefined ? 'none' : book.protocol(exposure.protocolId, row.atMs);
  if (protocol === null) {
    const errors = [{ pointer: '/changes/protocolId', detail: 'must be the id of a protocol of this clinic' }];
    throw new RequestError('invalid-request', 'The corrected exposure would not be valid; see errors.', errors);
  }
  const raised = alertsOfExposure(writer, row.id);
  const place = { deviceId: row.deviceId, exposureId: row.id, courseId: row.courseId, atMs: row.atMs };
  for (const finding of evaluateAlerts(factsOf(exposure, file, doseOf(exposure, file), protocol, null))) {
    if (raised.some(({ rule, content }) => rule === finding.rule && content.text === finding.text)) continue;
    insertAlert(writer, place, finding);
  }
}
