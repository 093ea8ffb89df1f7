import { dermalPigment } from './dermal-pigment.js';
import { epidermalPigment } from './epidermal-pigment.js';
import { hairFollicle } from './hair-follicle.js';
import { sebaceousGland } from './sebaceous-gland.js';
import type { PreparedTarget, Target, TargetContext } from './target.js';
import { vessel } from './vessel.js';
import { waterLayer } from './water-layer.js';

/** Every target the program knows, by kind. */
export const targets = {
  vessel,
  'hair-follicle': hairFollicle,
  'epidermal-pigment': epidermalPigment,
  'dermal-pigment': dermalPigment,
  'sebaceous-gland': sebaceousGland,
  'water-layer': waterLayer,
} as const;

/** Makes a target ready for light and heat. Throws: out-of-range, unknown-reference. */
export function prepareTarget(target: Target, context: TargetContext): PreparedTarget {
  switch (target.kind) {
    case 'vessel':
      return vessel.prepare(target, context);
    case 'hair-follicle':
      return hairFollicle.prepare(target, context);
    case 'epidermal-pigment':
      return epidermalPigment.prepare(target, context);
    case 'dermal-pigment':
      return dermalPigment.prepare(target, context);
    case 'sebaceous-gland':
      return sebaceousGland.prepare(target, context);
    case 'water-layer':
      return waterLayer.prepare(target, context);
  }
}
