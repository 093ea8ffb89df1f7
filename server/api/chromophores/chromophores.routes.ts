import type { FastifyRequest } from 'fastify';
import { z } from 'zod';
import { withHemoglobinTable } from '../../../domain/reference/choose-hemoglobin.js';
import { openLedger } from '../../audit/with-audit.js';
import { actorOf, clinicOf } from '../../http/actor.js';
import type { App } from '../../http/app-type.js';
import { presentCalculation } from '../../http/calculation.js';
import { preferredType } from '../../http/hooks.js';
import { decodePlace, defaultLimit, pageOf } from '../../http/paging.js';
import { bannered, calculationReplies, itemReplies, listReplies } from '../../http/replies.js';
import { sendCacheable } from '../../http/versions.js';
import type { Parts } from '../../parts.js';
import { modelVersion } from '../../version.js';
import { findChromophore, rankWavelengths, readSpectrum, storeOwnChromophore } from './chromophores.actions.js';
import { presentChromophore, presentOwnChromophore, presentSpectrumCsv } from './chromophores.present.js';
import {
  ChromophoreItem,
  ChromophoreParams,
  ChromophoresQuery,
  OwnChromophoreRequest,
  SpectrumQuery,
  SpectrumResult,
  WavelengthsQuery,
  WavelengthsResult,
} from './chromophores.schema.js';
import { countOwnChromophores, findOwnChromophore, listOwnChromophores, withOwnChromophore } from './chromophores.store.js';

const spectrumTypes = ['application/json', 'text/csv'] as const;

const spectrumReplies = calculationReplies(SpectrumResult);
const spectrumResponse = {
  ...spectrumReplies,
  200: {
    description: 'The spectrum',
    content: { 'application/json': { schema: spectrumReplies[200] }, 'text/csv': { schema: z.string() } },
  },
};

export function registerChromophoresRoutes(app: App, parts: Parts): void {
  const reference = withHemoglobinTable(parts.reference, 'prahl1998');
  const version = `${parts.dataVersion.sha256} ${modelVersion}`;
  const ledger = openLedger(parts.db, parts.now);
  const readerFor = (request: FastifyRequest) => ledger.reader(actorOf(request).clinicId);
  const referenceFor = (request: FastifyRequest, id: string) => withOwnChromophore(readerFor(request), reference, id);
  const config = { role: 'reader' as const };
  const tags = ['reference data'];
  const published = [...reference.chromophores.values()].map((chromophore, place) => ({
    ...presentChromophore(chromophore, reference),
    place,
  }));
  app.get(
    '/v1/chromophores',
    {
      config,
      schema: { tags, summary: 'List chromophores', querystring: ChromophoresQuery, response: listReplies(ChromophoreItem) },
    },
    async (request, reply) => {
      const { limit = defaultLimit, cursor } = request.query;
      const reader = readerFor(request);
      const start = decodePlace(cursor);
      const shared = published.slice(start, start + limit + 1);
      const offset = Math.max(0, start - published.length);
      const own = listOwnChromophores(reader, offset, limit + 1 - shared.length).map((row, i) => ({
        ...presentOwnChromophore(row, reference),
        place: published.length + offset + i,
      }));
      const page = pageOf(request, reply, [...shared, ...own], limit, ({ place }) => [place]);
      return sendCacheable(request, reply, `${version} ${reader.clinicId} ${countOwnChromophores(reader)}`, bannered(page));
    },
  );
  app.post(
    '/v1/chromophores',
    {
      config: { role: 'physicist', idempotent: true },
      schema: {
        tags,
        summary: "Store the clinic's own measured spectrum",
        body: OwnChromophoreRequest,
        response: itemReplies(ChromophoreItem, 201),
      },
    },
    async (request, reply) => {
      const actor = { ...actorOf(request), clinicId: clinicOf(request) };
      const item = presentOwnChromophore(storeOwnChromophore(ledger, actor, request.body), reference);
      return reply.code(201).header('location', `/v1/chromophores/${item.id}`).send(bannered({ item }));
    },
  );
  app.get(
    '/v1/chromophores/:id',
    {
      config,
      schema: { tags, summary: 'Read a chromophore', params: ChromophoreParams, response: itemReplies(ChromophoreItem) },
    },
    async (request, reply) => {
      const { id } = request.params;
      const reader = readerFor(request);
      const own = reference.chromophores.has(id) ? null : findOwnChromophore(reader, id);
      const item = own ? presentOwnChromophore(own, reference) : presentChromophore(findChromophore(reference, id), reference);
      return sendCacheable(request, reply, `${version} ${reader.clinicId}`, bannered({ item }));
    },
  );
  app.get(
    '/v1/chromophores/:id/spectrum',
    {
      config: { ...config, produces: spectrumTypes },
      schema: {
        tags,
        summary: 'Absorption spectrum of a chromophore',
        params: ChromophoreParams,
        querystring: SpectrumQuery,
        response: spectrumResponse,
      },
    },
    async (request, reply) => {
      const { id } = request.params;
      const answer = readSpectrum(request.query, findChromophore(referenceFor(request, id), id));
      if (preferredType(request.headers.accept, spectrumTypes) === 'application/json')
        return sendCacheable(request, reply, version, presentCalculation(answer, parts));
      reply.type('text/csv; charset=utf-8').serializer((payload) => String(payload));
      return sendCacheable(request, reply, version, presentSpectrumCsv(answer.result));
    },
  );
  app.get(
    '/v1/chromophores/:id/wavelengths',
    {
      config,
      schema: {
        tags,
        summary: 'Which wavelengths heat this chromophore at a depth rather than the epidermis',
        params: ChromophoreParams,
        querystring: WavelengthsQuery,
        response: calculationReplies(WavelengthsResult),
      },
    },
    async (request, reply) => {
      const { id } = request.params;
      const own = referenceFor(request, id);
      return sendCacheable(
        request,
        reply,
        version,
        presentCalculation(rankWavelengths(request.query, findChromophore(own, id), own), parts),
      );
    },
  );
}
