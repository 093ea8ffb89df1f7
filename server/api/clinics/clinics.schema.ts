import { z } from 'zod';
import { pageQuery } from '../../http/paging.js';
import { id, text } from '../../schemas/numbers.js';

export const ClinicRequest = z
  .strictObject({ name: text(120, 'Name of the clinic or practice') })
  .meta({ id: 'ClinicRequest', example: { name: 'North Street Laser Practice' } });

export const ClinicItem = z
  .object({ id: z.string(), name: z.string(), version: z.int(), recordedAt: z.string() })
  .meta({ id: 'Clinic' });

export const ClinicParams = z.strictObject({ id });
export const ClinicQuery = z.strictObject(pageQuery);
