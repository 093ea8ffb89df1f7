import { uuidv7 } from 'uuidv7';
import type { z } from 'zod';
import type { Actor } from '../../http/actor.js';
import { RequestError } from '../../http/request-error.js';
import type { Parts } from '../../parts.js';
import type { AcknowledgmentRequest } from './alerts.schema.js';
import { type AcknowledgmentRecord, acknowledgmentOf, insertAcknowledgment } from './alerts.store.js';

export type AcknowledgmentBody = z.output<typeof AcknowledgmentRequest>;

export function acknowledge({ ledger }: Parts, actor: Actor, alertId: string, body: AcknowledgmentBody): AcknowledgmentRecord {
  const id = uuidv7();
  return ledger.change({ clinicId: actor.clinicId, actor, kind: 'alert.acknowledged', subject: alertId }, (writer) => {
    if (acknowledgmentOf(writer, alertId)) throw new RequestError('conflict', 'This alert is acknowledged already.');
    const content = { ...body, by: body.by ?? `key ${actor.keyId}` };
    return insertAcknowledgment(writer, id, alertId, Date.parse(writer.at), content);
  });
}
