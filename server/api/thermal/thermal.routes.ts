import type { App } from '../../http/app-type.js';
import { presentCalculation } from '../../http/calculation.js';
import { calculationReplies } from '../../http/replies.js';
import type { Parts } from '../../parts.js';
import { relax } from './thermal.actions.js';
import { RelaxationRequest, RelaxationResult } from './thermal.schema.js';

export function registerThermalRoutes(app: App, parts: Parts): void {
  app.post(
    '/v1/calculations/relaxation',
    {
      config: { role: 'reader' },
      schema: {
        tags: ['calculations'],
        summary: 'Thermal relaxation time of a plane, cylinder or sphere',
        body: RelaxationRequest,
        response: calculationReplies(RelaxationResult),
      },
    },
    async (request) => presentCalculation(relax(request.body), parts),
  );
}
