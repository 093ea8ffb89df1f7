import { absorptionOf, chromophoreOf } from '../spectra/chromophore.js';
import { relaxationTimeS } from '../thermal/relaxation.js';
import { explosiveVaporizationC } from './granule.js';
import { assertTargetRange, defineTarget, materialOf } from './target.js';

/** Pigment granules in the dermis: melanin, or ink with a measured absorption. Each granule is its own sphere; the effect is the
 *  explosive vaporization around it, which only pulses near or below its relaxation time reach.
 *  @source JacquesMcAuliffe1991; Schmidt2014 threshold of constant absorbed energy density */
export const dermalPigment = defineTarget({
  kind: 'dermal-pigment',
  shape: 'sphere',
  sizeRangeUm: [0.01, 80], // single ink particle to a clump in a cell, with room for their spread
  depthRangeMm: [0.005, 30],
  chromophores: ['melanosome'],
  effectText: 'explosive vaporization at the granule',
  harmText: 'coagulation of the basal layer or surface, melanosome or bulk vaporization in the epidermis',
  sources: ['JacquesMcAuliffe1991', 'Schmidt2014'],
  prepare(target, context) {
    assertTargetRange(dermalPigment, target.granuleDiameterUm, target.depthMm);
    const { reference, remarks } = context;
    const radiusUm = target.granuleDiameterUm / 2;
    chromophoreOf(reference.chromophores, target.chromophoreId);
    remarks.assume({
      name: 'explosiveVaporizationC',
      value: explosiveVaporizationC,
      unit: 'C',
      source: 'JacquesMcAuliffe1991',
      status: 'from-memory',
    });
    remarks.caution(
      'diagnose-first',
      'A pigmented lesion must be diagnosed by a clinician before any light is used; nevi and suspected melanoma are not targets.',
    );
    remarks.caution(
      'ink-darkening',
      'Inks with iron oxide or titanium dioxide may darken at once and for good; allergy to the fragments is possible.',
    );
    return {
      kind: 'dermal-pigment',
      depthUm: target.depthMm * 1000,
      relaxationTimeS: relaxationTimeS('sphere', target.granuleDiameterUm),
      inclusion: {
        geometry: 'sphere',
        heaterRadiusUm: radiusUm,
        effectRadiusUm: radiusUm,
        heater: materialOf(reference, 'melanosome'),
        surroundings: materialOf(reference, 'dermis'),
      },
      effect: { by: 'vaporization', temperatureC: explosiveVaporizationC },
      melanosomesAreTarget: false,
      heaterAbsorptionPerCm: (wavelengthNm) => absorptionOf(reference.chromophores, target.chromophoreId, wavelengthNm, remarks),
    };
  },
});
