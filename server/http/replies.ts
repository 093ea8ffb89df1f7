import { z } from 'zod';
import { bannerText } from '../clinical-banner.js';

export const Banner = z.string().describe('Model estimates for licensed professionals; licensed clinical judgment governs.');

export const ProblemSchema = z
  .looseObject({
    banner: Banner,
    type: z.string().describe('/problems/<code>, a page that explains it'),
    title: z.string(),
    status: z.int(),
    detail: z.string(),
    instance: z.string(),
    errors: z.array(z.object({ pointer: z.string(), detail: z.string() })),
  })
  .meta({ id: 'Problem', description: 'RFC 9457 problem details' });

const problem = (description: string) => ({ description, content: { 'application/problem+json': { schema: ProblemSchema } } });

export const refusals = {
  400: problem('malformed request'),
  401: problem('no valid key'),
  403: problem('role too low'),
  404: problem('not found'),
  406: problem('no acceptable media type'),
  422: problem('invalid request'),
  429: problem('too many requests'),
  503: problem('busy'),
};

const CautionSchema = z.object({ code: z.string(), text: z.string() }).meta({ id: 'Caution' });
const AssumptionSchema = z
  .object({
    name: z.string(),
    value: z.union([z.number(), z.string(), z.boolean()]),
    unit: z.string().optional(),
    source: z.string(),
    status: z.enum(['read', 'read-secondary', 'derived', 'from-memory', 'convention']),
  })
  .meta({ id: 'Assumption', description: 'A default that was filled in' });
export const ProvenanceSchema = z
  .object({
    service: z.string(),
    model: z.string(),
    data: z.array(z.object({ name: z.string(), version: z.string(), sha256: z.string() })),
    inputsSha256: z.string(),
    asOf: z.string(),
    seed: z.int().optional(),
  })
  .meta({ id: 'Provenance' });

/** A reply's body with the banner first. */
export function bannered<T extends object>(body: T): { banner: string } & T {
  return { banner: bannerText, ...body };
}

/** The 200 of a calculation, with the usual refusals. */
export function calculationReplies<T extends z.ZodType>(result: T) {
  return {
    200: z.object({
      banner: Banner,
      result,
      cautions: z.array(CautionSchema).readonly(),
      assumptions: z.array(AssumptionSchema).readonly(),
      provenance: ProvenanceSchema,
    }),
    ...refusals,
  };
}

/** One record, with the usual refusals. */
export function itemReplies<T extends z.ZodType, S extends number = 200>(item: T, status: S = 200 as S) {
  return { [status]: z.object({ banner: Banner, item }), ...refusals } as Record<
    S,
    z.ZodObject<{ banner: typeof Banner; item: T }>
  > &
    typeof refusals;
}

/** A page of a collection, with the usual refusals. */
export function listReplies<T extends z.ZodType>(item: T) {
  return { 200: z.object({ banner: Banner, items: z.array(item), next: z.string().nullable() }), ...refusals };
}
