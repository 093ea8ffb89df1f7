import type { App } from '../../http/app-type.js';
import { presentCalculation } from '../../http/calculation.js';
import { calculationReplies } from '../../http/replies.js';
import type { Parts } from '../../parts.js';
import { shine } from './light.actions.js';
import { LightRequest, LightResult } from './light.schema.js';

export function registerLightRoutes(app: App, parts: Parts): void {
  const schema = {
    tags: ['calculations'],
    summary: 'Fluence rate against depth, and what returns',
    body: LightRequest,
    response: calculationReplies(LightResult),
  };
  app.post('/v1/calculations/light', { config: { role: 'reader' }, schema }, async (request) =>
    presentCalculation(shine(request.body, parts), parts),
  );
}
