import { z } from 'zod';
import { actorOf, clinicOf } from '../../http/actor.js';
import type { App } from '../../http/app-type.js';
import { registerChildRoutes } from '../../http/child-routes.js';
import { decodeCursor, defaultLimit, pageOf } from '../../http/paging.js';
import { asOfQuery, sendItem, utcText } from '../../http/records.js';
import { bannered, itemReplies, listReplies } from '../../http/replies.js';
import { RequestError } from '../../http/request-error.js';
import type { Parts } from '../../parts.js';
import { id } from '../../schemas/numbers.js';
import { type AcknowledgmentBody, acknowledge } from './alerts.actions.js';
import { presentAlert } from './alerts.present.js';
import { AcknowledgmentItem, AcknowledgmentRequest, AlertItem, AlertQuery } from './alerts.schema.js';
import { type AcknowledgmentRecord, acknowledgmentOf, findAcknowledgment, findAlert, listAlerts } from './alerts.store.js';

export function registerAlertsRoutes(app: App, parts: Parts): void {
  const { ledger, access } = parts;
  const config = { role: 'reader' as const };
  const tags = ['alerts'];
  const path = '/v1/alerts';
  app.get(
    path,
    { config, schema: { tags, summary: 'List alerts, newest first', querystring: AlertQuery, response: listReplies(AlertItem) } },
    async (request, reply) => {
      const reader = ledger.reader(clinicOf(request));
      const { limit = defaultLimit, cursor, acknowledged, ...query } = request.query;
      const filter = {
        ...query,
        asOf: utcText(query.asOf),
        acknowledged: acknowledged === undefined ? undefined : acknowledged === 'true',
      };
      const before = decodeCursor(cursor, 1)?.[0];
      const rows = listAlerts(reader, { ...filter, before: before === undefined ? undefined : String(before), count: limit + 1 });
      const { items, next } = pageOf(request, reply, rows, limit, (row) => [row.id]);
      access.note(actorOf(request), path, '*');
      return bannered({ items: items.map((alert) => presentAlert(reader, alert, filter.asOf)), next });
    },
  );
  app.get(
    `${path}/:id`,
    {
      config,
      schema: {
        tags,
        summary: 'Read an alert',
        params: z.strictObject({ id }),
        querystring: z.strictObject(asOfQuery),
        response: itemReplies(AlertItem),
      },
    },
    async (request, reply) => {
      const reader = ledger.reader(clinicOf(request));
      const asOf = utcText(request.query.asOf);
      const alert = findAlert(reader, request.params.id, asOf);
      if (!alert) throw new RequestError('not-found', 'There is no such alert.');
      access.note(actorOf(request), `${path}/:id`, alert.id);
      const item = presentAlert(reader, alert, asOf);
      return sendItem(reply, item, item.acknowledgment ? 2 : 1);
    },
  );
  registerChildRoutes<AcknowledgmentBody, AcknowledgmentRecord>(app, {
    parentPath: path,
    name: 'acknowledgments',
    parentNoun: 'alert',
    noun: 'acknowledgment',
    body: AcknowledgmentRequest,
    item: AcknowledgmentItem,
    writeRole: 'operator',
    parentExists: ({ clinicId }, alertId) => findAlert(ledger.reader(clinicId), alertId) !== null,
    list: ({ clinicId }, alertId, { after, asOf }) => {
      const known = after ? null : acknowledgmentOf(ledger.reader(clinicId), alertId, asOf);
      return known ? [known] : [];
    },
    find: ({ clinicId }, childId, asOf) => findAcknowledgment(ledger.reader(clinicId), childId, asOf),
    create: (actor, alertId, body) => acknowledge(parts, actor, alertId, body),
    present: (_actor, alertId, kept) => kept.map(({ id, recordedAt, content }) => ({ id, alertId, recordedAt, ...content })),
  });
}
