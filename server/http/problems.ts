import type { FastifyError, FastifyInstance, FastifyReply, FastifyRequest } from 'fastify';
import { DomainError } from '../../domain/quantities/errors.js';
import { bannerText } from '../clinical-banner.js';
import { type ProblemCode, problemKinds } from './problem-kinds.js';
import { type Fault, RequestError } from './request-error.js';

/** RFC 9457. */
export interface Problem {
  readonly banner: string;
  readonly type: string;
  readonly title: string;
  readonly status: number;
  readonly detail: string;
  readonly instance: string;
  readonly errors: readonly Fault[];
  readonly [fact: string]: unknown;
}

export const problemMediaType = 'application/problem+json; charset=utf-8';

export function problemOf(
  code: ProblemCode,
  detail: string,
  instance: string,
  errors: readonly Fault[] = [],
  facts = {},
): Problem {
  const { status, title } = problemKinds[code];
  return { banner: bannerText, type: `/problems/${code}`, title, status, detail, instance, errors, ...facts };
}

interface Refusal {
  readonly code: ProblemCode;
  readonly detail: string;
  readonly errors?: readonly Fault[];
  readonly facts?: object;
  readonly headers?: Readonly<Record<string, string>>;
}

const byFastifyCode: Readonly<Record<string, Refusal>> = {
  FST_ERR_CTP_INVALID_JSON_BODY: { code: 'malformed', detail: 'The body is not valid JSON.' },
  FST_ERR_CTP_EMPTY_JSON_BODY: { code: 'malformed', detail: 'The body is empty; it must be JSON.' },
  FST_ERR_CTP_BODY_TOO_LARGE: { code: 'too-large', detail: 'The body is larger than this route takes.' },
  FST_ERR_CTP_INVALID_MEDIA_TYPE: { code: 'unsupported-media-type', detail: 'This route does not take this media type.' },
  FST_ERR_CTP_INVALID_CONTENT_LENGTH: { code: 'malformed', detail: 'The body is not as long as Content-Length says.' },
  FST_ERR_BAD_URL: { code: 'malformed', detail: 'The path is not a valid URL.' },
  FST_ERR_ASYNC_CONSTRAINT: { code: 'malformed', detail: 'The request cannot be routed.' },
};

function refusalOf(error: FastifyError | Error): Refusal | null {
  if (error instanceof RequestError)
    return { code: error.code, detail: error.message, errors: error.errors, headers: error.headers };
  if (error instanceof DomainError) return domainRefusal(error);
  const code = (error as { code?: string }).code ?? '';
  if (code in byFastifyCode) return byFastifyCode[code]!;
  if (code === 'SQLITE_FULL' || code === 'ENOSPC' || code === 'SQLITE_IOERR_WRITE') {
    return {
      code: 'disk-full',
      detail: 'The disk is full; nothing of this request was stored.',
      headers: { 'retry-after': '60' },
    };
  }
  if (code === 'SQLITE_BUSY' || code === 'SQLITE_LOCKED') {
    return { code: 'busy', detail: 'The database is busy; nothing of this request was stored.', headers: { 'retry-after': '1' } };
  }
  const status = (error as FastifyError).statusCode;
  if (status === 429) return { code: 'too-many-requests', detail: 'This key has made too many requests.' };
  if (status === 400) return { code: 'malformed', detail: 'The request cannot be read.' };
  if (status === 413) return { code: 'too-large', detail: 'The body is larger than this route takes.' };
  return null;
}

function domainRefusal(error: DomainError): Refusal {
  const fields = error.facts.fields;
  const quantity = error.facts.quantity;
  const named = Array.isArray(fields) ? (fields as string[]) : typeof quantity === 'string' ? [quantity] : [];
  const errors = named
    .filter((field) => /^[a-zA-Z][\w.]*$/.test(field))
    .map((field) => ({ pointer: `/${field.replaceAll('.', '/')}`, detail: error.message }));
  return { code: error.code, detail: error.message, errors, facts: error.facts };
}

/** The problem that an error is, for replies that have begun. */
export function problemFor(error: unknown, instance: string): Problem {
  const refusal = error instanceof Error ? refusalOf(error) : null;
  return problemOf(refusal?.code ?? 'internal-error', refusal?.detail ?? 'Something failed inside.', instance, refusal?.errors);
}

export function sendProblem(request: FastifyRequest, reply: FastifyReply, refusal: Refusal): FastifyReply {
  const problem = problemOf(refusal.code, refusal.detail, request.url.split('?')[0] ?? '/', refusal.errors, {
    ...refusal.facts,
    requestId: request.id,
  });
  reply
    .code(problem.status)
    .headers(refusal.headers ?? {})
    .type(problemMediaType);
  return reply.serializer(JSON.stringify).send(problem);
}

/** Turns every error, unknown path and wrong method into a problem document. */
export function installProblems(app: FastifyInstance): void {
  const routes = new Map<string, { pattern: RegExp; methods: Set<string> }>();
  app.addHook('onRoute', ({ url, method }) => {
    const known = routes.get(url) ?? { pattern: patternOf(url), methods: new Set<string>() };
    for (const name of [method].flat()) known.methods.add(name);
    routes.set(url, known);
  });
  app.setErrorHandler((error: FastifyError, request, reply) => {
    const refusal = refusalOf(error);
    if (refusal) return sendProblem(request, reply, refusal);
    request.log.error({ err: error }, 'request failed');
    return sendProblem(request, reply, {
      code: 'internal-error',
      detail: `Something failed inside; report request id ${request.id}.`,
    });
  });
  app.setNotFoundHandler((request, reply) => {
    const path = request.url.split('?')[0] ?? '/';
    const allowed = [...routes.values()].filter(({ pattern }) => pattern.test(path)).flatMap(({ methods }) => [...methods]);
    if (allowed.length === 0) return sendProblem(request, reply, { code: 'not-found', detail: 'There is no such path.' });
    const headers = { allow: [...new Set(allowed)].sort().join(', ') };
    return sendProblem(request, reply, { code: 'method-not-allowed', detail: `This path takes ${headers.allow}.`, headers });
  });
}

function patternOf(url: string): RegExp {
  const escaped = url.replace(/[.+?^${}()|[\]\\]/g, '\\$&').replace(/:\w+/g, '[^/]+');
  return new RegExp(`^${escaped.replaceAll('*', '.*')}$`);
}
