import { Remarks } from '../../../domain/quantities/caution.js';
import { bloodAbsorptionPerCm } from '../../../domain/spectra/blood.js';
import { absorptionOf, absorptionPerCm, chromophoreOf, molarExtinctionPerCmPerM } from '../../../domain/spectra/chromophore.js';
import { anisotropyOf, reducedScatteringPerCm } from '../../../domain/tissue/scattering.js';
import { itaDegreesOf, resolveSkin } from '../../../domain/tissue/skin.js';
import type { Phototype } from '../../../domain/tissue/skin-figures.js';
import { skinLayers } from '../../../domain/tissue/skin-layers.js';
import { referenceData } from '../../support/ask.js';

interface Inputs {
  readonly chromophoreId: string;
  readonly wavelengthNm: number;
  readonly wavelengthsNm: readonly number[];
  readonly nearNm: number;
  readonly withinNm: number;
  readonly fromNm: number;
  readonly toNm: number;
  readonly id: string;
  readonly bloodFraction: number;
  readonly oxygenSaturationFraction: number;
  readonly hemoglobinGPerL: number;
  readonly waterFraction: number;
  readonly waterPerCm: number;
  readonly lightnessL: number;
  readonly yellownessB: number;
  readonly phototype: Phototype;
}

const reference = referenceData();
const { chromophores, alternatives, wholeBlood, hemoglobin, skin } = reference;
const known = new Map([...chromophores, ...alternatives]);
const extinction = (id: string, nm: number) => molarExtinctionPerCmPerM(chromophoreOf(known, id), nm);
const absorption = (id: string, nm: number) => absorptionOf(known, id, nm);
const water = ({ wavelengthNm }: Inputs) => absorption('water', wavelengthNm);

function wavelengthOfGreatest(value: (nm: number) => number, { fromNm, toNm }: Inputs): number {
  let best = fromNm;
  for (let nm = fromNm; nm <= toNm; nm++) if (value(nm) > value(best)) best = nm;
  return best;
}

// Crossing of the oxygenated and deoxygenated columns nearest to a wavelength, by bisection of the sign
function crossing({ nearNm, withinNm }: Inputs, suffix: string): number {
  const difference = (nm: number) => extinction(`oxyhemoglobin${suffix}`, nm) - extinction(`deoxyhemoglobin${suffix}`, nm);
  const crossings: number[] = [];
  for (let nm = nearNm - withinNm; nm < nearNm + withinNm; nm += 0.5) {
    let [low, high] = [nm, nm + 0.5];
    if (difference(low) * difference(high) > 0) continue;
    while (high - low > 1e-3) {
      const middle = (low + high) / 2;
      if (difference(low) * difference(middle) <= 0) high = middle;
      else low = middle;
    }
    crossings.push((low + high) / 2);
  }
  return crossings.sort((a, b) => Math.abs(a - nearNm) - Math.abs(b - nearNm))[0] ?? Number.NaN;
}

const redMinimumNm = (inputs: Inputs) => wavelengthOfGreatest((nm) => -extinction('oxyhemoglobin', nm), inputs);
const redMinimum = () => extinction('oxyhemoglobin', redMinimumNm({ fromNm: 600, toNm: 800 } as Inputs));

function bloodPerCm({ wavelengthNm, oxygenSaturationFraction, hemoglobinGPerL = 150 }: Inputs): number {
  const contents = { oxygenSaturationFraction, hemoglobinGPerL };
  return bloodAbsorptionPerCm(wavelengthNm, contents, chromophores, wholeBlood, hemoglobin);
}

const oxygenated = { oxygenSaturationFraction: 1, hemoglobinGPerL: 150 } as Inputs;
const melanosomeOverBlood = (wavelengthNm: number) =>
  absorption('melanosome', wavelengthNm) / bloodPerCm({ ...oxygenated, wavelengthNm });

const lineWavelengthsNm = reference.media.map(({ wavelengthNm }) => wavelengthNm);

export const solvers: Record<string, (inputs: Inputs) => number> = {
  'molar extinction of hemoglobin': ({ chromophoreId, wavelengthNm }) => extinction(chromophoreId, wavelengthNm),
  'molar extinction of hemoglobin, another compilation': ({ chromophoreId, wavelengthNm }) =>
    extinction(chromophoreId, wavelengthNm),
  'molar extinction at the scaling point': ({ chromophoreId, wavelengthNm }) => extinction(chromophoreId, wavelengthNm),
  'absorption of hemoglobin at 150 g/L': ({ chromophoreId, wavelengthNm }) => absorption(chromophoreId, wavelengthNm),
  'absorption of hemoglobin at 150 g/L, another compilation': ({ chromophoreId, wavelengthNm }) =>
    absorptionPerCm(chromophoreOf(known, chromophoreId), wavelengthNm, 150),
  'isosbestic point': (inputs) => crossing(inputs, ''),
  'isosbestic point of the second table': (inputs) => crossing(inputs, '-zijlstra'),
  'wavelength of the red minimum of oxyhemoglobin': redMinimumNm,
  'red minimum of oxyhemoglobin': redMinimum,
  'oxyhemoglobin over its red minimum': ({ wavelengthNm }) => extinction('oxyhemoglobin', wavelengthNm) / redMinimum(),
  'wavelength of a hemoglobin band': (inputs) => wavelengthOfGreatest((nm) => extinction(inputs.chromophoreId, nm), inputs),
  'absorption of a melanosome': ({ chromophoreId, wavelengthNm }) => absorption(chromophoreId, wavelengthNm),
  'absorption of water, another table': water,
  'absorption of water, its own source': water,
  'wavelength of a lipid band': (inputs) => wavelengthOfGreatest((nm) => absorption('lipid', nm), inputs),
  'absorption of lipid': ({ wavelengthNm }) => absorption('lipid', wavelengthNm),
  'lipid over water': (inputs) => absorption('lipid', inputs.wavelengthNm) / water(inputs),
  'fat is heated more than water (1 yes)': (inputs) => (absorption('lipid', inputs.wavelengthNm) > water(inputs) ? 1 : 0),
  'absorption of cornea': ({ id }) => {
    const { low, high } = reference.ablation.get(id)!;
    return (low + high) / 2;
  },
  'absorption of a blood-perfused dermis': (inputs) =>
    inputs.bloodFraction * bloodPerCm(inputs) + inputs.waterFraction * inputs.waterPerCm,
  'absorption of whole blood': bloodPerCm,
  'reduced scattering of dermis, another law': ({ wavelengthNm }) => reducedScatteringPerCm(skin.scattering.dermis, wavelengthNm),
  'anisotropy of skin': ({ wavelengthNm }) => anisotropyOf(skin.anisotropy, wavelengthNm),
  'individual typology angle': ({ lightnessL, yellownessB }) => itaDegreesOf(lightnessL, yellownessB),
  'absorption of epidermis': ({ phototype, wavelengthNm }) =>
    skinLayers(resolveSkin({ phototype }, skin, new Remarks()), wavelengthNm, reference)[0]!.absorptionPerCm,
  'melanosome over oxygenated blood lies between 50 and 400 (1 yes)': ({ wavelengthNm }) => {
    const ratio = melanosomeOverBlood(wavelengthNm);
    return ratio >= 50 && ratio <= 400 ? 1 : 0;
  },
  'no line outside 660 to 700 nm has 1.5 times the ratio of this one (1 yes)': ({ wavelengthNm }) => {
    const others = lineWavelengthsNm.filter((nm) => nm >= 400 && nm <= 1100 && (nm < 660 || nm > 700));
    return others.every((nm) => melanosomeOverBlood(nm) < 1.5 * melanosomeOverBlood(wavelengthNm)) ? 1 : 0;
  },
  'shortest wavelength of a medium': () => Math.min(...lineWavelengthsNm),
  'longest wavelength of a medium': () => Math.max(...lineWavelengthsNm),
  'water absorption falls in this order (1 yes)': ({ wavelengthsNm }) =>
    wavelengthsNm.every((nm, i) => i === 0 || absorption('water', nm) < absorption('water', wavelengthsNm[i - 1]!)) ? 1 : 0,
};
