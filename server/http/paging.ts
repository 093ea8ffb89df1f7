import type { FastifyReply, FastifyRequest } from 'fastify';
import { z } from 'zod';
import { queryCount } from '../schemas/numbers.js';
import { RequestError } from './request-error.js';

/** Query fields of every collection. */
export const pageQuery = {
  limit: queryCount(1, 500, 'Items on a page, 1 to 500; 50 when absent').optional(),
  cursor: z.string({ error: 'must be a cursor as given by `next`' }).max(512).optional().describe('Where to go on, from `next`'),
};

export const defaultLimit = 50;

/** Turns the position after the last row into an opaque cursor. */
export function encodeCursor(position: readonly (string | number)[]): string {
  return Buffer.from(JSON.stringify(position)).toString('base64url');
}

/** The position of a cursor. Throws: malformed for one that this service did not make. */
export function decodeCursor(cursor: string | undefined, length: number): (string | number)[] | null {
  if (cursor === undefined) return null;
  try {
    const position: unknown = JSON.parse(Buffer.from(cursor, 'base64url').toString('utf8'));
    if (
      Array.isArray(position) &&
      position.length === length &&
      position.every((part) => typeof part === 'string' || typeof part === 'number')
    ) {
      return position;
    }
  } catch {
    // falls through to the refusal
  }
  throw new RequestError('malformed', 'The cursor was not made by this service.', [
    { pointer: '?cursor', detail: 'must be a cursor as given by `next`' },
  ]);
}

/** The place at which a list without rows of its own goes on: 0, or one after the place in the cursor. Throws: malformed. */
export function decodePlace(cursor: string | undefined): number {
  const place = decodeCursor(cursor, 1)?.[0] ?? -1;
  if (Number.isSafeInteger(place) && Number(place) >= -1) return Number(place) + 1;
  throw new RequestError('malformed', 'The cursor was not made by this service.', [
    { pointer: '?cursor', detail: 'must be a cursor as given by `next`' },
  ]);
}

/** Cuts `limit + 1` rows to a page, sets the Link header, and gives the cursor of the next page. */
export function pageOf<T>(
  request: FastifyRequest,
  reply: FastifyReply,
  rows: readonly T[],
  limit: number,
  positionOf: (row: T) => readonly (string | number)[],
) {
  const items = rows.slice(0, limit);
  const last = items[items.length - 1];
  const next = rows.length > limit && last !== undefined ? encodeCursor(positionOf(last)) : null;
  if (next !== null) {
    const [path, query = ''] = request.url.split('?') as [string, string?];
    const parameters = new URLSearchParams(query);
    parameters.set('cursor', next);
    reply.header('link', `<${path}?${parameters}>; rel="next"`);
  }
  return { items, next };
}
