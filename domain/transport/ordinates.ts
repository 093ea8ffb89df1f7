import { gaussLegendre } from '../numeric/quadrature.js';

/** Directions of one layer in one hemisphere. `cosines` and `weights` share their order with every other layer's:
 *  entry i is the same ray refracted, so that n sin(theta) is common. */
export interface LayerOrdinates {
  readonly count: number;
  readonly cosines: Float64Array;
  readonly weights: Float64Array;
}

export interface Ordinates {
  readonly layers: readonly LayerOrdinates[];
  /** n sin(theta) of every ray, ascending; a layer of index n holds the rays below n. */
  readonly invariants: Float64Array;
}

const sameIndex = 1e-7; // indices closer than this share their critical angle

/** Double-Gauss directions for a stack of layers in air, split at every critical angle.
 *  Between two neighboring critical angles the nodes are Gauss points in the cosine of the rarest medium that carries those
 *  rays (air for the escape cone), in which Fresnel reflectance is smooth; the weights in the other media follow from
 *  n^2 mu dmu being common, so net flux is kept exactly at interfaces.
 *  Shape: `perRegion` rays inside the escape cone and as many up to the least index, twice as many in a cone that fills
 *  most of the hemisphere; half as many between the indices of different layers.
 *  @source Stamnes1988 (double-Gauss ordinates); JinStamnes1994 (refracting interfaces) */
export function makeOrdinates(indices: readonly number[], perRegion: number): Ordinates {
  const edges = [1];
  for (const index of [...indices].sort((a, b) => a - b)) {
    if (index - edges[edges.length - 1]! > sameIndex) edges.push(index);
  }
  const nearAir = Math.min(...indices) < 1.25; // the escape cone is most of the hemisphere
  const invariants: number[] = [];
  const flows: number[] = []; // n^2 mu dmu
  for (let region = 0; region < edges.length; region++) {
    const index = edges[region]!;
    const greatest = region === 0 ? 1 : Math.sqrt(1 - (edges[region - 1]! / index) ** 2);
    const count = region === 0 && nearAir ? 2 * perRegion : region < 2 ? perRegion : Math.max(2, Math.ceil(perRegion / 2));
    const { nodes, weights } = gaussLegendre(count);
    for (let i = count - 1; i >= 0; i--) {
      const cosine = (greatest * (1 + nodes[i]!)) / 2;
      invariants.push(index * Math.sqrt(1 - cosine * cosine));
      flows.push(((index * index * cosine * greatest) / 2) * weights[i]!);
    }
  }
  const layers = indices.map((index) => {
    let count = 0;
    while (count < invariants.length && invariants[count]! < index) count++;
    const cosines = new Float64Array(count);
    const weights = new Float64Array(count);
    for (let i = 0; i < count; i++) {
      const sine = invariants[i]! / index;
      cosines[i] = Math.sqrt((1 - sine) * (1 + sine));
      weights[i] = flows[i]! / (index * index * cosines[i]!);
    }
    return { count, cosines, weights };
  });
  return { layers, invariants: Float64Array.from(invariants) };
}
