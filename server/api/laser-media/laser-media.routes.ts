import type { App } from '../../http/app-type.js';
import { decodePlace, defaultLimit, pageOf } from '../../http/paging.js';
import { bannered, listReplies } from '../../http/replies.js';
import { sendCacheable } from '../../http/versions.js';
import type { Parts } from '../../parts.js';
import { modelVersion } from '../../version.js';
import { LaserLineItem, LaserMediaQuery } from './laser-media.schema.js';

export function registerLaserMediaRoutes(app: App, { reference, dataVersion }: Parts): void {
  const cite = (source: string) => reference.bibliography.get(source) ?? source;
  const lines = [...reference.media]
    .sort((a, b) => a.wavelengthNm - b.wavelengthNm || (a.id < b.id ? -1 : 1))
    .map((line, place) => ({ ...line, source: cite(line.source), place }));
  app.get(
    '/v1/laser-media',
    {
      config: { role: 'reader' },
      schema: {
        tags: ['reference data'],
        summary: 'Laser media by wavelength',
        querystring: LaserMediaQuery,
        response: listReplies(LaserLineItem),
      },
    },
    async (request, reply) => {
      const { limit = defaultLimit, cursor } = request.query;
      const start = decodePlace(cursor);
      const rows = lines.slice(start, start + limit + 1);
      const page = pageOf(request, reply, rows, limit, ({ place }) => [place]);
      return sendCacheable(request, reply, `${dataVersion.sha256} ${modelVersion}`, bannered(page));
    },
  );
}
