import { interpolateLog } from '../numeric/interpolate.js';
import type { Remarks } from '../quantities/caution.js';
import { assertWithin } from '../quantities/errors.js';
import { absorptionPerCm, type Chromophores, chromophoreOf } from './chromophore.js';

/** Amounts that set the absorption of blood. */
export interface BloodContents {
  readonly oxygenSaturationFraction: number;
  /** Hemoglobin per volume of blood. */
  readonly hemoglobinGPerL: number;
}

/** Published rows of whole blood at hematocrit 45 %, water included. @source Bosschaart2014 appendix */
export interface WholeBloodTable {
  readonly wavelengthsNm: Float64Array;
  readonly oxygenatedPerCm: Float64Array;
  readonly deoxygenatedPerCm: Float64Array;
}

/** The two hemoglobins by which blood is computed; a second table may be put in their place. */
export interface HemoglobinTable {
  readonly oxygenatedId: string;
  readonly deoxygenatedId: string;
}

const lastTableNm = 990; // hemoglobin tables end at 1000 nm; the whole-blood rows take over just before
const bridgeFromNm = 995;
const bridgeToNm = 1070;
const redCellsBelowNm = 450; // Bosschaart2014 against Prahl1998: 0.45 to 0.8 of the solution below 450 nm, 0.9 to 1 above except at 590-600 nm
const referenceHemoglobinGPerL = 150; // hemoglobin at which the whole-blood rows hold: hematocrit 45 %
const hemoglobinEndsNm = 1150; // between 'about 1100' of Friebel2009 and where the bridge's slope would end
const waterOfBlood = 0.75; // Friebel2009: beyond 1100 nm blood absorbs as water lowered by 20 to 30 %

/** Absorption of blood, 1/cm, before any flattening by red cells or vessels.
 *  To 990 nm: hemoglobin by saturation, plus the water of blood. 995 to 1070 nm: the two published whole-blood rows, between them in
 *  the logarithm. Beyond: water lowered by a quarter, and what hemoglobin adds falls evenly to nothing at 1150 nm.
 *  Valid: from the start of the hemoglobin tables to the end of the water table.
 *  Red cells are not modelled: whole blood absorbs 0.45 of this at 420 nm, 0.95 at 540 to 580 nm.
 *  Throws: out-of-range. @source Prahl1998; Bosschaart2014 appendix; Friebel2009 abstract */
export function bloodAbsorptionPerCm(
  wavelengthNm: number,
  contents: BloodContents,
  chromophores: Chromophores,
  wholeBlood: WholeBloodTable,
  hemoglobin: HemoglobinTable,
  remarks?: Remarks,
): number {
  const saturation = contents.oxygenSaturationFraction;
  const amount = contents.hemoglobinGPerL / referenceHemoglobinGPerL;
  const waterPerCm = absorptionPerCm(chromophoreOf(chromophores, 'water'), wavelengthNm);
  if (wavelengthNm < redCellsBelowNm) {
    remarks?.caution(
      'red-cells',
      'Blood is computed as a solution: below 450 nm red cells flatten its absorption, and whole blood was measured at 0.45 to 0.8 of this figure.',
    );
  }
  if (wavelengthNm <= lastTableNm) {
    const oxygenated = absorptionPerCm(
      chromophoreOf(chromophores, hemoglobin.oxygenatedId),
      wavelengthNm,
      contents.hemoglobinGPerL,
    );
    const deoxygenated = absorptionPerCm(
      chromophoreOf(chromophores, hemoglobin.deoxygenatedId),
      wavelengthNm,
      contents.hemoglobinGPerL,
    );
    return saturation * oxygenated + (1 - saturation) * deoxygenated + waterOfBlood * waterPerCm;
  }
  remarks?.caution(
    'blood-beyond-tables',
    'Beyond 1000 nm no hemoglobin table exists: blood rests on two published whole-blood rows (995 and 1070 nm) and, beyond, on water lowered by 20 to 30 %.',
  );
  remarks?.assume({
    name: 'bloodBeyond1000Nm',
    value: 'whole-blood rows, then water lowered by a quarter',
    source: 'Bosschaart2014 Friebel2009',
    status: 'read-secondary',
  });
  return waterOfBlood * waterPerCm + amount * absorptionBridgedPerCm(wavelengthNm, saturation, chromophores, wholeBlood);
}

/** What hemoglobin of 150 g/L adds to the water of blood beyond its tables, 1/cm: 995 to 1070 nm by the two rows of whole blood, between
 *  them in the logarithm, then evenly to nothing at 1150 nm. Valid: from 990 nm. Throws: out-of-range.
 *  @source Bosschaart2014 appendix; Friebel2009 abstract */
export function absorptionBridgedPerCm(
  wavelengthNm: number,
  oxygenSaturationFraction: number,
  chromophores: Chromophores,
  wholeBlood: WholeBloodTable,
): number {
  const hemoglobinAt = (nm: number): number => {
    const row = (values: Float64Array) => interpolateLog(wholeBlood.wavelengthsNm, values, nm, 'wavelengthNm for whole blood');
    const { oxygenatedPerCm, deoxygenatedPerCm } = wholeBlood;
    const blood = oxygenSaturationFraction * row(oxygenatedPerCm) + (1 - oxygenSaturationFraction) * row(deoxygenatedPerCm);
    return Math.max(0, blood - waterOfBlood * absorptionPerCm(chromophoreOf(chromophores, 'water'), nm));
  };
  assertWithin('wavelengthNm', wavelengthNm, lastTableNm, Number.MAX_VALUE);
  if (wavelengthNm <= bridgeToNm) return hemoglobinAt(Math.max(wavelengthNm, bridgeFromNm));
  const share = Math.max(0, (hemoglobinEndsNm - wavelengthNm) / (hemoglobinEndsNm - bridgeToNm));
  return share * hemoglobinAt(bridgeToNm);
}

const secondTableFromNm = 450; // Zijlstra1991
const wholeBloodToNm = 780; // Bosschaart2014, apart from its two single rows
const beyondTablesFactor = 1.3; // two rows rounded to one decimal, then water lowered by 20 to 30 %; common practice, no source

/** How far published figures of the absorption of this blood differ at a wavelength: greatest over least of the first hemoglobin table, the
 *  second one (`alternatives`) and the rows of whole blood, as many as reach there; a round factor beyond the tables.
 *  Valid: as `bloodAbsorptionPerCm`. Throws: out-of-range. @source Prahl1998; Zijlstra1991; Bosschaart2014 */
export function bloodSpreadFactor(
  wavelengthNm: number,
  contents: BloodContents,
  reference: {
    readonly chromophores: Chromophores;
    readonly alternatives: Chromophores;
    readonly wholeBlood: WholeBloodTable;
    readonly hemoglobin: HemoglobinTable;
  },
): number {
  const { chromophores, alternatives, wholeBlood, hemoglobin } = reference;
  const first = bloodAbsorptionPerCm(wavelengthNm, contents, chromophores, wholeBlood, hemoglobin);
  if (wavelengthNm > lastTableNm) return beyondTablesFactor;
  const figures = [first];
  const other = hemoglobin.oxygenatedId === hemoglobinTables.prahl1998.oxygenatedId ? 'zijlstra1991' : 'prahl1998';
  const both = new Map([...chromophores, ...alternatives]);
  if (wavelengthNm >= secondTableFromNm) {
    figures.push(bloodAbsorptionPerCm(wavelengthNm, contents, both, wholeBlood, hemoglobinTables[other]));
  }
  if (wavelengthNm >= wholeBlood.wavelengthsNm[0]! && wavelengthNm <= wholeBloodToNm) {
    const at = (values: Float64Array) =>
      interpolateLog(wholeBlood.wavelengthsNm, values, wavelengthNm, 'wavelengthNm for whole blood');
    const { oxygenSaturationFraction: saturation, hemoglobinGPerL } = contents;
    const rows = saturation * at(wholeBlood.oxygenatedPerCm) + (1 - saturation) * at(wholeBlood.deoxygenatedPerCm);
    figures.push((hemoglobinGPerL / referenceHemoglobinGPerL) * rows);
  }
  return Math.max(...figures) / Math.min(...figures);
}

/** The two hemoglobin tables that may be chosen between. @source Prahl1998; Zijlstra1991 */
export const hemoglobinTables = {
  prahl1998: { oxygenatedId: 'oxyhemoglobin', deoxygenatedId: 'deoxyhemoglobin' },
  zijlstra1991: { oxygenatedId: 'oxyhemoglobin-zijlstra', deoxygenatedId: 'deoxyhemoglobin-zijlstra' },
} as const satisfies Record<string, HemoglobinTable>;

export type HemoglobinTableId = keyof typeof hemoglobinTables;
