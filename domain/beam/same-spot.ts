import type { Spot } from './spot.js';

/** Whether two spots are the same shape and size, to 1e-9 of the size (sizes that were given in decimals). */
export function sameSpot(a: Spot, b: Spot): boolean {
  if (a.shape !== b.shape) return false;
  const sizes = (spot: Spot): number[] =>
    'diameterMm' in spot ? [spot.diameterMm] : [spot.widthMm, 'heightMm' in spot ? spot.heightMm : spot.widthMm];
  const [first, second] = [sizes(a), sizes(b)];
  return first.every((size, i) => Math.abs(size - second[i]!) <= 1e-9 * size);
}
