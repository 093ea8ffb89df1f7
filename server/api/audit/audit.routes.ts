import { Readable } from 'node:stream';
import type { FastifyReply } from 'fastify';
import { actorOf } from '../../http/actor.js';
import type { App } from '../../http/app-type.js';
import { preferredType } from '../../http/hooks.js';
import { defaultLimit } from '../../http/paging.js';
import { bannered, itemReplies, listReplies } from '../../http/replies.js';
import type { Parts } from '../../parts.js';
import { auditLines, checkpointNow, listCheckpoints, listEntries, verify } from './audit.actions.js';
import { AuditQuery, CheckpointItem, EntryItem, VerificationItem, VerifyQuery } from './audit.schema.js';

export function registerAuditRoutes(app: App, parts: Parts): void {
  const tags = ['audit'];
  const config = { role: 'reader' as const };
  const types = ['application/json', 'application/x-ndjson'] as const;
  app.get(
    '/v1/audit',
    {
      config: { ...config, produces: types },
      schema: {
        tags,
        summary: "List the entries of the clinic's chain; as application/x-ndjson the whole chain with the rows it seals",
        querystring: AuditQuery,
        response: listReplies(EntryItem),
      },
    },
    async (request, reply) => {
      const actor = actorOf(request);
      if (preferredType(request.headers.accept, types) !== 'application/json') {
        const lines = Readable.from(auditLines(parts, actor, true));
        return reply.type('application/x-ndjson; charset=utf-8').send(lines as never);
      }
      const { after = 0, limit = defaultLimit } = request.query;
      return reply.send(bannered(nextPage(reply, '/v1/audit', listEntries(parts, actor, after, limit + 1), limit)));
    },
  );
  app.get(
    '/v1/audit/verify',
    {
      config,
      schema: {
        tags,
        summary: 'Verify the whole chain, every row it seals, and a checkpoint kept elsewhere',
        querystring: VerifyQuery,
        response: itemReplies(VerificationItem),
      },
    },
    async (request) => {
      const { checkpointSeq: seq, checkpointHash: hash } = request.query;
      const kept = seq === undefined || hash === undefined ? [] : [{ seq, hash }];
      return bannered({ item: await verify(parts, actorOf(request), kept) });
    },
  );
  app.get(
    '/v1/audit/checkpoints',
    {
      config,
      schema: { tags, summary: 'List signed checkpoints', querystring: AuditQuery, response: listReplies(CheckpointItem) },
    },
    async (request, reply) => {
      const { after = 0, limit = defaultLimit } = request.query;
      const rows = listCheckpoints(parts, actorOf(request), after, limit + 1);
      return reply.send(bannered(nextPage(reply, '/v1/audit/checkpoints', rows, limit)));
    },
  );
  app.post(
    '/v1/audit/checkpoints',
    {
      config: { role: 'operator' },
      schema: { tags, summary: 'Sign the present head of the chain', response: itemReplies(CheckpointItem, 201) },
    },
    async (request, reply) => {
      const item = checkpointNow(parts, actorOf(request));
      return reply.code(201).header('location', '/v1/audit/checkpoints').send(bannered({ item }));
    },
  );
}

// The chain has its own position: the number of the last entry.
function nextPage<T extends { readonly seq: number }>(reply: FastifyReply, path: string, rows: readonly T[], limit: number) {
  const items = rows.slice(0, limit);
  const last = items[items.length - 1];
  if (rows.length <= limit || !last) return { items, next: null };
  reply.header('link', `<${path}?after=${last.seq}&limit=${limit}>; rel="next"`);
  return { items, next: String(last.seq) };
}
