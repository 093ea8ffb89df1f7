import { describe, expect, it } from 'vitest';
import { Remarks } from '../../../domain/quantities/caution.js';
import { withHemoglobinTable } from '../../../domain/reference/choose-hemoglobin.js';
import { bloodAbsorptionPerCm, bloodSpreadFactor } from '../../../domain/spectra/blood.js';
import { absorptionOf } from '../../../domain/spectra/chromophore.js';
import { referenceData } from '../../support/ask.js';

const reference = referenceData();
const { chromophores, wholeBlood } = reference;

function blood(nm: number, oxygenSaturationFraction = 0.75, hemoglobinGPerL = 150, remarks?: Remarks): number {
  const contents = { oxygenSaturationFraction, hemoglobinGPerL };
  return bloodAbsorptionPerCm(nm, contents, chromophores, wholeBlood, reference.hemoglobin, remarks);
}

describe('blood', () => {
  it('is the saturation-weighted sum of two hemoglobins and its own water', () => {
    const expected =
      0.6 * absorptionOf(chromophores, 'oxyhemoglobin', 660) +
      0.4 * absorptionOf(chromophores, 'deoxyhemoglobin', 660) +
      0.75 * absorptionOf(chromophores, 'water', 660);
    expect(blood(660, 0.6)).toBeCloseTo(expected, 10);
  });

  it.each([
    [995, 1, 6.5],
    [995, 0, 2.3],
    [1070, 1, 4.2],
    [1070, 0, 1.9],
  ])('[Bosschaart2014] at %d nm and saturation %d is %d per cm, water included', (nm, saturation, expected) => {
    expect(blood(nm, saturation)).toBeCloseTo(expected, 2);
  });

  it.each([1200, 1450, 1940, 2940])('[Friebel2009] at %d nm is water lowered by 20 to 30 %%', (nm) => {
    const ratio = blood(nm) / absorptionOf(chromophores, 'water', nm);
    expect(ratio).toBeGreaterThanOrEqual(0.7);
    expect(ratio).toBeLessThanOrEqual(0.8);
  });

  it('has no step above 10 % from 600 to 1300 nm, saturation 0.75', () => {
    for (let nm = 600; nm < 1300; nm++) expect(Math.abs(Math.log(blood(nm + 1) / blood(nm)))).toBeLessThan(0.1);
  });

  it('says where it rests on more than the hemoglobin tables, and where red cells matter', () => {
    const codesAt = (nm: number) => {
      const remarks = new Remarks();
      blood(nm, 0.75, 150, remarks);
      return remarks.cautions.map(({ code }) => code);
    };
    expect(codesAt(585)).toEqual([]);
    expect(codesAt(420)).toEqual(['red-cells']);
    expect(codesAt(1064)).toEqual(['blood-beyond-tables']);
  });

  it('grows with hemoglobin, but its water does not', () => {
    const water = 0.75 * absorptionOf(chromophores, 'water', 1064);
    expect(blood(1064, 0.75, 300) - water).toBeCloseTo(2 * (blood(1064) - water), 9);
    expect(blood(1450, 0.75, 300)).toBe(blood(1450));
  });

  it('can be computed by the second hemoglobin table, which reads 48 % more at 694 nm oxygenated', () => {
    const second = withHemoglobinTable(reference, 'zijlstra1991');
    const contents = { oxygenSaturationFraction: 1, hemoglobinGPerL: 150 };
    const found = bloodAbsorptionPerCm(694, contents, second.chromophores, wholeBlood, second.hemoglobin);
    expect(found / blood(694, 1)).toBeGreaterThan(1.4);
    expect(() => bloodAbsorptionPerCm(420, contents, second.chromophores, wholeBlood, second.hemoglobin)).toThrow(/450/);
  });

  it('knows how far published tables differ: at least the 48 % at 694 nm, and the same whichever table is in force', () => {
    const oxygenated = { oxygenSaturationFraction: 1, hemoglobinGPerL: 150 };
    expect(bloodSpreadFactor(694, oxygenated, reference)).toBeGreaterThan(1.4);
    expect(bloodSpreadFactor(694, oxygenated, withHemoglobinTable(reference, 'zijlstra1991'))).toBeCloseTo(
      bloodSpreadFactor(694, oxygenated, reference),
      9,
    );
    expect(bloodSpreadFactor(1064, oxygenated, reference)).toBeGreaterThan(1);
    for (let nm = 450; nm <= 990; nm += 10) expect(bloodSpreadFactor(nm, oxygenated, reference)).toBeGreaterThanOrEqual(1);
  });
});
