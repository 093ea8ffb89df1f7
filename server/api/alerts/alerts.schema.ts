import { z } from 'zod';
import { alertRuleIds } from '../../../domain/alerts/index.js';
import { pageQuery } from '../../http/paging.js';
import { asOfQuery } from '../../http/records.js';
import { freeText } from '../../schemas/free-text.js';
import { id, text } from '../../schemas/numbers.js';

const rules = alertRuleIds as [string, ...string[]];

export const AlertQuery = z.strictObject({
  rule: z.enum(rules, { error: `must be one of ${rules.join(', ')}` }).optional(),
  severity: z.enum(['low', 'moderate', 'high'], { error: 'must be low, moderate or high' }).optional(),
  deviceId: id.optional(),
  exposureId: id.optional(),
  acknowledged: z.enum(['true', 'false'], { error: 'must be true or false' }).optional(),
  ...pageQuery,
  ...asOfQuery,
});

export const AlertItem = z
  .object({
    id: z.string(),
    rule: z.string(),
    severity: z.enum(['low', 'moderate', 'high']),
    text: z.string(),
    evidence: z.looseObject({}),
    deviceId: z.string(),
    exposureId: z.string().nullable(),
    courseId: z.string().nullable(),
    at: z.string().describe('When it happened'),
    recordedAt: z.string().describe('When it was found'),
    acknowledgment: z.looseObject({ id: z.string(), reason: z.string(), by: z.string(), recordedAt: z.string() }).nullable(),
  })
  .meta({ id: 'Alert' });

export const AcknowledgmentRequest = z
  .strictObject({
    reason: freeText(500, 'Why no more is to be done, or what was done'),
    by: text(80, 'Who acknowledges, as a staff code').optional().describe('The key when absent'),
    notes: freeText(2000, 'Remarks').optional(),
  })
  .meta({ id: 'AcknowledgmentRequest', example: { reason: 'Wrong spot entered; record corrected', by: 'LP-1' } });

export const AcknowledgmentItem = z
  .looseObject({ id: z.string(), alertId: z.string(), recordedAt: z.string(), reason: z.string(), by: z.string() })
  .meta({ id: 'Acknowledgment' });
