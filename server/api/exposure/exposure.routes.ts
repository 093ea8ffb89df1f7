import { actorOf } from '../../http/actor.js';
import type { App } from '../../http/app-type.js';
import { presentCalculation } from '../../http/calculation.js';
import { calculationReplies } from '../../http/replies.js';
import type { Parts } from '../../parts.js';
import { findWindow, heat } from './exposure.actions.js';
import { HeatingRequest, HeatingResult, LadderRequest, LadderResult, WindowRequest, WindowResult } from './exposure.schema.js';
import { climb } from './ladder.actions.js';

export function registerExposureRoutes(app: App, parts: Parts): void {
  const config = { role: 'reader' as const };
  const tags = ['calculations'];
  app.post(
    '/v1/calculations/window',
    {
      config,
      schema: {
        tags,
        summary: 'Least effective and greatest sparing fluence of one setting',
        body: WindowRequest,
        response: calculationReplies(WindowResult),
      },
    },
    async (request) => presentCalculation(findWindow(request.body, parts, actorOf(request).clinicId), parts),
  );
  app.post(
    '/v1/calculations/heating',
    {
      config,
      schema: {
        tags,
        summary: 'Temperatures and damage of one fluence',
        body: HeatingRequest,
        response: calculationReplies(HeatingResult),
      },
    },
    async (request) => presentCalculation(heat(request.body, parts, actorOf(request).clinicId), parts),
  );
  app.post(
    '/v1/calculations/test-ladder',
    {
      config,
      schema: {
        tags,
        summary: 'Steps of fluence for test patches, below the epidermal limit',
        body: LadderRequest,
        response: calculationReplies(LadderResult),
      },
    },
    async (request) => presentCalculation(climb(request.body, parts, actorOf(request).clinicId), parts),
  );
}
