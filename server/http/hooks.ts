import type { FastifyInstance } from 'fastify';
import { bannerHeader, bannerHeaderValue, bannerText } from '../clinical-banner.js';
import { RequestError } from './request-error.js';

const fixedHeaders = Object.freeze({
  [bannerHeader]: bannerHeaderValue,
  'content-security-policy': "default-src 'none'; frame-ancestors 'none'",
  'x-content-type-options': 'nosniff',
  'referrer-policy': 'no-referrer',
  'cross-origin-resource-policy': 'same-origin',
});

/** The banner on every reply, and the headers that keep a browser from doing harm with it. */
export function installHooks(app: FastifyInstance): void {
  app.addHook('onRequest', (request, reply, done) => {
    reply.headers(fixedHeaders);
    const accept = request.headers.accept;
    const produces = request.routeOptions.config.produces ?? jsonTypes;
    if (accept !== undefined && accept !== '*/*' && !request.is404 && !produces.some((type) => acceptsType(accept, type))) {
      done(new RequestError('not-acceptable', `This path gives ${produces.join(', ')}.`));
      return;
    }
    done();
  });
  app.addHook('preSerialization', (_request, _reply, payload: unknown, done) => {
    if (payload !== null && typeof payload === 'object' && !Array.isArray(payload) && !('banner' in payload)) {
      done(null, { banner: bannerText, ...payload });
      return;
    }
    done(null, payload);
  });
}

const jsonTypes = ['application/json'];

/** Whether an Accept header allows a media type (RFC 9110, 12.5.1; the most specific range rules). */
export function acceptsType(accept: string, type: string): boolean {
  const [major] = type.split('/');
  let best = -1;
  let allowed = false;
  for (const part of accept.split(',')) {
    const [range = '', ...parameters] = part
      .trim()
      .toLowerCase()
      .split(/\s*;\s*/);
    const specificity = range === type ? 2 : range === `${major}/*` ? 1 : range === '*/*' ? 0 : -1;
    if (specificity < 0 || specificity <= best) continue;
    best = specificity;
    allowed = !parameters.some((parameter) => /^q=0(\.0*)?$/.test(parameter));
  }
  return allowed;
}

/** The first of the media types that the Accept header prefers; the first of all when there is none. */
export function preferredType<T extends string>(accept: string | undefined, types: readonly T[]): T {
  if (accept === undefined) return types[0]!;
  const weighed = types.map((type) => ({ type, weight: weightOf(accept, type) }));
  return weighed.reduce((best, next) => (next.weight > best.weight ? next : best)).type;
}

function weightOf(accept: string, type: string): number {
  const [major] = type.split('/');
  let best = -1;
  let weight = 0;
  for (const part of accept.split(',')) {
    const [range = '', ...parameters] = part
      .trim()
      .toLowerCase()
      .split(/\s*;\s*/);
    const specificity = range === type ? 2 : range === `${major}/*` ? 1 : range === '*/*' ? 0 : -1;
    if (specificity <= best) continue;
    best = specificity;
    const q = parameters.find((parameter) => parameter.startsWith('q='));
    weight = q ? Number(q.slice(2)) || 0 : 1;
  }
  return weight;
}
