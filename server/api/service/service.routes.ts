import { Counter, collectDefaultMetrics, Gauge, Histogram } from 'prom-client';
import { z } from 'zod';
import type { App } from '../../http/app-type.js';
import { preferredType } from '../../http/hooks.js';
import { escapeHtml, htmlPage, pageHeaders } from '../../http/html.js';
import { type ProblemCode, problemKinds } from '../../http/problem-kinds.js';
import { bannered } from '../../http/replies.js';
import { RequestError } from '../../http/request-error.js';
import type { Parts } from '../../parts.js';
import { serviceVersion } from '../../version.js';

const pageTypes = ['text/html', 'application/json'] as const;

const cautions = [
  'Test patch first; wait the stated interval; clinical end points decide.',
  'A pigmented lesion must be diagnosed by a clinician before any light is used on it.',
  'Exposure limits protect bystanders and staff; local law and the laser safety officer govern.',
  'Not a cleared medical device; use to decide treatment may fall under device law.',
];

/** Start page, problem pages, health and metrics. */
export function registerServiceRoutes(app: App, parts: Parts): void {
  app.get('/', { config: { produces: pageTypes }, schema: { hide: true } }, async (request, reply) => {
    const links = { reference: '/docs', openapi: '/openapi.json', health: '/health/ready' };
    if (preferredType(request.headers.accept, pageTypes) === 'application/json')
      return reply.send(bannered({ service: serviceVersion, links, cautions }));
    const items = cautions.map((caution) => `<li>${escapeHtml(caution)}</li>`).join('');
    const body = `<p>Ranks a practice’s laser wavelengths and pulse durations for a target, keeps its dosimetry and device log, and runs its laser safety.</p>
<ul><li><a href="/docs/">Reference of every route</a></li><li><a href="/openapi.json">OpenAPI document</a></li><li><a href="/problems/">Problem types</a></li></ul><h2>Cautions</h2><ul>${items}</ul>`;
    return reply.headers(pageHeaders).send(htmlPage('Fluence Ledger', body));
  });
  app.get('/problems/', { config: { produces: pageTypes }, schema: { hide: true } }, async (_request, reply) => {
    const rows = Object.entries(problemKinds).map(
      ([code, kind]) =>
        `<tr><td><a href="/problems/${code}"><code>${code}</code></a></td><td>${kind.status}</td><td>${escapeHtml(kind.title)}</td></tr>`,
    );
    return reply
      .headers(pageHeaders)
      .send(htmlPage('Problem types', `<table><tr><th>code</th><th>status</th><th>title</th></tr>${rows.join('')}</table>`));
  });
  const params = z.strictObject({ code: z.string() });
  app.get('/problems/:code', { config: { produces: pageTypes }, schema: { hide: true, params } }, async (request, reply) => {
    const kind = problemKinds[request.params.code as ProblemCode];
    if (!Object.hasOwn(problemKinds, request.params.code))
      throw new RequestError('not-found', 'There is no such kind of problem.');
    const { code } = request.params;
    if (preferredType(request.headers.accept, pageTypes) === 'application/json')
      return reply.send(bannered({ type: `/problems/${code}`, ...kind }));
    return reply
      .headers(pageHeaders)
      .send(htmlPage(kind.title, `<p>Status ${kind.status}, code <code>${code}</code>.</p><p>${escapeHtml(kind.help)}</p>`));
  });
  app.get('/health/live', { schema: { tags: ['service'], summary: 'The process runs' } }, async (_request, reply) =>
    reply.send(bannered({ status: 'live' })),
  );
  app.get('/health/ready', { schema: { tags: ['service'], summary: 'The database answers' } }, async (_request, reply) => {
    parts.db.prepare('SELECT 1').get();
    return reply.send(bannered({ status: 'ready', service: serviceVersion, data: parts.dataVersion.sha256 }));
  });
  registerMetrics(app, parts);
}

function registerMetrics(app: App, parts: Parts): void {
  const registers = parts.metrics;
  collectDefaultMetrics({ register: registers });
  const seconds = new Histogram({
    name: 'http_request_seconds',
    help: 'Time to answer',
    labelNames: ['method', 'route', 'status'],
    buckets: [0.001, 0.005, 0.02, 0.1, 0.5, 2, 10],
    registers: [registers],
  });
  const fields = parts.lightFields;
  for (const [name, help, read] of [
    ['light_field_hits_total', 'Light fields found solved', () => fields.hitCount],
    ['light_field_misses_total', 'Light fields solved anew', () => fields.missCount],
  ] as const) {
    new Counter({
      name,
      help,
      registers: [registers],
      collect() {
        this.reset();
        this.inc(read());
      },
    });
  }
  new Gauge({
    name: 'light_fields',
    help: 'Solved light fields in store',
    registers: [registers],
    collect() {
      this.set(fields.size);
    },
  });
  app.addHook('onResponse', (request, reply, done) => {
    const route = request.routeOptions.url ?? 'unknown';
    seconds.observe({ method: request.method, route, status: reply.statusCode }, reply.elapsedTime / 1000);
    done();
  });
  const config = { produces: ['text/plain'], ...(parts.config.metricsOpen ? {} : { role: 'reader' as const }) };
  app.get('/metrics', { config, schema: { tags: ['service'], summary: 'Prometheus metrics' } }, async (_request, reply) => {
    return reply.type(registers.contentType).send(await registers.metrics());
  });
}
