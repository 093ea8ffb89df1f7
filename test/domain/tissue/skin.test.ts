import { describe, expect, it } from 'vitest';
import { Remarks } from '../../../domain/quantities/caution.js';
import { melanosomeFractionOfIta } from '../../../domain/tissue/pigmentation.js';
import { itaDegreesOf, resolveSkin, type SkinDescription } from '../../../domain/tissue/skin.js';
import type { Phototype } from '../../../domain/tissue/skin-figures.js';
import { referenceData } from '../../support/ask.js';

const figures = referenceData().skin;
const phototypes: readonly Phototype[] = ['I', 'II', 'III', 'IV', 'V', 'VI'];

function resolve(description: SkinDescription) {
  const remarks = new Remarks();
  const skin = resolveSkin(description, figures, remarks);
  return { skin, remarks, codes: remarks.cautions.map(({ code }) => code) };
}

describe('pigmentation', () => {
  it('[Chardon1991] ITA is atan((L* - 50) / b*): 33.69 degrees for 60 and 15, -18.43 for 45 and 15', () => {
    expect(itaDegreesOf(60, 15)).toBeCloseTo(33.69, 2);
    expect(itaDegreesOf(45, 15)).toBeCloseTo(-18.43, 2);
    expect(() => itaDegreesOf(60, 0)).toThrow(/yellownessB/);
    expect(() => itaDegreesOf(101, 15)).toThrow(/lightnessL/);
  });

  it('falls with ITA without a step, meets each phototype within its band, and stays within the outer ones', () => {
    let previous = Number.POSITIVE_INFINITY;
    for (let ita = -90; ita <= 90; ita++) {
      const fraction = melanosomeFractionOfIta(ita, figures.phototypes);
      expect(fraction).toBeLessThanOrEqual(previous);
      expect(fraction).toBeGreaterThan(previous === Number.POSITIVE_INFINITY ? 0 : previous / 1.1);
      previous = fraction;
    }
    expect(melanosomeFractionOfIta(90, figures.phototypes)).toBeCloseTo(figures.phototypes.I.melanosomeFraction, 12);
    expect(melanosomeFractionOfIta(-90, figures.phototypes)).toBeCloseTo(figures.phototypes.VI.melanosomeFraction, 12);
    for (const phototype of ['II', 'III', 'IV', 'V'] as const) {
      const { itaLowDegrees, itaHighDegrees, melanosomeFraction } = figures.phototypes[phototype];
      expect(melanosomeFractionOfIta((itaLowDegrees + itaHighDegrees) / 2, figures.phototypes)).toBeCloseTo(
        melanosomeFraction,
        12,
      );
    }
  });

  it('[DelBino2013] bands of ITA meet at 55, 41, 28, 10 and -30 degrees', () => {
    expect(phototypes.map((phototype) => figures.phototypes[phototype].itaLowDegrees)).toEqual([55, 41, 28, 10, -30, -90]);
    for (let i = 1; i < phototypes.length; i++) {
      expect(figures.phototypes[phototypes[i]!].itaHighDegrees).toBe(figures.phototypes[phototypes[i - 1]!].itaLowDegrees);
    }
  });

  it('by phototype is weak evidence: a wide interval and a caution; by ITA a narrow one', () => {
    const byPhototype = resolve({ phototype: 'III' });
    const byIta = resolve({ lightnessL: 60, yellownessB: 15 });
    const width = ({ skin }: typeof byIta) => skin.melanosomeFractionHigh / skin.melanosomeFractionLow;
    expect(width(byPhototype)).toBeGreaterThanOrEqual(4 - 1e-9);
    expect(width(byIta)).toBeLessThan(2);
    expect(byPhototype.codes).toContain('phototype-weak-evidence');
    expect(byIta.codes).not.toContain('phototype-weak-evidence');
    expect(byIta.skin.itaDegrees).toBeCloseTo(33.69, 2);
    expect(resolve({ itaDegrees: itaDegreesOf(60, 15) }).skin.melanosomeFraction).toBe(byIta.skin.melanosomeFraction);
  });

  it('darkens from phototype I to VI', () => {
    const fractions = phototypes.map((phototype) => resolve({ phototype }).skin.melanosomeFraction);
    expect(fractions).toEqual([...fractions].sort((a, b) => a - b));
    expect(new Set(fractions).size).toBe(6);
  });

  it.each([
    {},
    { phototype: 'II', itaDegrees: 40 },
    { lightnessL: 60 },
    { yellownessB: 12 },
    { melanosomeFraction: 0.02, phototype: 'II' },
  ] as SkinDescription[])('refuses %o: exactly one measure of pigmentation', (description) => {
    expect(() => resolve(description)).toThrow(/exactly one/);
  });
});

describe('descriptions of skin', () => {
  it('names every default with its source and status', () => {
    const { remarks } = resolve({ phototype: 'II' });
    const names = remarks.assumptions.map(({ name }) => name);
    expect(names).toEqual(
      expect.arrayContaining([
        'skin.melanosomeFraction',
        'skin.epidermisThicknessUm',
        'skin.dermisThicknessUm',
        'skin.fatThicknessUm',
        'skin.bloodFraction',
        'skin.oxygenSaturationFraction',
        'skin.hematocritFraction',
        'skin.epidermis.waterFraction',
        'skin.dermis.waterFraction',
        'skin.backgroundVesselDiameterUm',
      ]),
    );
    for (const { source, status } of remarks.assumptions) expect(source && status).toBeTruthy();
  });

  it('takes what is given and then assumes nothing about it', () => {
    const { skin, remarks } = resolve({
      melanosomeFraction: 0.02,
      epidermisThicknessUm: 70,
      bloodFraction: 0.03,
      oxygenSaturationFraction: 0.9,
      hematocritFraction: 0.36,
      waterFraction: 0.7,
    });
    expect(skin).toMatchObject({
      melanosomeFraction: 0.02,
      epidermisThicknessUm: 70,
      bloodFraction: 0.03,
      oxygenSaturationFraction: 0.9,
      epidermisWaterFraction: 0.7,
      dermisWaterFraction: 0.7,
    });
    expect(skin.hemoglobinGPerL).toBeCloseTo(120, 9); // 150 g/L at 0.45, so 120 g/L at 0.36
    const names = remarks.assumptions.map(({ name }) => name);
    for (const given of ['melanosomeFraction', 'epidermisThicknessUm', 'bloodFraction', 'hematocritFraction', 'waterFraction']) {
      expect(names).not.toContain(`skin.${given}`);
    }
  });

  it('cautions about a tan that is recent or not stated, and about dark skin however it was measured', () => {
    expect(resolve({ phototype: 'II', tan: 'recent' }).codes).toContain('tan');
    expect(resolve({ phototype: 'II' }).codes).toContain('tan-unknown');
    const untanned = resolve({ phototype: 'II', tan: 'none' }).codes;
    expect(untanned).not.toContain('tan');
    expect(untanned).not.toContain('tan-unknown');
    for (const dark of [{ phototype: 'V' }, { itaDegrees: -40 }, { melanosomeFraction: 0.05 }] as const) {
      expect(resolve(dark).codes).toContain('dark-skin-visible-light');
    }
    expect(resolve({ itaDegrees: 45 }).codes).not.toContain('dark-skin-visible-light');
  });

  it('names the figures that rest on memory in one caution', () => {
    const { remarks } = resolve({ phototype: 'II' });
    const caution = remarks.cautions.find(({ code }) => code === 'from-memory')!;
    for (const { name, status } of remarks.assumptions) expect(caution.text.includes(name)).toBe(status === 'from-memory');
  });

  it.each([
    ['epidermisThicknessUm', 0],
    ['bloodFraction', -0.1],
    ['oxygenSaturationFraction', 1.2],
    ['hematocritFraction', Number.NaN],
    ['waterFraction', 1.01],
  ])('refuses %s of %d', (field, value) => {
    expect(() => resolve({ phototype: 'II', [field]: value })).toThrow(new RegExp(`skin.${field}`));
  });
});
