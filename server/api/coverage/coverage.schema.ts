import { z } from 'zod';
import { SpotSchema } from '../../schemas/beam.js';
import { reproducible } from '../../schemas/calculation.js';
import { count, quantity, whenever } from '../../schemas/numbers.js';

const side = quantity('mm', 0.1, 2000, 'Side of the area');

export const CoverageRequest = z
  .strictObject({
    spot: SpotSchema,
    spacingMm: quantity('mm', 0.01, 200, 'Distance between the centers of neighbors').optional(),
    pulseCount: count(1, 1_000_000, 'Pulses on the area').optional(),
    pattern: z.enum(['hexagonal', 'square', 'random'], { error: 'must be one of hexagonal, square, random' }),
    area: z.strictObject({ widthMm: side, heightMm: side }),
    ...reproducible,
  })
  .refine((body) => (body?.spacingMm === undefined) !== (body?.pulseCount === undefined), {
    error: 'needs exactly one of spacingMm or pulseCount',
    path: ['spacingMm'],
    ...whenever,
  })
  .refine((body) => body?.pattern !== 'random' || body.pulseCount !== undefined, {
    error: 'is needed for a random pattern',
    path: ['pulseCount'],
    ...whenever,
  })
  .refine((body) => body?.pattern !== 'hexagonal' || !['square', 'rectangle'].includes(String(body.spot?.shape)), {
    error: 'square and rectangular spots lie in a square pattern or at random',
    path: ['pattern'],
    ...whenever,
  })
  .meta({
    id: 'CoverageRequest',
    examples: [
      { spot: { shape: 'circle', diameterMm: 10 }, spacingMm: 8, pattern: 'hexagonal', area: { widthMm: 100, heightMm: 80 } },
    ],
  });

export const CoverageResult = z
  .object({
    neighborOverlapFraction: z.number().describe('Share of a spot that its neighbor covers too'),
    uncoveredFraction: z.number(),
    doubleCoveredFraction: z.number().describe('Share of the area under two pulses or more'),
    meanPulsesPerPoint: z.number(),
    pulseCount: z.int(),
    spacingMm: z.number().nullable(),
  })
  .meta({ id: 'CoverageResult' });
