import { z } from 'zod';
import { roles } from '../../http/actor.js';
import { pageQuery } from '../../http/paging.js';
import { id, text } from '../../schemas/numbers.js';

export const KeyRequest = z
  .strictObject({
    label: text(80, 'What the key is for; no personal data'),
    role: z.enum(roles, { error: `must be one of ${roles.join(', ')}` }),
    clinicId: id
      .optional()
      .describe('Clinic of the key; only a key of the installation may choose, others make keys of their own clinic'),
  })
  .meta({ id: 'KeyRequest' });

export const KeyItem = z
  .object({
    id: z.string(),
    clinicId: z.string().nullable(),
    label: z.string(),
    role: z.enum(roles),
    createdAt: z.string(),
    revokedAt: z.string().nullable(),
  })
  .meta({ id: 'Key' });

export const NewKeyItem = KeyItem.extend({ secret: z.string().describe('Shown once; store it safely') }).meta({ id: 'NewKey' });
export const KeyParams = z.strictObject({ id });
export const KeyQuery = z.strictObject(pageQuery);
