import { z } from 'zod';
import { withHemoglobinTable } from '../../../domain/reference/choose-hemoglobin.js';
import type { App } from '../../http/app-type.js';
import { presentCalculation } from '../../http/calculation.js';
import { preferredType } from '../../http/hooks.js';
import { decodeCursor, defaultLimit, pageOf } from '../../http/paging.js';
import { bannered, calculationReplies, listReplies } from '../../http/replies.js';
import { sendCacheable } from '../../http/versions.js';
import type { Parts } from '../../parts.js';
import { modelVersion } from '../../version.js';
import { findChromophore, rankWavelengths, readSpectrum } from './chromophores.actions.js';
import { presentChromophore, presentSpectrumCsv } from './chromophores.present.js';
import {
  ChromophoreItem,
  ChromophoreParams,
  ChromophoresQuery,
  SpectrumQuery,
  SpectrumResult,
  WavelengthsQuery,
  WavelengthsResult,
} from './chromophores.schema.js';

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
      const after = Number(decodeCursor(cursor, 1)?.[0] ?? -1);
      const rows = published.slice(after + 1, after + 2 + limit);
      const page = pageOf(request, reply, rows, limit, ({ place }) => [place]);
      return sendCacheable(request, reply, version, bannered(page));
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
      const answer = readSpectrum(request.query, findChromophore(reference, request.params.id));
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
      const chromophore = findChromophore(reference, request.params.id);
      return sendCacheable(
        request,
        reply,
        version,
        presentCalculation(rankWavelengths(request.query, chromophore, reference), parts),
      );
    },
  );
}
