import { DomainError } from '../quantities/errors.js';
import type { ThermalMaterial } from './thermal-figures.js';

/** One layer as heat sees it, topmost first in a stack. */
export interface HeatLayer {
  readonly thicknessUm: number;
  readonly material: ThermalMaterial;
}

/** Finite volumes down from the surface. Cell i lies between faces i and i + 1; layer interfaces lie on faces. */
export interface HeatGrid {
  readonly facesUm: Float64Array;
  readonly centersUm: Float64Array;
  /** Heat capacity of each cell per area. */
  readonly capacityJPerM2K: Float64Array;
  /** From the center of each cell to either of its faces. */
  readonly halfConductanceWPerM2K: Float64Array;
  /** From center i to center i + 1. */
  readonly conductanceWPerM2K: Float64Array;
  readonly layerOfCell: Int32Array;
  /** Greatest diffusivity met, in mm2/s: bounds how far heat spreads. */
  readonly diffusivityMaxMm2PerS: number;
}

export interface HeatGridOptions {
  /** Thickness of the cells at the surface and on both sides of the first interface; default 2. */
  readonly finestUm?: number;
  /** Growth of cell thickness per distance from there; default 0.08. */
  readonly growth?: number;
  /** Longest time asked of the grid: the last layer is extended until heat cannot come back from its far end; default 30. */
  readonly longestS?: number;
}

/** Divides layers into cells and works out capacities and conductances (two half cells in series across an interface).
 *  Throws: out-of-range for a layer without thickness or an impossible material. */
export function makeHeatGrid(layers: readonly HeatLayer[], options: HeatGridOptions = {}): HeatGrid {
  const { finestUm = 2, growth = 0.08, longestS = 30 } = options;
  if (layers.length === 0) throw new DomainError('contradiction', 'a heat grid needs at least one layer', { fields: ['layers'] });
  for (const layer of layers) assertLayer(layer);
  const finestAtUm = layers.length > 1 ? [0, layers[0]!.thicknessUm] : [0];
  const faces: number[] = [0];
  const layerOfCell: number[] = [];
  let topUm = 0;
  layers.forEach((layer, index) => {
    let bottomUm = topUm + layer.thicknessUm;
    if (index === layers.length - 1) bottomUm = Math.max(bottomUm, reachUm(layers, longestS));
    for (const face of gradedFaces(topUm, bottomUm, finestAtUm, finestUm, growth)) {
      faces.push(face);
      layerOfCell.push(index);
    }
    topUm = bottomUm;
  });
  return withProperties(Float64Array.from(faces), Int32Array.from(layerOfCell), layers);
}

function withProperties(facesUm: Float64Array, layerOfCell: Int32Array, layers: readonly HeatLayer[]): HeatGrid {
  const cells = layerOfCell.length;
  const centersUm = new Float64Array(cells);
  const capacityJPerM2K = new Float64Array(cells);
  const halfConductanceWPerM2K = new Float64Array(cells);
  for (let i = 0; i < cells; i++) {
    const { conductivityWPerMK, densityKgPerM3, specificHeatJPerKgK } = layers[layerOfCell[i]!]!.material;
    const thicknessM = (facesUm[i + 1]! - facesUm[i]!) * 1e-6;
    centersUm[i] = 0.5 * (facesUm[i]! + facesUm[i + 1]!);
    capacityJPerM2K[i] = densityKgPerM3 * specificHeatJPerKgK * thicknessM;
    halfConductanceWPerM2K[i] = (2 * conductivityWPerMK) / thicknessM;
  }
  const conductanceWPerM2K = Float64Array.from({ length: cells - 1 }, (_, i) =>
    inSeries(halfConductanceWPerM2K[i]!, halfConductanceWPerM2K[i + 1]!),
  );
  const diffusivityMaxMm2PerS = Math.max(...layers.map(({ material }) => diffusivityMm2PerS(material)));
  return { facesUm, centersUm, capacityJPerM2K, halfConductanceWPerM2K, conductanceWPerM2K, layerOfCell, diffusivityMaxMm2PerS };
}

/** Six diffusion lengths: the share of heat that comes back from there within the time is below erfc(3) = 2e-5. */
function reachUm(layers: readonly HeatLayer[], longestS: number): number {
  const diffusivity = Math.max(...layers.map(({ material }) => diffusivityMm2PerS(material)));
  return 6000 * Math.sqrt(diffusivity * longestS);
}

/** Thermal diffusivity of a material. Letters: k / (rho c). */
export function diffusivityMm2PerS(material: ThermalMaterial): number {
  return (1e6 * material.conductivityWPerMK) / (material.densityKgPerM3 * material.specificHeatJPerKgK);
}

/** Conductance of two conductances one behind the other. */
export function inSeries(first: number, second: number): number {
  return 1 / (1 / first + 1 / second);
}

/** Faces below `top` down to `bottom`, whose cells measure about finest + growth x distance to the nearest of `finestAt`.
 *  The count of cells up to a depth is the integral of 1 / size, which is inverted piece by piece. */
export function gradedFaces(top: number, bottom: number, finestAt: readonly number[], finest: number, growth: number): number[] {
  const middles = finestAt.slice(1).map((at, i) => 0.5 * (at + finestAt[i]!));
  const knots = [top, ...[...finestAt, ...middles].filter((z) => z > top && z < bottom).sort((a, b) => a - b), bottom];
  const sizes = knots.map((z) => finest + growth * Math.min(...finestAt.map((at) => Math.abs(z - at))));
  const counts = [0];
  for (let i = 1; i < knots.length; i++) counts.push(counts[i - 1]! + Math.abs(Math.log(sizes[i]! / sizes[i - 1]!)) / growth);
  const total = counts[counts.length - 1]!;
  const cells = Math.max(2, Math.ceil(total));
  const faces: number[] = [];
  for (let cell = 1, piece = 1; cell < cells; cell++) {
    const count = (total * cell) / cells;
    while (counts[piece]! < count) piece++;
    const sign = sizes[piece]! > sizes[piece - 1]! ? 1 : -1;
    faces.push(
      knots[piece - 1]! + (sign * sizes[piece - 1]! * Math.expm1(sign * growth * (count - counts[piece - 1]!))) / growth,
    );
  }
  faces.push(bottom);
  return faces;
}

function assertLayer({ thicknessUm, material }: HeatLayer): void {
  const numbers = [thicknessUm, material.conductivityWPerMK, material.densityKgPerM3, material.specificHeatJPerKgK];
  if (numbers.every((value) => Number.isFinite(value) && value > 0)) return;
  throw new DomainError('out-of-range', `layer of ${material.id}: thickness and thermal properties must be positive`, {
    quantity: 'thicknessUm',
    value: String(thicknessUm),
    min: 0,
  });
}
