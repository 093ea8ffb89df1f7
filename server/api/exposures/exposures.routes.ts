import type { Readable } from 'node:stream';
import { z } from 'zod';
import { actorOf, clinicOf } from '../../http/actor.js';
import type { App } from '../../http/app-type.js';
import { registerChildRoutes } from '../../http/child-routes.js';
import { preferredType } from '../../http/hooks.js';
import { decodeCursor, defaultLimit, pageOf } from '../../http/paging.js';
import { asOfQuery, sendItem, utcText } from '../../http/records.js';
import { Banner, bannered, itemReplies, listReplies, refusals } from '../../http/replies.js';
import { RequestError } from '../../http/request-error.js';
import { validatorCompiler } from '../../http/validation.js';
import type { Parts } from '../../parts.js';
import { id } from '../../schemas/numbers.js';
import { ClinicBook, presentBook } from './clinic-book.store.js';
import { correctExposure } from './corrections.actions.js';
import { logExposures } from './exposures.actions.js';
import { exposurePresenter, presentLogged, presentStored } from './exposures.present.js';
import {
  BatchResult,
  CorrectionItem,
  CorrectionRequest,
  ExposureBody,
  ExposureItem,
  ExposureQuery,
  mostItems,
  StoredExposure,
} from './exposures.schema.js';
import {
  type CorrectionBody,
  type CorrectionRecord,
  findCorrection,
  findExposure,
  listCorrections,
  listExposures,
} from './exposures.store.js';
import { exportStream, logStream } from './exposures.stream.js';

const path = '/v1/exposures';
const ndjson = 'application/x-ndjson';
const listTypes = ['application/json', 'text/csv', ndjson] as const;
const batchBytes = 32 * 1024 * 1024;

export function registerExposuresRoutes(app: App, parts: Parts): void {
  const tags = ['exposures'];
  app.addContentTypeParser(ndjson, (_request, payload, done) => done(null, payload));
  app.post(
    path,
    {
      config: { role: 'operator', idempotent: true, produces: ['application/json', ndjson] },
      bodyLimit: batchBytes,
      validatorCompiler: (part) =>
        part.httpPart === 'body' ? (value: unknown) => ({ value }) : validatorCompiler(part as never),
      preValidation: async (request) => refuseKeyWithLines(request.headers),
      schema: {
        tags,
        summary: 'Log exposures: one, a batch, or a stream of lines',
        consumes: ['application/json', ndjson],
        body: ExposureBody,
        response: {
          200: z.union([
            z.object({ banner: Banner, items: z.array(BatchResult) }),
            z.object({ banner: Banner, item: StoredExposure }),
          ]),
          201: z.object({ banner: Banner, item: StoredExposure }),
          ...refusals,
        },
      },
    },
    async (request, reply) => {
      clinicOf(request);
      const actor = actorOf(request);
      const body: unknown = request.body;
      if (request.headers['content-type']?.startsWith(ndjson)) {
        return reply.type(`${ndjson}; charset=utf-8`).send((await logStream(parts, actor, body as Readable)) as never);
      }
      if (body === null || typeof body !== 'object' || !('items' in body)) return reply.send(logOne(body));
      const items = itemsOf(body);
      return reply
        .type('application/json; charset=utf-8')
        .serializer(JSON.stringify)
        .send(
          bannered({ items: logExposures(parts, actor, items).map((logged, index) => presentLogged(index, logged)) }) as never,
        );

      function logOne(given: unknown) {
        const logged = logExposures(parts, actor, [given])[0]!;
        if ('errors' in logged) {
          if (logged.status === 'conflict')
            throw new RequestError('conflict', 'The exposure is known with other content.', logged.errors);
          throw new RequestError('invalid-request', 'The exposure cannot be stored; see errors.', logged.errors);
        }
        const item = presentStored(logged);
        if (item.status === 'stored') reply.code(201);
        reply.header('location', `${path}/${item.id}`);
        return bannered({ item });
      }
    },
  );

  app.get(
    path,
    {
      config: { role: 'reader', produces: listTypes },
      schema: {
        tags,
        summary: 'List exposures by time, or stream all of them as CSV or NDJSON',
        querystring: ExposureQuery,
        response: listReplies(ExposureItem),
      },
    },
    async (request, reply) => {
      const reader = parts.ledger.reader(clinicOf(request));
      const { limit = defaultLimit, cursor, from, to, deviceId, courseId } = request.query;
      const asOf = utcText(request.query.asOf);
      const book = asOf === undefined ? presentBook(reader) : new ClinicBook(reader, asOf);
      const filter = { deviceId, courseId, asOf, fromMs: msOf(from), toMs: msOf(to) };
      parts.access.note(actorOf(request), path, courseId ?? deviceId ?? '*');
      const type = preferredType(request.headers.accept, listTypes);
      if (type !== 'application/json')
        return reply.type(`${type}; charset=utf-8`).send(exportStream(reader, book, filter, type) as never);
      const position = decodeCursor(cursor, 2);
      const after: readonly [number, number] | undefined = position ? [Number(position[0]), Number(position[1])] : undefined;
      const rows = listExposures(reader, { ...filter, after, count: limit + 1 });
      const { items, next } = pageOf(request, reply, rows, limit, (row) => [row.atMs, row.rowNo]);
      return reply.send(bannered({ items: items.map(exposurePresenter(reader, book)), next }));
    },
  );

  app.get(
    `${path}/:id`,
    {
      config: { role: 'reader' },
      schema: {
        tags,
        summary: 'Read an exposure',
        params: z.strictObject({ id }),
        querystring: z.strictObject(asOfQuery),
        response: itemReplies(ExposureItem),
      },
    },
    async (request, reply) => {
      const reader = parts.ledger.reader(clinicOf(request));
      const asOf = utcText(request.query.asOf);
      const row = findExposure(reader, request.params.id, asOf);
      if (!row) throw new RequestError('not-found', 'There is no such exposure.');
      const item = exposurePresenter(reader, new ClinicBook(reader, asOf))(row);
      parts.access.note(actorOf(request), `${path}/:id`, row.id);
      return reply.send(sendItem(reply, item, 1 + item.corrections));
    },
  );

  registerChildRoutes<CorrectionBody, CorrectionRecord>(app, {
    parentPath: path,
    name: 'corrections',
    parentNoun: 'exposure',
    noun: 'correction',
    body: CorrectionRequest,
    item: CorrectionItem,
    writeRole: 'operator',
    parentExists: ({ clinicId }, exposureId) => findExposure(parts.ledger.reader(clinicId), exposureId) !== null,
    list: ({ clinicId }, exposureId, options) => listCorrections(parts.ledger.reader(clinicId), exposureId, options),
    find: ({ clinicId }, childId, asOf) => findCorrection(parts.ledger.reader(clinicId), childId, asOf),
    create: (actor, exposureId, body) => correctExposure(parts, actor, exposureId, body),
    present: (_actor, exposureId, kept) =>
      kept.map(({ id, recordedAt, content }) => ({ id, exposureId, recordedAt, ...content })),
    onRead: (actor, route, exposureId) => parts.access.note(actor, route, exposureId),
  });
}

const msOf = (at: string | undefined) => (at === undefined ? undefined : Date.parse(at));

function refuseKeyWithLines(headers: Readonly<Record<string, unknown>>): void {
  if (headers['idempotency-key'] === undefined || !String(headers['content-type']).startsWith(ndjson)) return;
  throw new RequestError(
    'malformed',
    'A stream of lines takes no Idempotency-Key: each line is known by deviceId and externalId.',
  );
}

function itemsOf(body: object & { items?: unknown }): readonly unknown[] {
  const { items, ...others } = body;
  const errors = Object.keys(others).map((name) => ({ pointer: `/${name}`, detail: 'unknown field; remove it' }));
  if (!Array.isArray(items) || items.length === 0 || items.length > mostItems)
    errors.push({ pointer: '/items', detail: `must be a list of 1 to ${mostItems} exposures` });
  if (errors.length > 0) throw new RequestError('invalid-request', 'The batch cannot be read; see errors.', errors);
  return items as readonly unknown[];
}
