import { z } from 'zod';
import { id } from '../schemas/numbers.js';
import { type Actor, actorOf, clinicOf, type Role } from './actor.js';
import type { App } from './app-type.js';
import { decodeCursor, defaultLimit, pageOf, pageQuery } from './paging.js';
import { asOfQuery, sendCreated, sendItem, utcText } from './records.js';
import { bannered, itemReplies, listReplies } from './replies.js';
import { RequestError } from './request-error.js';

interface Child {
  readonly id: string;
  readonly atMs: number | null;
  readonly parentId: string | null;
}

/** Dated records of one parent, never changed: a device's calibrations, checks and services; corrections; approvals. */
export interface ChildRoom<Body, Kept extends Child> {
  /** Path of the parent with `:id`, and of its records below it. */
  readonly parentPath: string;
  readonly name: string;
  readonly parentNoun: string;
  readonly noun: string;
  readonly body: z.ZodType<Body>;
  readonly item: z.ZodType;
  readonly writeRole: Role;
  parentExists(actor: Actor, parentId: string): boolean;
  list(
    actor: Actor,
    parentId: string,
    options: { after: [number, string] | undefined; count: number; asOf: string | undefined },
  ): Kept[];
  find(actor: Actor, id: string, asOf: string | undefined): Kept | null;
  /** The parent is there. */
  create(actor: Actor, parentId: string, body: Body): Kept;
  /** Reply fields of records of one parent. */
  present(actor: Actor, parentId: string, kept: readonly Kept[], asOf: string | undefined): unknown[];
  onRead?(actor: Actor, path: string, parentId: string): void;
}

const ParentParams = z.strictObject({ id });
const ChildParams = z.strictObject({ id, childId: id });
const ItemQuery = z.strictObject(asOfQuery);
const ListQuery = z.strictObject({ ...pageQuery, ...asOfQuery });

/** Create, list by time, and read one. */
export function registerChildRoutes<Body, Kept extends Child>(app: App, room: ChildRoom<Body, Kept>): void {
  const path = `${room.parentPath}/:id/${room.name}`;
  const tags = [room.name];
  const read = { role: 'reader' as const };
  const requireParent = (actor: Actor, parentId: string) => {
    if (!room.parentExists(actor, parentId)) throw new RequestError('not-found', `There is no such ${room.parentNoun}.`);
  };
  app.post(
    path,
    {
      config: { role: room.writeRole, idempotent: true },
      schema: {
        tags,
        summary: `Add a ${room.noun}`,
        params: ParentParams,
        body: room.body,
        response: itemReplies(room.item, 201),
      },
    },
    async (request, reply) => {
      clinicOf(request);
      const actor = actorOf(request);
      const parentId = request.params.id;
      requireParent(actor, parentId);
      const kept = room.create(actor, parentId, request.body as Body);
      const [item] = room.present(actor, parentId, [kept], undefined);
      return reply.send(sendCreated(reply, `${path.replace(':id', parentId)}/${kept.id}`, item));
    },
  );
  app.get(
    path,
    {
      config: read,
      schema: {
        tags,
        summary: `List each ${room.noun}, oldest first`,
        params: ParentParams,
        querystring: ListQuery,
        response: listReplies(room.item),
      },
    },
    async (request, reply) => {
      clinicOf(request);
      const actor = actorOf(request);
      const parentId = request.params.id;
      requireParent(actor, parentId);
      const { limit = defaultLimit, cursor } = request.query;
      const position = decodeCursor(cursor, 2);
      const after: [number, string] | undefined = position ? [Number(position[0]), String(position[1])] : undefined;
      const asOf = utcText(request.query.asOf);
      const rows = room.list(actor, parentId, { after, count: limit + 1, asOf });
      const { items, next } = pageOf(request, reply, rows, limit, (row) => [row.atMs ?? 0, row.id]);
      room.onRead?.(actor, path, parentId);
      return bannered({ items: room.present(actor, parentId, items, asOf), next });
    },
  );
  app.get(
    `${path}/:childId`,
    {
      config: read,
      schema: {
        tags,
        summary: `Read a ${room.noun}`,
        params: ChildParams,
        querystring: ItemQuery,
        response: itemReplies(room.item),
      },
    },
    async (request, reply) => {
      clinicOf(request);
      const actor = actorOf(request);
      const { id: parentId, childId } = request.params;
      const asOf = utcText(request.query.asOf);
      const kept = room.find(actor, childId, asOf);
      if (!kept || kept.parentId !== parentId) throw new RequestError('not-found', `There is no such ${room.noun}.`);
      room.onRead?.(actor, `${path}/:childId`, parentId);
      const [item] = room.present(actor, parentId, [kept], asOf);
      return reply.send(sendItem(reply, item, 1));
    },
  );
}
