import { actorOf } from '../../http/actor.js';
import type { App } from '../../http/app-type.js';
import { presentCalculation } from '../../http/calculation.js';
import { calculationReplies } from '../../http/replies.js';
import type { Parts } from '../../parts.js';
import { rank } from './rankings.actions.js';
import { RankingRequest, RankingResult } from './rankings.schema.js';

export function registerRankingsRoutes(app: App, parts: Parts): void {
  app.post(
    '/v1/rankings',
    {
      config: { role: 'reader' },
      schema: {
        tags: ['rankings'],
        summary: 'Wavelengths, pulse durations and spots worth a test patch, best first',
        body: RankingRequest,
        response: calculationReplies(RankingResult),
      },
    },
    async (request) => presentCalculation(rank(request.body, parts, actorOf(request).clinicId), parts),
  );
}
