import { absorptionOf } from '../spectra/chromophore.js';
import { relaxationTimeS } from '../thermal/relaxation.js';
import { assertTargetRange, damagePairOf, defineTarget, materialOf } from './target.js';

/** Share of sebum in a gland: sebum heats about twice and glands about 1.5 times as much as water near 1720 nm, so half of a gland
 *  heats like sebum and half like water. @source Sakamoto2012 abstract; the share is derived */
const sebumFraction = 0.5;

/** A sebaceous gland as a sphere of lipid and water, whose edge must be damaged.
 *  @source Sakamoto2012 */
export const sebaceousGland = defineTarget({
  kind: 'sebaceous-gland',
  shape: 'sphere',
  sizeRangeUm: [30, 5000],
  depthRangeMm: [0.005, 30],
  chromophores: ['lipid', 'water'],
  effectText: 'damage integral 1 at the edge of the gland',
  harmText: 'coagulation of the basal layer or surface, bulk vaporization in the epidermis',
  sources: ['Sakamoto2012', 'Henriques1947'],
  prepare(target, context) {
    assertTargetRange(sebaceousGland, target.diameterUm, target.depthMm);
    const { reference, remarks } = context;
    const radiusUm = target.diameterUm / 2;
    remarks.assume({ name: 'sebumFraction', value: sebumFraction, source: 'Sakamoto2012', status: 'derived' });
    remarks.caution(
      'cooling-required',
      'Lipid targets lie under skin whose water absorbs almost as much: without surface cooling no window is expected.',
    );
    return {
      kind: 'sebaceous-gland',
      depthUm: target.depthMm * 1000,
      relaxationTimeS: relaxationTimeS('sphere', target.diameterUm),
      inclusion: {
        geometry: 'sphere',
        heaterRadiusUm: radiusUm,
        effectRadiusUm: radiusUm,
        heater: materialOf(reference, 'fat'),
        surroundings: materialOf(reference, 'dermis'),
      },
      effect: { by: 'damage', pair: damagePairOf(context, 'hair-follicle', 'target') },
      melanosomesAreTarget: false,
      heaterAbsorptionPerCm: (wavelengthNm) =>
        sebumFraction * absorptionOf(reference.chromophores, 'lipid', wavelengthNm, remarks) +
        (1 - sebumFraction) * absorptionOf(reference.chromophores, 'water', wavelengthNm, remarks),
    };
  },
});
