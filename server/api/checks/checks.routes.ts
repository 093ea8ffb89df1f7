import { z } from 'zod';
import { actorOf, clinicOf } from '../../http/actor.js';
import type { App } from '../../http/app-type.js';
import { registerChildRoutes } from '../../http/child-routes.js';
import { utcText } from '../../http/records.js';
import { bannered, itemReplies } from '../../http/replies.js';
import type { Parts } from '../../parts.js';
import { id } from '../../schemas/numbers.js';
import { findDevice } from '../devices/devices.store.js';
import { addCheck, readDrift } from './checks.actions.js';
import { CheckItem, CheckRequest, DriftQuery, DriftResult } from './checks.schema.js';
import { type CheckBody, type CheckRecord, findCheck, listChecks } from './checks.store.js';

export function registerChecksRoutes(app: App, parts: Parts): void {
  const { ledger } = parts;
  registerChildRoutes<CheckBody, CheckRecord>(app, {
    parentPath: '/v1/devices',
    name: 'checks',
    parentNoun: 'device',
    noun: 'constancy check',
    body: CheckRequest,
    item: CheckItem,
    writeRole: 'operator',
    parentExists: ({ clinicId }, deviceId) => findDevice(ledger.reader(clinicId), deviceId) !== null,
    list: ({ clinicId }, deviceId, options) => listChecks(ledger.reader(clinicId), deviceId, options),
    find: ({ clinicId }, checkId, asOf) => findCheck(ledger.reader(clinicId), checkId, asOf),
    create: (actor, deviceId, body) => addCheck(parts, actor, deviceId, body),
    present: (_actor, deviceId, kept) => kept.map(({ id, recordedAt, content }) => ({ id, deviceId, recordedAt, ...content })),
  });
  app.get(
    '/v1/devices/:id/drift',
    {
      config: { role: 'reader' },
      schema: {
        tags: ['checks'],
        summary: 'Control charts of a device',
        params: z.strictObject({ id }),
        querystring: DriftQuery,
        response: itemReplies(DriftResult),
      },
    },
    async (request) => {
      clinicOf(request);
      const { wavelengthNm, handpiece, asOf } = request.query;
      const query = {
        ...(wavelengthNm === undefined ? {} : { wavelengthNm: Number(wavelengthNm) }),
        ...(handpiece === undefined ? {} : { handpiece }),
        ...(asOf === undefined ? {} : { asOf: utcText(asOf)! }),
      };
      return bannered({ item: readDrift(parts, actorOf(request), request.params.id, query) });
    },
  );
}
