import { z } from 'zod';
import { freeText } from '../../schemas/free-text.js';
import { instant, text } from '../../schemas/numbers.js';

export const ServiceRequest = z
  .strictObject({
    performedAt: instant.describe('When the service ended; calibrations measured before are closed'),
    kind: z.enum(['maintenance', 'repair', 'move', 'upgrade', 'inspection'], {
      error: 'must be one of maintenance, repair, move, upgrade, inspection',
    }),
    description: freeText(2000, 'What was done'),
    by: text(80, 'Who did it, as a staff or company code'),
    notes: freeText(2000, 'Remarks').optional(),
  })
  .meta({
    id: 'ServiceRequest',
    example: { performedAt: '2026-02-20T15:00:00+01:00', kind: 'repair', description: 'Dye and filter replaced', by: 'ENG-2' },
  });

export const ServiceItem = z
  .looseObject({ id: z.string(), deviceId: z.string(), recordedAt: z.string(), performedAt: z.string(), kind: z.string() })
  .meta({ id: 'Service' });
