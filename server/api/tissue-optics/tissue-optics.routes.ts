import type { App } from '../../http/app-type.js';
import { presentCalculation } from '../../http/calculation.js';
import { calculationReplies } from '../../http/replies.js';
import { sendCacheable } from '../../http/versions.js';
import type { Parts } from '../../parts.js';
import { modelVersion } from '../../version.js';
import { describeOptics } from './tissue-optics.actions.js';
import { TissueOpticsQuery, TissueOpticsResult } from './tissue-optics.schema.js';

export function registerTissueOpticsRoutes(app: App, parts: Parts): void {
  app.get(
    '/v1/tissue-optics',
    {
      config: { role: 'reader' },
      schema: {
        tags: ['reference data'],
        summary: 'Optical layers of described skin at one wavelength',
        querystring: TissueOpticsQuery,
        response: calculationReplies(TissueOpticsResult),
      },
    },
    async (request, reply) => {
      const answer = presentCalculation(describeOptics(request.query, parts.reference), parts);
      return sendCacheable(request, reply, `${parts.dataVersion.sha256} ${modelVersion}`, answer);
    },
  );
}
