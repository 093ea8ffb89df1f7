import { interpolateLog } from '../numeric/interpolate.js';
import type { Phototype, PhototypeFigure } from './skin-figures.js';

const order: readonly Phototype[] = ['VI', 'V', 'IV', 'III', 'II', 'I'];

/** Melanosome fraction of a measured individual typology angle: the logarithm of the fraction against the angle, through the centers of
 *  the published bands, held constant beyond the outer centers. Outer bands are taken as wide as their neighbors.
 *  Shape: scalar. Valid: -90 to 90 degrees. @source DelBino2013 bands; fractions as derived for phototypes */
export function melanosomeFractionOfIta(itaDegrees: number, phototypes: Readonly<Record<Phototype, PhototypeFigure>>): number {
  const centers = order.map((phototype) => {
    const { itaLowDegrees, itaHighDegrees } = phototypes[phototype];
    if (phototype === 'I') return itaLowDegrees + 7; // half the width of the next band
    if (phototype === 'VI') return itaHighDegrees - 20; // half the width of the next band
    return (itaLowDegrees + itaHighDegrees) / 2;
  });
  const fractions = order.map((phototype) => phototypes[phototype].melanosomeFraction);
  const angle = Math.min(Math.max(itaDegrees, centers[0]!), centers[centers.length - 1]!);
  return interpolateLog(centers, fractions, angle, 'itaDegrees');
}
