import type { OpticalLayer } from '../tissue/optical-layer.js';
import { type LightOptions, type LightSolution, solveLight } from './layered-solver.js';

/** Solved light fields kept by their optics, so that the same layers are never solved twice while they stay in store.
 *  Names of layers do not matter. The least recently used field leaves when the store is full. */
export interface LightFields {
  /** The field of these layers, solved now if it is not in store. Throws: as `solveLight`. */
  solve(layers: readonly OpticalLayer[], options: LightOptions): LightSolution;
  readonly hitCount: number;
  readonly missCount: number;
  readonly size: number;
}

/** An empty store for at most `capacity` fields; a three-layer field takes about 0.1 MB. */
export function makeLightFields(capacity: number): LightFields {
  const fields = new Map<string, LightSolution>();
  let hitCount = 0;
  let missCount = 0;
  return {
    solve: (layers, options) => {
      const key = opticsKey(layers, options);
      let field = fields.get(key);
      if (field) {
        hitCount++;
        fields.delete(key);
      } else {
        missCount++;
        field = solveLight(layers, options);
        if (fields.size >= capacity) fields.delete(fields.keys().next().value!);
      }
      fields.set(key, field);
      return field;
    },
    get hitCount() {
      return hitCount;
    },
    get missCount() {
      return missCount;
    },
    get size() {
      return fields.size;
    },
  };
}

function opticsKey(layers: readonly OpticalLayer[], options: LightOptions): string {
  let key: string = options.accuracy;
  for (const layer of layers) {
    key += `|${layer.thicknessUm},${layer.absorptionPerCm},${layer.scatteringPerCm},${layer.anisotropy},${layer.refractiveIndex}`;
  }
  return key;
}
