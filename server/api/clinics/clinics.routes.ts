import { actorOf } from '../../http/actor.js';
import type { App } from '../../http/app-type.js';
import { decodeCursor, defaultLimit, pageOf } from '../../http/paging.js';
import { sendCreated, sendItem } from '../../http/records.js';
import { bannered, itemReplies, listReplies } from '../../http/replies.js';
import { requireVersion } from '../../http/versions.js';
import type { Parts } from '../../parts.js';
import { assertOfInstallation, changeClinic, openClinic, readClinic } from './clinics.actions.js';
import { ClinicItem, ClinicParams, ClinicQuery, ClinicRequest } from './clinics.schema.js';
import { type ClinicRecord, listClinics } from './clinics.store.js';

const presentClinic = ({ id, version, recordedAt, content }: ClinicRecord) => ({ id, version, recordedAt, ...content });

export function registerClinicsRoutes(app: App, parts: Parts): void {
  const config = { role: 'administrator' as const };
  const tags = ['clinics'];
  const path = '/v1/clinics';
  app.post(
    path,
    {
      config: { ...config, idempotent: true },
      schema: { tags, summary: 'Open a clinic', body: ClinicRequest, response: itemReplies(ClinicItem, 201) },
    },
    async (request, reply) => {
      assertOfInstallation(actorOf(request));
      const clinic = openClinic(parts, actorOf(request), request.body);
      return reply.send(sendCreated(reply, `${path}/${clinic.id}`, presentClinic(clinic)));
    },
  );
  app.get(
    path,
    { config, schema: { tags, summary: 'List clinics', querystring: ClinicQuery, response: listReplies(ClinicItem) } },
    async (request, reply) => {
      assertOfInstallation(actorOf(request));
      const { limit = defaultLimit, cursor } = request.query;
      const after = String(decodeCursor(cursor, 1)?.[0] ?? '');
      const { items, next } = pageOf(request, reply, listClinics(parts.ledger.reader(null), after, limit + 1), limit, (row) => [
        row.id,
      ]);
      return bannered({ items: items.map(presentClinic), next });
    },
  );
  app.get(
    `${path}/:id`,
    { config, schema: { tags, summary: 'Read a clinic', params: ClinicParams, response: itemReplies(ClinicItem) } },
    async (request, reply) => {
      assertOfInstallation(actorOf(request));
      const clinic = readClinic(parts, request.params.id);
      return sendItem(reply, presentClinic(clinic), clinic.version);
    },
  );
  app.put(
    `${path}/:id`,
    {
      config,
      schema: { tags, summary: 'Change a clinic', params: ClinicParams, body: ClinicRequest, response: itemReplies(ClinicItem) },
    },
    async (request, reply) => {
      assertOfInstallation(actorOf(request));
      const isCurrent = (version: number) => requireVersion(request, version);
      const clinic = changeClinic(parts, actorOf(request), request.params.id, request.body, isCurrent);
      return sendItem(reply, presentClinic(clinic), clinic.version);
    },
  );
}
