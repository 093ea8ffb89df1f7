import { createHash } from 'node:crypto';
import type { FastifyInstance, FastifyReply, FastifyRequest } from 'fastify';
import { actorOf } from './actor.js';
import { RequestError } from './request-error.js';

/** A stored answer to a creating request. */
export interface StoredReply {
  readonly requestSha256: string;
  readonly status: number | null;
  readonly headers: string | null;
  readonly body: Buffer | string | null;
}

/** Where answers are kept by scope and key. */
export interface ReplyShelf {
  find(scope: string, key: string): StoredReply | null;
  /** False when the key is taken already. */
  begin(scope: string, key: string, requestSha256: string): boolean;
  finish(scope: string, key: string, status: number, headers: string, body: string): void;
  drop(scope: string, key: string): void;
}

const keptHeaders = ['location', 'etag', 'content-type'];

interface Pending {
  readonly scope: string;
  readonly key: string;
}

const pending = new WeakMap<FastifyRequest, Pending>();

/** Routes marked `idempotent` answer a repeated Idempotency-Key with the first answer. */
export function installIdempotency(app: FastifyInstance, shelf: ReplyShelf): void {
  app.addHook('preHandler', async (request, reply) => {
    const given = request.headers['idempotency-key'];
    if (!request.routeOptions.config.idempotent || given === undefined) return undefined;
    const key = String(given);
    if (!/^[\x21-\x7e]{1,200}$/.test(key))
      throw new RequestError('malformed', 'Idempotency-Key must be 1 to 200 visible characters.');
    const actor = actorOf(request);
    const scope = `${actor.clinicId ?? actor.keyId} ${request.method} ${request.url}`;
    const requestSha256 = createHash('sha256').update(JSON.stringify(request.body)).digest('hex');
    if (shelf.begin(scope, key, requestSha256)) {
      pending.set(request, { scope, key });
      return undefined;
    }
    return replay(reply, shelf.find(scope, key), requestSha256);
  });
  app.addHook('onSend', async (request, reply, payload) => {
    const open = pending.get(request);
    if (!open) return payload;
    pending.delete(request);
    if (reply.statusCode >= 500 || typeof payload !== 'string') {
      shelf.drop(open.scope, open.key);
      return payload;
    }
    const headers = Object.fromEntries(
      keptHeaders.flatMap((name) => (reply.hasHeader(name) ? [[name, reply.getHeader(name)]] : [])),
    );
    shelf.finish(open.scope, open.key, reply.statusCode, JSON.stringify(headers), payload);
    return payload;
  });
}

function replay(reply: FastifyReply, stored: StoredReply | null, requestSha256: string): FastifyReply {
  if (stored && stored.requestSha256 !== requestSha256) {
    throw new RequestError('invalid-request', 'This Idempotency-Key was used with another body.');
  }
  if (!stored || stored.status === null) {
    throw new RequestError('conflict', 'A request with this Idempotency-Key is still in progress.', [], { 'retry-after': '1' });
  }
  reply
    .code(stored.status)
    .headers(JSON.parse(stored.headers ?? '{}') as Record<string, string>)
    .header('idempotent-replay', 'true');
  return reply.serializer((payload) => String(payload)).send(String(stored.body ?? ''));
}
