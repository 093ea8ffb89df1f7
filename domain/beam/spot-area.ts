import type { Spot } from './spot.js';

/** Area over which a spot's energy is shared out, so that energy over area is its mean fluence. For a Gaussian that is pi w^2 with w
 *  the 1/e^2 radius, and the fluence on the axis is twice the mean. Shape: scalar. Valid: sizes > 0.
 *  @source ISO11146 (definition of the 1/e^2 radius); areas by geometry */
export function spotAreaCm2(spot: Spot): number {
  switch (spot.shape) {
    case 'circle':
    case 'gaussian':
      return (Math.PI * spot.diameterMm * spot.diameterMm) / 400;
    case 'square':
      return (spot.widthMm * spot.widthMm) / 100;
    case 'rectangle':
      return (spot.widthMm * spot.heightMm) / 100;
  }
}
