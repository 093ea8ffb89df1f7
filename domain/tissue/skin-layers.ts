import { Remarks } from '../quantities/caution.js';
import { DomainError } from '../quantities/errors.js';
import { bloodAbsorptionPerCm, type HemoglobinTable, type WholeBloodTable } from '../spectra/blood.js';
import { absorptionOf, type Chromophores, chromophoreOf } from '../spectra/chromophore.js';
import { spectrumRangeNm } from '../spectra/spectrum.js';
import type { OpticalLayer } from './optical-layer.js';
import { anisotropyOf, reducedScatteringPerCm } from './scattering.js';
import type { ResolvedSkin } from './skin.js';
import type { LayerName, SkinFigures } from './skin-figures.js';
import { flatteningFactor } from './vessel-correction.js';

/** What the optics of skin need of the reference data. */
export interface TissueReference {
  readonly chromophores: Chromophores;
  readonly wholeBlood: WholeBloodTable;
  readonly hemoglobin: HemoglobinTable;
  readonly skin: SkinFigures;
}

/** Absorption of this skin's blood, 1/cm, not flattened. Throws: out-of-range. */
export function skinBloodAbsorptionPerCm(
  wavelengthNm: number,
  skin: ResolvedSkin,
  reference: TissueReference,
  remarks?: Remarks,
): number {
  return bloodAbsorptionPerCm(wavelengthNm, skin, reference.chromophores, reference.wholeBlood, reference.hemoglobin, remarks);
}

/** Epidermis, dermis and fat at one wavelength, topmost first. Absorption is the volume-weighted sum of the chromophores (melanosomes or
 *  flattened blood in bloodless, watery tissue); the law for bloodless tissue was fitted to hydrated skin, so in the near infrared a little
 *  water counts twice. Valid: 350 to 12 000 nm. Throws: out-of-range.
 *  @source Jacques1998 mixing; Jacques2013 eq. 2; Verkruysse1997 flattening */
export function skinLayers(
  skin: ResolvedSkin,
  wavelengthNm: number,
  reference: TissueReference,
  remarks: Remarks = new Remarks(),
): OpticalLayer[] {
  assertDescribed(wavelengthNm);
  const { chromophores } = reference;
  const waterPerCm = absorptionOf(chromophores, 'water', wavelengthNm);
  const melanosomePerCm = absorptionOf(chromophores, 'melanosome', wavelengthNm, remarks);
  const bloodlessPerCm = absorptionOf(chromophores, 'bloodless-skin', wavelengthNm, remarks);
  const bloodPerCm = skinBloodAbsorptionPerCm(wavelengthNm, skin, reference, remarks);
  const flatBloodPerCm = bloodPerCm * flatteningFactor(bloodPerCm, skin.backgroundVesselRadiusUm);
  const { melanosomeFraction: melanin, bloodFraction: blood } = skin;
  const epidermisPerCm = melanin * melanosomePerCm + (1 - melanin) * (bloodlessPerCm + skin.epidermisWaterFraction * waterPerCm);
  const dermisPerCm = blood * flatBloodPerCm + (1 - blood) * (bloodlessPerCm + skin.dermisWaterFraction * waterPerCm);
  const { fat_lipid: lipid, fat_water: fatWater } = reference.skin.structure;
  for (const [name, { value, source, status }] of [
    ['lipid', lipid],
    ['water', fatWater],
  ] as const) {
    remarks.assume({ name: `skin.fat.${name}Fraction`, value, source, status });
  }
  const fatPerCm = lipid.value * lipidPerCm(chromophores, wavelengthNm, remarks) + fatWater.value * waterPerCm;
  return [
    layer('epidermis', skin.epidermisThicknessUm, epidermisPerCm, wavelengthNm, skin, reference.skin, remarks),
    layer('dermis', skin.dermisThicknessUm, dermisPerCm, wavelengthNm, skin, reference.skin, remarks),
    layer('fat', skin.fatThicknessUm, fatPerCm, wavelengthNm, skin, reference.skin, remarks),
  ];
}

const describedFromNm = 350; // start of the laws of Jacques1998 for melanosomes and bloodless skin
const describedToNm = 12_000; // end of the water table

function assertDescribed(wavelengthNm: number): void {
  if (wavelengthNm >= describedFromNm && wavelengthNm <= describedToNm) return;
  throw new DomainError(
    'out-of-range',
    `wavelengthNm is ${wavelengthNm}; skin by its pigmentation is known from ${describedFromNm} to ${describedToNm} nm, outside give explicit layers`,
    {
      quantity: 'wavelengthNm',
      value: Number.isFinite(wavelengthNm) ? wavelengthNm : String(wavelengthNm),
      min: describedFromNm,
      max: describedToNm,
    },
  );
}

function lipidPerCm(chromophores: Chromophores, wavelengthNm: number, remarks: Remarks): number {
  const [fromNm, toNm] = spectrumRangeNm(chromophoreOf(chromophores, 'lipid').spectrum);
  const held = Math.min(Math.max(wavelengthNm, fromNm), toNm);
  if (held !== wavelengthNm) {
    remarks.caution(
      'lipid-held',
      `Fat is tabulated from ${fromNm} to ${toNm} nm; its nearest value is used in the deepest layer.`,
    );
  }
  return absorptionOf(chromophores, 'lipid', held, remarks);
}

function layer(
  name: LayerName,
  thicknessUm: number,
  absorptionPerCm: number,
  wavelengthNm: number,
  skin: ResolvedSkin,
  figures: SkinFigures,
  remarks: Remarks,
): OpticalLayer {
  const law = figures.scattering[name];
  const index = figures.refractiveIndex[name];
  const { offset, slopePerNm, ceiling, source, status } = figures.anisotropy;
  const anisotropy = anisotropyOf(figures.anisotropy, wavelengthNm);
  remarks.assume({
    name: `skin.${name}.reducedScatteringAt500NmPerCm`,
    value: law.aPerCm,
    unit: '1/cm',
    source: law.source,
    status: law.status,
  });
  remarks.assume({ name: `skin.${name}.refractiveIndex`, value: index.value, source: index.source, status: index.status });
  remarks.assume({
    name: 'skin.anisotropy',
    value: `${offset} + ${slopePerNm} x wavelength in nm, at most ${ceiling}`,
    source,
    status,
  });
  const reduced = skin.scatteringFactor * reducedScatteringPerCm(law, wavelengthNm, remarks);
  return {
    name,
    thicknessUm,
    absorptionPerCm,
    scatteringPerCm: reduced / (1 - anisotropy),
    anisotropy,
    refractiveIndex: index.value,
  };
}
