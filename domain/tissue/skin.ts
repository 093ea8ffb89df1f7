import type { Remarks } from '../quantities/caution.js';
import { assertWithin, DomainError } from '../quantities/errors.js';
import { melanosomeFractionOfIta } from './pigmentation.js';
import type { Phototype, SkinFigures, StructureId } from './skin-figures.js';

/** Skin as a user describes it: exactly one of phototype, individual typology angle, CIE L* with b*, or melanosome fraction; every other
 *  field may be left open. */
export interface SkinDescription {
  readonly phototype?: Phototype;
  readonly itaDegrees?: number;
  readonly lightnessL?: number;
  readonly yellownessB?: number;
  readonly melanosomeFraction?: number;
  readonly measuredAt?: string;
  readonly epidermisThicknessUm?: number;
  readonly bloodFraction?: number;
  readonly oxygenSaturationFraction?: number;
  readonly hematocritFraction?: number;
  readonly waterFraction?: number;
  readonly site?: string;
  readonly tan?: 'none' | 'recent' | 'unknown';
}

/** Skin with every figure settled. Low and high bound the melanosome fraction at about two standard deviations. */
export interface ResolvedSkin {
  readonly melanosomeFraction: number;
  readonly melanosomeFractionLow: number;
  readonly melanosomeFractionHigh: number;
  /** How pigmentation was known. */
  readonly pigmentFrom: 'phototype' | 'ita' | 'melanosome-fraction';
  readonly itaDegrees: number | null;
  readonly epidermisThicknessUm: number;
  readonly dermisThicknessUm: number;
  readonly fatThicknessUm: number;
  readonly bloodFraction: number;
  readonly bloodFractionLow: number;
  readonly bloodFractionHigh: number;
  readonly oxygenSaturationFraction: number;
  readonly hemoglobinGPerL: number;
  readonly epidermisWaterFraction: number;
  readonly dermisWaterFraction: number;
  readonly backgroundVesselRadiusUm: number;
  /** Factor on all scattering, 1 as published; uncertainty is carried by it. */
  readonly scatteringFactor: number;
}

const measuredSpread = 1.3; // repeatability of colorimetry plus the spread of melanin at one angle; common practice, no source
const givenSpread = 1.15; // a melanosome fraction that the user vouches for; common practice, no source

/** Settles a description of skin; what it leaves open is taken from the figures and named in the assumptions.
 *  Throws: contradiction (none or several pigment inputs), out-of-range. */
export function resolveSkin(description: SkinDescription, figures: SkinFigures, remarks: Remarks): ResolvedSkin {
  const pigment = resolvePigment(description, figures, remarks);
  cautionAboutTan(description, remarks);
  cautionAboutDarkSkin(pigment.melanosomeFraction, figures, remarks);
  const take = (field: keyof SkinDescription & string, id: StructureId, min: number, max: number): number => {
    const given = description[field];
    if (typeof given === 'number') {
      assertWithin(`skin.${field}`, given, min, max);
      return given;
    }
    const { value, unit, source, status } = figures.structure[id];
    remarks.assume({ name: `skin.${field}`, value, unit, source, status });
    return value;
  };
  const settle = (name: string, id: StructureId): number => {
    const { value, unit, source, status } = figures.structure[id];
    remarks.assume({ name, value, unit, source, status });
    return value;
  };
  const hematocrit = take('hematocritFraction', 'hematocrit', 0.1, 0.75);
  const { hematocrit: usual, blood_fraction: blood } = figures.structure;
  const hemoglobinMass = settle('skin.hemoglobinAtUsualHematocritGPerL', 'hemoglobin_mass');
  const bloodFraction = take('bloodFraction', 'blood_fraction', 0, 0.5);
  const bloodGiven = description.bloodFraction !== undefined;
  const water = description.waterFraction;
  if (water !== undefined) assertWithin('skin.waterFraction', water, 0, 1);
  return {
    ...pigment,
    epidermisThicknessUm: take('epidermisThicknessUm', 'epidermis_thickness', 20, 1000),
    dermisThicknessUm: settle('skin.dermisThicknessUm', 'dermis_thickness'),
    fatThicknessUm: settle('skin.fatThicknessUm', 'fat_thickness'),
    bloodFraction,
    bloodFractionLow: bloodGiven ? bloodFraction / 1.5 : blood.low,
    bloodFractionHigh: bloodGiven ? Math.min(0.5, bloodFraction * 1.5) : blood.high,
    oxygenSaturationFraction: take('oxygenSaturationFraction', 'oxygen_saturation', 0, 1),
    hemoglobinGPerL: (hemoglobinMass * hematocrit) / usual.value,
    epidermisWaterFraction: water ?? settle('skin.epidermis.waterFraction', 'epidermis_water'),
    dermisWaterFraction: water ?? settle('skin.dermis.waterFraction', 'dermis_water'),
    backgroundVesselRadiusUm: settle('skin.backgroundVesselDiameterUm', 'background_vessel_diameter') / 2,
    scatteringFactor: 1,
  };
}

type Pigment = Pick<
  ResolvedSkin,
  'melanosomeFraction' | 'melanosomeFractionLow' | 'melanosomeFractionHigh' | 'pigmentFrom' | 'itaDegrees'
>;

function resolvePigment(description: SkinDescription, figures: SkinFigures, remarks: Remarks): Pigment {
  const { phototype, itaDegrees, lightnessL, yellownessB, melanosomeFraction } = description;
  const given = [phototype, itaDegrees, lightnessL ?? yellownessB, melanosomeFraction].filter((value) => value !== undefined);
  if (given.length !== 1 || (lightnessL === undefined) !== (yellownessB === undefined)) {
    throw new DomainError(
      'contradiction',
      'skin needs exactly one of phototype, itaDegrees, lightnessL with yellownessB, or melanosomeFraction',
      {
        fields: ['skin.phototype', 'skin.itaDegrees', 'skin.lightnessL', 'skin.yellownessB', 'skin.melanosomeFraction'],
      },
    );
  }
  if (melanosomeFraction !== undefined) {
    assertWithin('skin.melanosomeFraction', melanosomeFraction, 0, 0.5);
    return around(melanosomeFraction, givenSpread, 'melanosome-fraction', null);
  }
  if (phototype !== undefined) {
    const figure = figures.phototypes[phototype];
    remarks.assume({
      name: 'skin.melanosomeFraction',
      value: figure.melanosomeFraction,
      source: figure.source,
      status: figure.status,
    });
    remarks.caution(
      'phototype-weak-evidence',
      'Phototype alone is weak evidence of pigmentation: the melanosome fraction is derived from practice and varies about twofold within one phototype. Measure L* and b* at the site.',
    );
    return {
      ...around(figure.melanosomeFraction, 1, 'phototype', null),
      melanosomeFractionLow: figure.low,
      melanosomeFractionHigh: figure.high,
    };
  }
  const ita = itaDegrees ?? itaDegreesOf(lightnessL!, yellownessB!);
  assertWithin('skin.itaDegrees', ita, -90, 90);
  const fraction = melanosomeFractionOfIta(ita, figures.phototypes);
  remarks.assume({ name: 'skin.melanosomeFraction', value: fraction, source: 'DelBino2013', status: 'derived' });
  return around(fraction, measuredSpread, 'ita', ita);
}

function around(fraction: number, spread: number, pigmentFrom: ResolvedSkin['pigmentFrom'], itaDegrees: number | null): Pigment {
  return {
    melanosomeFraction: fraction,
    melanosomeFractionLow: fraction / spread,
    melanosomeFractionHigh: Math.min(1, fraction * spread),
    pigmentFrom,
    itaDegrees,
  };
}

/** Individual typology angle, degrees: atan((L* - 50) / b*). Throws: out-of-range. @source Chardon1991 */
export function itaDegreesOf(lightnessL: number, yellownessB: number): number {
  assertWithin('skin.lightnessL', lightnessL, 0, 100);
  assertWithin('skin.yellownessB', yellownessB, 0.1, 60);
  return (Math.atan((lightnessL - 50) / yellownessB) * 180) / Math.PI;
}

function cautionAboutTan({ tan }: SkinDescription, remarks: Remarks): void {
  if (tan === 'recent') {
    remarks.caution(
      'tan',
      'Recent sun or self-tan: pigmentation is higher than usual and changing. Postpone, or measure at the site on the day.',
    );
  } else if (tan === 'unknown' || tan === undefined) {
    remarks.caution(
      'tan-unknown',
      'Sun exposure is not stated: a tan, self-tan or pigment measured elsewhere or long ago makes the epidermal limit too high.',
    );
  }
}

function cautionAboutDarkSkin(melanosomeFraction: number, { phototypes }: SkinFigures, remarks: Remarks): void {
  const betweenIvAndV = Math.sqrt(phototypes.IV.melanosomeFraction * phototypes.V.melanosomeFraction);
  if (melanosomeFraction >= betweenIvAndV) {
    remarks.caution(
      'dark-skin-visible-light',
      'In skin as dark as phototypes V and VI cooling may not protect the epidermis at visible wavelengths.',
    );
  }
}
