import { z } from 'zod';
import { actorOf } from '../../http/actor.js';
import type { App } from '../../http/app-type.js';
import { decodeCursor, defaultLimit, pageOf } from '../../http/paging.js';
import { bannered, itemReplies, listReplies, refusals } from '../../http/replies.js';
import type { Parts } from '../../parts.js';
import { makeKey, readKey, revokeKey } from './keys.actions.js';
import { KeyItem, KeyParams, KeyQuery, KeyRequest, NewKeyItem } from './keys.schema.js';
import type { KeyStore } from './keys.store.js';

export function registerKeysRoutes(app: App, parts: Parts, keys: KeyStore): void {
  const config = { role: 'administrator' as const };
  const tags = ['keys'];
  app.post(
    '/v1/keys',
    { config, schema: { tags, summary: 'Make a key', body: KeyRequest, response: itemReplies(NewKeyItem, 201) } },
    async (request, reply) => {
      const item = makeKey(parts, keys, actorOf(request), request.body);
      return reply
        .code(201)
        .header('location', `/v1/keys/${item.id}`)
        .header('cache-control', 'no-store')
        .send(bannered({ item }));
    },
  );
  app.get(
    '/v1/keys',
    { config, schema: { tags, summary: 'List keys', querystring: KeyQuery, response: listReplies(KeyItem) } },
    async (request, reply) => {
      const { limit = defaultLimit, cursor } = request.query;
      const after = String(decodeCursor(cursor, 1)?.[0] ?? '');
      const rows = keys.list(actorOf(request).clinicId, after, limit + 1);
      return reply.send(bannered(pageOf(request, reply, rows, limit, (row) => [row.id])));
    },
  );
  app.get(
    '/v1/keys/:id',
    { config, schema: { tags, summary: 'Read a key', params: KeyParams, response: itemReplies(KeyItem) } },
    async (request) => bannered({ item: readKey(keys, actorOf(request), request.params.id) }),
  );
  app.delete(
    '/v1/keys/:id',
    { config, schema: { tags, summary: 'Revoke a key', params: KeyParams, response: { 204: z.null(), ...refusals } } },
    async (request, reply) => {
      revokeKey(parts, keys, actorOf(request), request.params.id);
      return reply.code(204).send(null);
    },
  );
}
