import { actorOf } from '../../http/actor.js';
import type { App } from '../../http/app-type.js';
import { presentCalculation } from '../../http/calculation.js';
import { calculationReplies } from '../../http/replies.js';
import type { Parts } from '../../parts.js';
import { deliver, settle } from './fluence.actions.js';
import { FluenceRequest, FluenceResult, SettingsRequest, SettingsResult } from './fluence.schema.js';

export function registerFluenceRoutes(app: App, parts: Parts): void {
  const config = { role: 'reader' as const };
  const tags = ['calculations'];
  app.post(
    '/v1/calculations/fluence',
    {
      config,
      schema: {
        tags,
        summary: 'Panel settings to fluence on the skin, with uncertainty',
        body: FluenceRequest,
        response: calculationReplies(FluenceResult),
      },
    },
    async (request) => presentCalculation(deliver(request.body), parts),
  );
  app.post(
    '/v1/calculations/settings',
    {
      config,
      schema: {
        tags,
        summary: 'Wanted fluence to panel settings',
        body: SettingsRequest,
        response: calculationReplies(SettingsResult),
      },
    },
    async (request) => presentCalculation(settle(request.body, { db: parts.db, clinicId: actorOf(request).clinicId }), parts),
  );
}
