/** Factor by which absorption is flattened when the absorber is gathered in cylinders of a radius, in diffuse light:
 *  (1 - exp(-2 mu_a R)) / (2 mu_a R); 1 for a thin or clear vessel. Valid: both arguments at least 0.
 *  @source Verkruysse1997 eq. for vessels of one size; SvaasandFiskerstrand1995 */
export function flatteningFactor(absorptionPerCm: number, radiusUm: number): number {
  const depth = 2 * absorptionPerCm * radiusUm * 1e-4;
  return depth < 1e-6 ? 1 - depth / 2 : -Math.expm1(-depth) / depth;
}
