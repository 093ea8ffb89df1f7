import { absorptionOf } from '../spectra/chromophore.js';
import { relaxationTimeS } from '../thermal/relaxation.js';
import { flatteningFactor } from '../tissue/vessel-correction.js';
import { assertTargetRange, damagePairOf, defineTarget, materialOf } from './target.js';

/** Share of the melanosome formula that a dark shaft absorbs: 0.55 gives about 90/cm at 755 nm, the order that shaft heating in
 *  use needs. No own measurement was found. */
const darkShaftFraction = 0.55;

/** A hair follicle: the pigmented shaft is the heater, the follicle's outer edge (where the stem cells of the bulge lie) is what
 *  must be damaged, so the heat has to cross from one to the other. A shaft without melanin is no target.
 *  @source Altshuler2001 heater and target apart */
export const hairFollicle = defineTarget({
  kind: 'hair-follicle',
  shape: 'cylinder',
  sizeRangeUm: [8, 2000], // finest vellus shaft to widest follicle, with room for their spread
  depthRangeMm: [0.005, 30],
  chromophores: ['melanosome'],
  effectText: 'damage integral 1 at the outer edge of the follicle',
  harmText: 'coagulation of the basal layer or surface, melanosome or bulk vaporization in the epidermis',
  sources: ['Altshuler2001', 'Henriques1947'],
  prepare(target, context) {
    assertTargetRange(hairFollicle, target.shaftDiameterUm, target.depthMm);
    assertTargetRange(hairFollicle, target.follicleDiameterUm, null);
    const { reference, remarks } = context;
    if (target.melaninFraction === undefined) {
      remarks.assume({
        name: 'melaninFraction',
        value: darkShaftFraction,
        source: 'a dark shaft, fitted to the order of absorption that shaft heating needs; no own measurement found',
        status: 'derived',
      });
    }
    const melaninFraction = target.melaninFraction ?? darkShaftFraction;
    const shaftRadiusUm = target.shaftDiameterUm / 2;
    return {
      kind: 'hair-follicle',
      depthUm: target.depthMm * 1000,
      relaxationTimeS: relaxationTimeS('cylinder', target.follicleDiameterUm),
      inclusion: {
        geometry: 'cylinder',
        heaterRadiusUm: shaftRadiusUm,
        effectRadiusUm: Math.max(target.follicleDiameterUm / 2, shaftRadiusUm),
        heater: materialOf(reference, 'hair-shaft'),
        surroundings: materialOf(reference, 'dermis'),
      },
      effect: { by: 'damage', pair: damagePairOf(context, 'hair-follicle', 'target') },
      melanosomesAreTarget: false,
      heaterAbsorptionPerCm(wavelengthNm) {
        const shaftPerCm = melaninFraction * absorptionOf(reference.chromophores, 'melanosome', wavelengthNm, remarks);
        return shaftPerCm * flatteningFactor(shaftPerCm, shaftRadiusUm);
      },
      ...(melaninFraction > 0 ? {} : { noTarget: 'the shaft holds no melanin, so nothing in the follicle absorbs' }),
    };
  },
});
