import { z } from 'zod';
import { freeText } from '../../schemas/free-text.js';
import { instant } from '../../schemas/numbers.js';

export const SubjectCode = z
  .string({ error: 'must be the code of a subject' })
  .regex(/^[\w.:-]{1,64}$/, { error: 'must be a code of 1 to 64 letters, digits, and . : _ -; the key to it is kept elsewhere' })
  .describe("The clinic's own pseudonymous code; no names");

export const CourseRequest = z
  .strictObject({
    subject: SubjectCode,
    site: freeText(80, 'Body site and side'),
    indication: freeText(120, 'Indication'),
    startedAt: instant.optional(),
    notes: freeText(2000, 'Remarks').optional(),
  })
  .meta({
    id: 'CourseRequest',
    example: { subject: 'S-0192', site: 'left cheek', indication: 'telangiectasia' },
  });

export const CourseItem = z
  .looseObject({
    id: z.string(),
    version: z.int(),
    recordedAt: z.string(),
    subject: z.string(),
    site: z.string(),
    indication: z.string(),
    bookkeeping: z
      .object({
        note: z.string(),
        exposures: z.int(),
        pulses: z.int(),
        cumulativeSetFluenceJPerCm2: z.number(),
        visits: z.array(
          z.object({
            from: z.string(),
            to: z.string(),
            exposures: z.int(),
            pulses: z.int(),
            meanDeliveredFluenceJPerCm2: z.number(),
            daysSinceLast: z.number().nullable(),
          }),
        ),
      })
      .optional()
      .describe('Only on the read of one course'),
  })
  .meta({ id: 'Course' });
