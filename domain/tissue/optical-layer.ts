/** One homogeneous layer as light transport sees it, topmost layer first in a stack; the last may be as thick as one likes. */
export interface OpticalLayer {
  readonly name: string;
  readonly thicknessUm: number;
  /** Absorption coefficient mu_a, natural base. */
  readonly absorptionPerCm: number;
  /** Scattering coefficient mu_s (not reduced), natural base. */
  readonly scatteringPerCm: number;
  /** Mean cosine g of the Henyey-Greenstein phase function. */
  readonly anisotropy: number;
  readonly refractiveIndex: number;
}
