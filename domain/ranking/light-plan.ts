import type { Spot } from '../beam/spot.js';
import { absorptionOf } from '../spectra/chromophore.js';
import type { OpticalLayer } from '../tissue/optical-layer.js';
import { skinLayers } from '../tissue/skin-layers.js';
import type { LightSolution } from '../transport/layered-solver.js';
import type { ExposureModel } from './exposure-model.js';

/** What one wavelength deposits under one spot on its axis, per unit incident fluence: energy over area, so that the axis of a Gaussian
 *  gets twice as much. */
export interface Deposit {
  /** Heat per volume in each cell of the heat grid over incident fluence, 1/cm. */
  readonly sourcePerCm: Float64Array;
  /** The same in the lesion, where the target's epidermis holds another amount of pigment; else the same array. */
  readonly lesionSourcePerCm: Float64Array;
  /** Fluence rate at the target's center over incident irradiance. */
  readonly fluenceRatioAtTarget: number;
  /** Heat per volume of the heater beyond that of the tissue it replaces, 1/cm; 0 without inclusion. */
  readonly heaterExcessPerCm: number;
  /** Heat per volume of a melanosome at the basal layer, 1/cm. */
  readonly melanosomePerCm: number;
  /** Absorption of the target over that of the epidermis. */
  readonly absorptionContrast: number;
}

/** One wavelength in one skin: optics solved once, every spot after that at little cost. */
export interface LightPlan {
  readonly wavelengthNm: number;
  depositUnder(spot: Spot): Deposit;
}

function absorptionAtDepth(layers: readonly OpticalLayer[], depthUm: number): number {
  let bottomUm = 0;
  for (const layer of layers) {
    bottomUm += layer.thicknessUm;
    if (depthUm < bottomUm) return layer.absorptionPerCm;
  }
  return layers[layers.length - 1]!.absorptionPerCm;
}

/** The stack with its last layer at least as deep as the heat grid. */
function downTo(bottomUm: number, layers: readonly OpticalLayer[]): OpticalLayer[] {
  const last = layers[layers.length - 1]!;
  const aboveUm = layers.slice(0, -1).reduce((sum, layer) => sum + layer.thicknessUm, 0);
  return [...layers.slice(0, -1), { ...last, thicknessUm: Math.max(last.thicknessUm, bottomUm - aboveUm) }];
}

/** Solves the light of one wavelength. Throws: out-of-range where a chromophore's table ends. */
export function planLight(model: ExposureModel, wavelengthNm: number): LightPlan {
  const { skin, target, reference, remarks, grid } = model;
  const bottomUm = grid.facesUm[grid.facesUm.length - 1]!;
  const layers = downTo(bottomUm, skinLayers(skin, wavelengthNm, reference, remarks));
  const light: LightSolution = model.solve(layers, { accuracy: 'ranking' });
  const lesionFraction = target.lesionMelanosomeFraction;
  const lesionLayers =
    lesionFraction === undefined || lesionFraction === skin.melanosomeFraction
      ? layers
      : downTo(bottomUm, skinLayers({ ...skin, melanosomeFraction: lesionFraction }, wavelengthNm, reference, remarks));
  const lesionLight = lesionLayers === layers ? light : model.solve(lesionLayers, { accuracy: 'ranking' });
  const heaterPerCm = target.heaterAbsorptionPerCm(wavelengthNm);
  const melanosomePerCm =
    skin.melanosomeFraction > 0 || target.melanosomesAreTarget ? melanosomeAbsorption(model, wavelengthNm) : 0;
  const epidermisPerCm = layers[0]!.absorptionPerCm;
  const backgroundPerCm = absorptionAtDepth(lesionLayers, target.depthUm);
  const depthsUm = [skin.epidermisThicknessUm, target.depthUm];
  return {
    wavelengthNm,
    depositUnder(spot) {
      const [basalRatio, targetRatio] = lesionLight.fluenceRatios(spot, depthsUm) as unknown as [number, number];
      const axial = spot.shape === 'gaussian' ? 2 : 1;
      const onAxis = (field: LightSolution) => {
        const perCm = field.absorbedPerCm(spot, grid.facesUm);
        return axial === 1 ? perCm : perCm.map((value) => axial * value);
      };
      const sourcePerCm = onAxis(light);
      return {
        sourcePerCm,
        lesionSourcePerCm: lesionLight === light ? sourcePerCm : onAxis(lesionLight),
        fluenceRatioAtTarget: targetRatio,
        heaterExcessPerCm: heaterPerCm === null ? 0 : axial * (heaterPerCm - backgroundPerCm) * targetRatio,
        melanosomePerCm: axial * melanosomePerCm * basalRatio,
        absorptionContrast: (heaterPerCm ?? backgroundPerCm) / epidermisPerCm,
      };
    },
  };
}

function melanosomeAbsorption({ reference, remarks }: ExposureModel, wavelengthNm: number): number {
  return absorptionOf(reference.chromophores, 'melanosome', wavelengthNm, remarks);
}
