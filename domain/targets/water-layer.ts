import { relaxationTimeS } from '../thermal/relaxation.js';
import { assertTargetRange, damagePairOf, defineTarget } from './target.js';

/** Tissue water at a depth, heated without ablation under a cooled surface: the dermis itself at that depth must reach the
 *  coagulation of collagen. The relaxation time is that of a plane as thick as it is deep.
 *  @source Pearce1993 collagen kinetics */
export const waterLayer = defineTarget({
  kind: 'water-layer',
  shape: 'plane',
  sizeRangeUm: null,
  depthRangeMm: [0.005, 30],
  chromophores: ['water'],
  effectText: 'damage integral 1 of collagen at the stated depth',
  harmText: 'coagulation of the basal layer or surface, bulk vaporization in the epidermis',
  sources: ['Pearce1993', 'Henriques1947'],
  prepare(target, context) {
    assertTargetRange(waterLayer, null, target.depthMm);
    return {
      kind: 'water-layer',
      depthUm: target.depthMm * 1000,
      relaxationTimeS: relaxationTimeS('plane', target.depthMm * 1000),
      inclusion: null,
      effect: { by: 'damage', pair: damagePairOf(context, 'collagen-rat-skin', 'target') },
      melanosomesAreTarget: false,
      heaterAbsorptionPerCm: () => null,
    };
  },
});
