import { absorptionOf } from '../spectra/chromophore.js';
import { relaxationTimeS } from '../thermal/relaxation.js';
import { assumeMelanosome, explosiveVaporizationC, melanosomeDiameterUm } from './granule.js';
import { assertTargetRange, damagePairOf, defineTarget, materialOf } from './target.js';

/** Pigment of the epidermis: a lesion whose epidermis holds `melanosomeFraction` melanosomes, in skin with its own fraction (the
 *  default). Pulses below the melanosome's relaxation time vaporize single melanosomes; longer ones heat the layer as a whole,
 *  and then target and skin differ only by their amounts of pigment.
 *  @source AndersonParrish1983; JacquesMcAuliffe1991 */
export const epidermalPigment = defineTarget({
  kind: 'epidermal-pigment',
  shape: 'sphere',
  sizeRangeUm: null,
  depthRangeMm: null,
  chromophores: ['melanosome'],
  effectText: 'explosive vaporization of melanosomes, or coagulation of the pigmented basal layer, whichever needs less fluence',
  harmText: 'coagulation or bulk vaporization of the epidermis around the lesion',
  sources: ['AndersonParrish1983', 'JacquesMcAuliffe1991', 'Henriques1947'],
  prepare(target, context) {
    assertTargetRange(epidermalPigment, null, null);
    const { skin, reference, remarks } = context;
    assumeMelanosome(remarks);
    if (target.melanosomeFraction === undefined) {
      remarks.assume({
        name: 'lesionMelanosomeFraction',
        value: skin.melanosomeFraction,
        source: 'the fraction of the surrounding skin, as none was given for the lesion',
        status: 'derived',
      });
    }
    remarks.caution(
      'diagnose-first',
      'A pigmented lesion must be diagnosed by a clinician before any light is used; nevi and suspected melanoma are not targets.',
    );
    remarks.caution(
      'same-chromophore',
      'Target and epidermis share one chromophore: selectivity rests on pulse duration and on the amounts of pigment.',
    );
    return {
      kind: 'epidermal-pigment',
      depthUm: skin.epidermisThicknessUm,
      relaxationTimeS: relaxationTimeS('sphere', melanosomeDiameterUm),
      inclusion: {
        geometry: 'sphere',
        heaterRadiusUm: melanosomeDiameterUm / 2,
        effectRadiusUm: melanosomeDiameterUm / 2,
        heater: materialOf(reference, 'melanosome'),
        surroundings: materialOf(reference, 'epidermis'),
      },
      effect: {
        by: 'either',
        pair: damagePairOf(context, 'epidermis-henriques', 'target'),
        temperatureC: explosiveVaporizationC,
      },
      melanosomesAreTarget: true,
      ...(target.melanosomeFraction === undefined ? {} : { lesionMelanosomeFraction: target.melanosomeFraction }),
      heaterAbsorptionPerCm: (wavelengthNm) => absorptionOf(reference.chromophores, 'melanosome', wavelengthNm, remarks),
    };
  },
});
