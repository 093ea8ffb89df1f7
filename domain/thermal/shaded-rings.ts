import { gaussLegendre } from '../numeric/quadrature.js';
import { assertWithin } from '../quantities/errors.js';

const perAngle = gaussLegendre(16);
const perRing = gaussLegendre(2);

/** Heat in rings of equal width (center first) of an absorbing cylinder in light that comes evenly from all sides, over the heat that
 *  the fluence around it would give without shading. Rays are straight: scattering inside is left out, so that the rings of blood,
 *  which scatters forward, are a little less even than these.
 *  Letters: tau = mu_a R; the fluence at radius rho R is the mean over directions of exp(-tau L / sin theta), L the way to the surface in the cross-section.
 *  Throws: out-of-range. Derivation: attenuation along straight rays, averaged over directions. */
export function shadedRings(absorptionPerCm: number, radiusUm: number, rings: number): Float64Array {
  assertWithin('absorptionPerCm', absorptionPerCm, 0, 1e8);
  assertWithin('radiusUm', radiusUm, 1e-3, 1e5);
  const tau = absorptionPerCm * radiusUm * 1e-4;
  return Float64Array.from({ length: rings }, (_, ring) => {
    let heat = 0;
    let area = 0;
    perRing.nodes.forEach((node, i) => {
      const rho = (ring + 0.5 * (node + 1)) / rings;
      heat += perRing.weights[i]! * rho * meanTransmission(tau, rho);
      area += perRing.weights[i]! * rho;
    });
    return heat / area;
  });
}

function meanTransmission(tau: number, rho: number): number {
  let sum = 0;
  perAngle.nodes.forEach((around, i) => {
    const phi = 0.5 * Math.PI * (around + 1);
    const way = -rho * Math.cos(phi) + Math.sqrt(Math.max(0, 1 - (rho * Math.sin(phi)) ** 2));
    perAngle.nodes.forEach((along, j) => {
      const theta = 0.25 * Math.PI * (along + 1);
      sum += perAngle.weights[i]! * perAngle.weights[j]! * Math.sin(theta) * Math.exp((-tau * way) / Math.sin(theta));
    });
  });
  return (sum * Math.PI) / 8; // half the range of phi over pi, times a quarter of pi
}
