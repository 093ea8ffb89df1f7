import { z } from 'zod';
import { pageQuery } from '../../http/paging.js';

export const LaserMediaQuery = z.strictObject(pageQuery);

export const LaserLineItem = z
  .object({
    id: z.string(),
    medium: z.string(),
    wavelengthNm: z.number(),
    regime: z.string(),
    pulseMinS: z.number(),
    pulseMaxS: z.number(),
    source: z.string().describe('Where the figures come from'),
    status: z.enum(['read', 'read-secondary', 'derived', 'from-memory']).describe('How far they can be trusted'),
    note: z.string(),
  })
  .meta({ id: 'LaserLine', description: 'One emission of a laser medium with the pulse durations it usually has' });
