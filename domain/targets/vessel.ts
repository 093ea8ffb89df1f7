import { relaxationTimeS } from '../thermal/relaxation.js';
import { skinBloodAbsorptionPerCm } from '../tissue/skin-layers.js';
import { flatteningFactor } from '../tissue/vessel-correction.js';
import { assertTargetRange, damagePairOf, defineTarget, materialOf } from './target.js';

/** A blood vessel lying parallel to the surface. Blood absorbs, the wall at the vessel's radius is what must coagulate.
 *  Light is taken as diffuse; what the vessel absorbs, with its own shading by the flattening factor, is spread evenly over its
 *  cross-section (blood flows and mixes little within a pulse, so for large vessels in green or yellow light the top is hotter
 *  and the bottom colder than computed).
 *  @source Verkruysse1993 flattening in cylinders; Agah1994 wall kinetics */
export const vessel = defineTarget({
  kind: 'vessel',
  shape: 'cylinder',
  sizeRangeUm: [3, 5000], // capillary loop to leg vein, with room for their spread
  depthRangeMm: [0.005, 30],
  chromophores: ['oxyhemoglobin', 'deoxyhemoglobin', 'water'],
  effectText: 'coagulation of the vessel wall (damage integral 1 at the vessel radius)',
  harmText: 'coagulation of the basal layer or surface, melanosome or bulk vaporization in the epidermis',
  sources: ['AndersonParrish1983', 'Agah1994'],
  prepare(target, context) {
    assertTargetRange(vessel, target.diameterUm, target.depthMm);
    const { skin, reference, remarks } = context;
    const radiusUm = target.diameterUm / 2;
    return {
      kind: 'vessel',
      depthUm: target.depthMm * 1000,
      relaxationTimeS: relaxationTimeS('cylinder', target.diameterUm),
      inclusion: {
        geometry: 'cylinder',
        heaterRadiusUm: radiusUm,
        effectRadiusUm: radiusUm,
        heater: materialOf(reference, 'blood'),
        surroundings: materialOf(reference, 'dermis'),
      },
      effect: { by: 'damage', pair: damagePairOf(context, 'vessel-wall', 'target') },
      melanosomesAreTarget: false,
      heaterAbsorptionPerCm(wavelengthNm) {
        const bloodPerCm = skinBloodAbsorptionPerCm(wavelengthNm, skin, reference, remarks);
        return bloodPerCm * flatteningFactor(bloodPerCm, radiusUm);
      },
    };
  },
});
