import { availableParallelism } from 'node:os';
import { Gauge } from 'prom-client';
import { actorOf } from '../../http/actor.js';
import type { App } from '../../http/app-type.js';
import { decodeCursor, defaultLimit, pageOf } from '../../http/paging.js';
import { bannered, itemReplies, listReplies } from '../../http/replies.js';
import { openJobQueue } from '../../jobs/job-queue.js';
import type { Parts } from '../../parts.js';
import { openPhotonPool } from '../../workers/pool.js';
import { cancelRun, listRunsAfter, readRun, startRun } from './reference-runs.actions.js';
import { resumeRuns, workOnRun } from './reference-runs.jobs.js';
import { presentRun } from './reference-runs.present.js';
import { ReferenceRunItem, ReferenceRunRequest, RunId, RunQuery } from './reference-runs.schema.js';

export function registerReferenceRunsRoutes(app: App, parts: Parts): void {
  const { db, now, config: settings } = parts;
  const pool = openPhotonPool(settings.workerThreads || availableParallelism());
  const reportFailure = (id: string, error: unknown) => app.log.error({ err: error, run: id }, 'reference run failed');
  const queue = openJobQueue(settings.referenceRunQueue, (id, signal) => workOnRun({ db, now, pool, reportFailure }, id, signal));
  new Gauge({
    name: 'reference_runs_waiting',
    help: 'Reference runs that wait for their turn',
    registers: [parts.metrics],
    collect() {
      this.set(queue.waiting);
    },
  });
  const room = { ...parts, queue };
  app.addHook('onReady', async () => resumeRuns(db, queue));
  parts.closing.push(async () => {
    await queue.close();
    await pool.close();
  });

  const config = { role: 'reader' as const };
  const tags = ['reference-runs'];
  const path = '/v1/reference-runs';
  app.post(
    path,
    {
      config: { ...config, idempotent: true },
      schema: {
        tags,
        summary: 'Answer a light request by Monte Carlo',
        body: ReferenceRunRequest,
        response: itemReplies(ReferenceRunItem, 202),
      },
    },
    async (request, reply) => {
      const item = presentRun(startRun(room, actorOf(request).clinicId, request.body));
      return reply.code(202).header('location', `${path}/${item.id}`).send(bannered({ item }));
    },
  );
  app.get(
    path,
    {
      config,
      schema: {
        tags,
        summary: 'List reference runs, newest first',
        querystring: RunQuery,
        response: listReplies(ReferenceRunItem),
      },
    },
    async (request, reply) => {
      const { limit = defaultLimit, cursor } = request.query;
      const rows = listRunsAfter(room, actorOf(request).clinicId, decodeCursor(cursor, 1)?.[0], limit + 1);
      const { items, next } = pageOf(request, reply, rows, limit, (row) => [row.id]);
      return reply.send(bannered({ items: items.map(presentRun), next }));
    },
  );
  app.get(
    `${path}/:id`,
    { config, schema: { tags, summary: 'Read a reference run', params: RunId, response: itemReplies(ReferenceRunItem) } },
    async (request, reply) => {
      const run = readRun(room, actorOf(request).clinicId, request.params.id);
      return reply.header('etag', `"${run.status}-${run.chunks}"`).send(bannered({ item: presentRun(run) }));
    },
  );
  app.delete(
    `${path}/:id`,
    { config, schema: { tags, summary: 'Cancel a reference run', params: RunId, response: itemReplies(ReferenceRunItem) } },
    async (request) => bannered({ item: presentRun(cancelRun(room, actorOf(request).clinicId, request.params.id)) }),
  );
}
