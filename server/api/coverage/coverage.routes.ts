import type { App } from '../../http/app-type.js';
import { presentCalculation } from '../../http/calculation.js';
import { calculationReplies } from '../../http/replies.js';
import type { Parts } from '../../parts.js';
import { cover } from './coverage.actions.js';
import { CoverageRequest, CoverageResult } from './coverage.schema.js';

export function registerCoverageRoutes(app: App, parts: Parts): void {
  app.post(
    '/v1/calculations/coverage',
    {
      config: { role: 'reader' },
      schema: {
        tags: ['calculations'],
        summary: 'How a pattern of pulses covers an area',
        body: CoverageRequest,
        response: calculationReplies(CoverageResult),
      },
    },
    async (request) => presentCalculation(cover(request.body), parts),
  );
}
