import { z } from 'zod';
import { instant, queryQuantity, text } from './numbers.js';
import { hasOnePigmentForm } from './skin.js';

/** The scalar fields of the skin as query parameters. */
const skinQueryFields = {
  phototype: z.enum(['I', 'II', 'III', 'IV', 'V', 'VI'], { error: 'must be one of I, II, III, IV, V, VI' }).optional(),
  itaDegrees: queryQuantity('degrees', -90, 90, 'Individual typology angle').optional(),
  lightnessL: queryQuantity('', 0, 100, 'CIE L*, with yellownessB').optional(),
  yellownessB: queryQuantity('', 0.1, 60, 'CIE b*, with lightnessL').optional(),
  melanosomeFraction: queryQuantity('', 0, 0.5, 'Volume fraction of melanosomes in the epidermis').optional(),
  measuredAt: instant.optional().describe('When pigmentation was measured'),
  epidermisThicknessUm: queryQuantity('um', 20, 1000, 'Thickness of the epidermis').optional(),
  bloodFraction: queryQuantity('', 0, 0.5, 'Volume fraction of blood in the dermis').optional(),
  oxygenSaturationFraction: queryQuantity('', 0, 1, 'Oxygen saturation of that blood').optional(),
  hematocritFraction: queryQuantity('', 0.1, 0.75, 'Hematocrit of that blood').optional(),
  waterFraction: queryQuantity('', 0, 1, 'Volume fraction of water in epidermis and dermis').optional(),
  site: text(80, 'Body site').optional(),
  tan: z.enum(['none', 'recent', 'unknown'], { error: 'must be one of none, recent, unknown' }).optional(),
};

const names = Object.keys(skinQueryFields) as readonly (keyof typeof skinQueryFields)[];

/** A query with the skin in it, and exactly one measure of its pigmentation. */
export function skinQuery<T extends z.ZodRawShape>(others: T) {
  return z.strictObject({ ...skinQueryFields, ...others }).refine(hasOnePigmentForm, {
    error: 'needs exactly one of phototype, itaDegrees, lightnessL with yellownessB, or melanosomeFraction',
    path: ['phototype'],
    when: () => true,
  });
}

/** The skin of a query, without what else stands there. */
export function skinOf(query: z.output<ReturnType<typeof skinQuery>>) {
  return Object.fromEntries(names.map((name) => [name, query[name]])) as Pick<typeof query, (typeof names)[number]>;
}
