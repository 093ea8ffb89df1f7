import { gaussLegendre } from '../numeric/quadrature.js';
import type { OpticalLayer } from '../tissue/optical-layer.js';
import { fresnelReflectance } from './fresnel.js';
import type { LayerModes } from './layer-modes.js';
import type { Ordinates } from './ordinates.js';

const rays = 24; // Gauss points over the escape cone

/** What exact single scattering returns through the surface beyond what the cut-off phase function on few ordinates returns.
 *  Light scattered once from the downward beam, by the whole phase function outside its forward peak, is counted on many rays;
 *  the same light as the ordinates carry it is taken away. `beamDown` are irradiances at the tops of the layers.
 *  @source NakajimaTanaka1988 (truncated multiple plus single scattering) */
export function singleScatteringExcess(
  layers: readonly OpticalLayer[],
  modes: readonly LayerModes[],
  ordinates: Ordinates,
  beamDown: Float64Array,
): number {
  const surface = layers[0]!.refractiveIndex;
  const returned = (invariant: number, source: (layer: number, cosine: number) => number): number => {
    let arriving = 0;
    let kept = 1;
    for (const [j, layer] of layers.entries()) {
      const above = layers[j - 1]?.refractiveIndex ?? 1;
      if (invariant >= layer.refractiveIndex) break;
      const cosine = Math.sqrt(1 - (invariant / layer.refractiveIndex) ** 2);
      kept *= 1 - fresnelReflectance(layer.refractiveIndex, above, cosine);
      const thickness = modes[j]!.opticalThickness;
      arriving += (kept * beamDown[j]! * source(j, cosine) * -Math.expm1(-thickness * (1 + 1 / cosine))) / (1 + cosine);
      kept *= Math.exp(-thickness / cosine);
    }
    return arriving;
  };
  let excess = 0;
  const { nodes, weights } = gaussLegendre(rays);
  for (let q = 0; q < rays; q++) {
    const outside = (1 + nodes[q]!) / 2;
    const exact = returned(Math.sqrt(1 - outside * outside), (j, cosine) => {
      const { anisotropy: g, refractiveIndex, scatteringPerCm } = layers[j]!;
      const share = (scatteringPerCm * 1e-4) / modes[j]!.extinctionPerUm; // albedo over (1 - albedo f), the peak left out
      const phase = (1 - g * g) / (1 + g * g + 2 * g * cosine) ** 1.5;
      return (share * phase) / (2 * refractiveIndex ** 2);
    });
    excess += (outside * exact * weights[q]!) / 2;
  }
  const { cosines, weights: solid } = ordinates.layers[0]!;
  for (let ray = 0; ray < modes[0]!.count && ordinates.invariants[ray]! < 1; ray++) {
    const carried = returned(ordinates.invariants[ray]!, (j) => modes[j]!.backScattering[ray]!);
    excess -= surface * surface * solid[ray]! * cosines[ray]! * carried;
  }
  return excess;
}
