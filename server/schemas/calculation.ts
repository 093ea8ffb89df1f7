import { count, instant } from './numbers.js';

/** Fields that every calculation takes beside its own: they make a reply reproducible byte for byte. */
export const reproducible = {
  asOf: instant.optional().describe('Time to stand in the provenance; the clock when absent'),
};

export const seed = count(0, 4_294_967_295, 'Seed of the sampling; a fixed one when absent').optional();
