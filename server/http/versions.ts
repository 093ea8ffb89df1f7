import { createHash } from 'node:crypto';
import type { FastifyReply, FastifyRequest } from 'fastify';
import { RequestError } from './request-error.js';

/** Strong ETag of a record's version. */
export function versionTag(version: number): string {
  return `"v${version}"`;
}

/** Requires that a change was made on the present version. Throws: precondition-required, stale. */
export function requireVersion(request: FastifyRequest, version: number): void {
  const given = request.headers['if-match'];
  if (given === undefined)
    throw new RequestError('precondition-required', 'Send If-Match with the ETag of the version you changed.');
  const tags = given.split(',').map((tag) => tag.trim());
  if (!tags.includes('*') && !tags.includes(versionTag(version))) {
    throw new RequestError('stale', 'The record has changed since; read it again.', [], { etag: versionTag(version) });
  }
}

/** Sends content that changes only with the program or its data: with ETag and Cache-Control, or 304 when the caller has it. */
export function sendCacheable(request: FastifyRequest, reply: FastifyReply, dataSha256: string, payload: unknown): FastifyReply {
  const variant = `${dataSha256} ${request.url} ${request.headers.accept ?? ''}`;
  const tag = `W/"${createHash('sha256').update(variant).digest('base64url').slice(0, 22)}"`;
  reply
    .header('etag', tag)
    .header('cache-control', 'private, max-age=3600, must-revalidate')
    .header('vary', 'accept, authorization');
  const known = request.headers['if-none-match']?.split(',').map((entry) => entry.trim()) ?? [];
  return known.includes(tag) || known.includes('*') ? reply.code(304).send() : reply.send(payload);
}
