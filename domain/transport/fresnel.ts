import { gaussLegendre } from '../numeric/quadrature.js';

/** Reflectance of a plane interface for unpolarized light that meets it from index `fromIndex` with cosine `cosine`.
 *  Valid: indices > 0, 0 <= cosine <= 1; 1 beyond the critical angle. @source BornWolf1999 section 1.5 */
export function fresnelReflectance(fromIndex: number, toIndex: number, cosine: number): number {
  if (fromIndex === toIndex) return 0;
  const ratio = fromIndex / toIndex;
  const sine2 = ratio * ratio * (1 - cosine * cosine);
  if (sine2 >= 1) return 1;
  const beyond = Math.sqrt(1 - sine2);
  const perpendicular = (ratio * cosine - beyond) / (ratio * cosine + beyond);
  const parallel = (cosine - ratio * beyond) / (cosine + ratio * beyond);
  return (perpendicular * perpendicular + parallel * parallel) / 2;
}

/** Hemispheric moments of internal reflection, for boundary conditions of diffusion type. */
export interface FresnelMoments {
  /** r1 = 2 integral of R mu dmu: reflectance of perfectly diffuse light. */
  readonly first: number;
  /** r2 = 3 integral of R mu^2 dmu. */
  readonly second: number;
  /** A = (1 + r2)/(1 - r1): fluence at the surface is 2 A times the inward net flux that leaves. */
  readonly boundaryFactor: number;
}

/** Moments of the reflectance seen from index `fromIndex` >= `toIndex`.
 *  Gauss-Legendre apart from the critical angle, where the reflectance rises like a square root.
 *  @source Haskell1994 (partial-current boundary condition) */
export function fresnelMoments(fromIndex: number, toIndex: number): FresnelMoments {
  const critical = fromIndex > toIndex ? Math.sqrt(1 - (toIndex / fromIndex) ** 2) : 0;
  let first = critical * critical;
  let second = critical ** 3;
  const { nodes, weights } = gaussLegendre(48);
  for (let i = 0; i < 48; i++) {
    const x = (nodes[i]! + 1) / 2;
    const mu = critical + (1 - critical) * x * x;
    const step = (1 - critical) * x * weights[i]!;
    const reflectance = fresnelReflectance(fromIndex, toIndex, mu);
    first += 2 * reflectance * mu * step;
    second += 3 * reflectance * mu * mu * step;
  }
  return { first, second, boundaryFactor: (1 + second) / (1 - first) };
}
