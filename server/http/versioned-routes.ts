import { z } from 'zod';
import { id } from '../schemas/numbers.js';
import { type Actor, actorOf, clinicOf, type Role } from './actor.js';
import type { App } from './app-type.js';
import { decodeCursor, defaultLimit, pageOf, pageQuery } from './paging.js';
import { asOfQuery, sendCreated, sendItem, utcText } from './records.js';
import { bannered, itemReplies, listReplies } from './replies.js';
import { RequestError } from './request-error.js';
import { faultsOf } from './validation.js';
import { requireVersion } from './versions.js';

interface Versioned {
  readonly id: string;
  readonly version: number;
}

/** A resource whose every change is a new version. `Record` is what the room keeps, `Body` what clients send. */
export interface VersionedRoom<Body, Kept extends Versioned> {
  readonly path: string;
  readonly tag: string;
  readonly noun: string;
  readonly body: z.ZodType<Body>;
  readonly item: z.ZodType;
  readonly writeRole: Role;
  list(actor: Actor, options: { after: string; count: number; asOf: string | undefined }): Kept[];
  find(actor: Actor, id: string, asOf: string | undefined): Kept | null;
  create(actor: Actor, body: Body): Kept;
  /** Throws what `next` throws; null when there is no such record. */
  change(actor: Actor, id: string, next: (known: Kept) => Body): Kept | null;
  /** The body that would give the record; what a partial change is laid over. */
  bodyOf(kept: Kept): object;
  present(kept: Kept, actor: Actor, asOf: string | undefined): unknown;
  /** What only the read of one record shows. */
  presentOne?(kept: Kept, actor: Actor, asOf: string | undefined): unknown;
  /** The record tells of a person: reading it is noted. */
  onRead?(actor: Actor, path: string, id: string): void;
}

const Params = z.strictObject({ id });
const ItemQuery = z.strictObject(asOfQuery);
const ListQuery = z.strictObject({ ...pageQuery, ...asOfQuery });
const PatchBody = z.record(z.string(), z.unknown()).describe('The fields to change, each as in the whole record');

/** Create, list, read, replace and change in part, all with ETag and asOf. */
export function registerVersionedRoutes<Body, Kept extends Versioned>(app: App, room: VersionedRoom<Body, Kept>): void {
  const { path, noun } = room;
  const tags = [room.tag];
  const write = { role: room.writeRole };
  const read = { role: 'reader' as const };
  const missing = () => new RequestError('not-found', `There is no such ${noun}.`);
  app.post(
    path,
    {
      config: { ...write, idempotent: true },
      schema: { tags, summary: `Add a ${noun}`, body: room.body, response: itemReplies(room.item, 201) },
    },
    async (request, reply) => {
      clinicOf(request);
      const actor = actorOf(request);
      const kept = room.create(actor, request.body as Body);
      return reply.send(sendCreated(reply, `${path}/${kept.id}`, room.present(kept, actor, undefined), kept.version));
    },
  );
  app.get(
    path,
    { config: read, schema: { tags, summary: `List each ${noun}`, querystring: ListQuery, response: listReplies(room.item) } },
    async (request, reply) => {
      clinicOf(request);
      const actor = actorOf(request);
      const { limit = defaultLimit, cursor } = request.query;
      const asOf = utcText(request.query.asOf);
      const rows = room.list(actor, { after: String(decodeCursor(cursor, 1)?.[0] ?? ''), count: limit + 1, asOf });
      const { items, next } = pageOf(request, reply, rows, limit, (row) => [row.id]);
      room.onRead?.(actor, path, '*');
      return bannered({ items: items.map((kept) => room.present(kept, actor, asOf)), next });
    },
  );
  app.get(
    `${path}/:id`,
    {
      config: read,
      schema: { tags, summary: `Read a ${noun}`, params: Params, querystring: ItemQuery, response: itemReplies(room.item) },
    },
    async (request, reply) => {
      clinicOf(request);
      const actor = actorOf(request);
      const asOf = utcText(request.query.asOf);
      const kept = room.find(actor, request.params.id, asOf);
      if (!kept) throw missing();
      room.onRead?.(actor, `${path}/:id`, kept.id);
      const item = (room.presentOne ?? room.present)(kept, actor, asOf);
      return reply.send(sendItem(reply, item, kept.version));
    },
  );
  app.put(
    `${path}/:id`,
    {
      config: write,
      schema: {
        tags,
        summary: `Replace a ${noun} by a new version`,
        params: Params,
        body: room.body,
        response: itemReplies(room.item),
      },
    },
    async (request, reply) => {
      clinicOf(request);
      const actor = actorOf(request);
      const kept = room.change(actor, request.params.id, (known) => {
        requireVersion(request, known.version);
        return request.body as Body;
      });
      if (!kept) throw missing();
      return reply.send(sendItem(reply, room.present(kept, actor, undefined), kept.version));
    },
  );
  app.patch(
    `${path}/:id`,
    {
      config: write,
      schema: { tags, summary: `Change fields of a ${noun}`, params: Params, body: PatchBody, response: itemReplies(room.item) },
    },
    async (request, reply) => {
      clinicOf(request);
      const actor = actorOf(request);
      const kept = room.change(actor, request.params.id, (known) => {
        requireVersion(request, known.version);
        return merged(room.body, { ...room.bodyOf(known), ...request.body });
      });
      if (!kept) throw missing();
      return reply.send(sendItem(reply, room.present(kept, actor, undefined), kept.version));
    },
  );
}

function merged<Body>(schema: z.ZodType<Body>, fields: object): Body {
  const given = Object.fromEntries(Object.entries(fields).filter(([, value]) => value !== null));
  const parsed = schema.safeParse(given);
  if (parsed.success) return parsed.data;
  const faults = faultsOf(parsed.error.issues);
  throw new RequestError('invalid-request', 'The changed record would not be valid; see errors.', faults);
}
