import type { FastifyReply } from 'fastify';
import { instant } from '../schemas/numbers.js';
import { bannered } from './replies.js';
import { versionTag } from './versions.js';

/** Query field of every read of records. */
export const asOfQuery = { asOf: instant.optional().describe('What was known at this time; now when absent') };

/** An instant as it stands in the ledger, so that texts compare like times. */
export function utcText(at: string | undefined): string | undefined {
  return at === undefined ? undefined : new Date(at).toISOString();
}

export function sendItem<T>(reply: FastifyReply, item: T, version: number): { banner: string; item: T } {
  reply.header('etag', versionTag(version));
  return bannered({ item });
}

export function sendCreated<T>(reply: FastifyReply, location: string, item: T, version = 1): { banner: string; item: T } {
  reply.code(201).header('location', location);
  return sendItem(reply, item, version);
}
