import { describe, expect, it } from 'vitest';
import type { Target } from '../../domain/targets/target.js';
import type { Phototype } from '../../domain/tissue/skin-figures.js';
import { askRanking, askWindow } from '../support/ask.js';

// Orderings of the trade (common practice, no source, except where one is named), all from the physics: nothing in the program knows them.

const spot = { shape: 'circle', diameterMm: 7 } as const;
const contact = { kind: 'contact', temperatureC: 5 } as const;
const infrared = [755, 800, 940, 980, 1064, 1320];
const pulses = [0.00045, 0.0015, 0.01, 0.04];

/** Wavelengths by their best pulse, best first, and whether that has a window. */
function order(
  target: Target,
  phototype: Phototype,
  wavelengthsNm: number[],
  pulseDurationsS: number[],
  diameterMm: number = spot.diameterMm,
) {
  const judged = askRanking({
    skin: { phototype },
    target,
    cooling: contact,
    wavelengthsNm,
    pulseDurationsS,
    spots: [{ shape: 'circle', diameterMm }],
  });
  const best = new Map<number, { ratio: number; threshold: number }>();
  for (const { candidate, window } of judged) {
    const nm = candidate.line.wavelengthNm;
    if (!best.has(nm)) {
      best.set(nm, {
        ratio: window?.therapeuticRatio ?? 0,
        threshold: window?.targetThresholdJPerCm2 ?? Number.POSITIVE_INFINITY,
      });
    }
  }
  return best;
}

describe('[common practice, no source] rankings make sense', () => {
  it.each([
    [50, 'I'],
    [50, 'II'],
    [100, 'I'],
    [100, 'II'],
  ] as const)('superficial vessel of %d um in %s: yellow and green above every near-infrared line', (diameterUm, phototype) => {
    const best = order({ kind: 'vessel', diameterUm, depthMm: 0.3 }, phototype, [532, 577, 585, 595, 600, ...infrared], pulses);
    const ranked = [...best.keys()];
    expect(new Set(ranked.slice(0, 5))).toEqual(new Set([532, 577, 585, 595, 600]));
    expect(best.get(585)!.ratio).toBeGreaterThan(1);
  });

  it('vessel of 1 mm at 2 mm: 940 to 1064 nm above all visible lines', () => {
    const best = order(
      { kind: 'vessel', diameterUm: 1000, depthMm: 2 },
      'II',
      [532, 577, 585, 595, 694.3, 755, 940, 1064],
      [0.01, 0.03, 0.1],
      6,
    );
    expect(new Set([...best.keys()].slice(0, 2))).toEqual(new Set([940, 1064]));
  });

  const hair: Target = { kind: 'hair-follicle', shaftDiameterUm: 80, follicleDiameterUm: 200, depthMm: 3 };

  it.each(['I', 'II', 'III'] as const)('hair in %s: every line from 694 to 1064 nm has a window', (phototype) => {
    const best = order(hair, phototype, [694.3, 755, 800, 810, 940, 1064], [0.003, 0.02, 0.03], 12);
    for (const [nm, { ratio }] of best) expect(ratio, `${nm} nm`).toBeGreaterThan(1);
  });

  it('hair in II: 755 to 810 nm needs less fluence than 940 and 1064 nm', () => {
    const best = order(hair, 'II', [755, 800, 810, 940, 1064], [0.01], 12);
    for (const nm of [755, 800, 810])
      expect(best.get(nm)!.threshold).toBeLessThan(Math.min(best.get(940)!.threshold, best.get(1064)!.threshold));
  });

  it('known miss: the ruby line needs a tenth less than 755 nm for hair in II, where the trade expects 755 to 810 nm to need least', () => {
    const best = order(hair, 'II', [694.3, 755], [0.01], 12);
    const ratio = best.get(694.3)!.threshold / best.get(755)!.threshold;
    expect(ratio).toBeGreaterThan(0.8);
    expect(ratio).toBeLessThan(1);
  });

  it('hair in VI: 1064 nm has the best ratio, and the visible lines have no window', () => {
    const best = order(hair, 'VI', [532, 585, 595, 694.3, 755, 800, 1064], [0.003, 0.02, 0.03, 0.1], 12);
    expect([...best.keys()][0]).toBe(1064);
    for (const nm of [532, 585, 595, 694.3]) expect(best.get(nm)!.ratio, `${nm} nm`).toBeLessThan(1);
  });

  it('epidermal pigment: ns and ps pulses in the green to red ahead of ms', () => {
    const judged = askRanking({
      skin: { phototype: 'II' },
      target: { kind: 'epidermal-pigment' },
      wavelengthsNm: [532, 694.3, 755],
      pulseDurationsS: [5e-10, 1e-8, 1e-3, 1e-2],
      spots: [{ shape: 'circle', diameterMm: 4 }],
    });
    const shortest = judged.slice(0, 6).map(({ candidate }) => candidate.pulseDurationS);
    expect(Math.max(...shortest)).toBeLessThan(1e-6);
    for (const { candidate, window } of judged.slice(6)) {
      expect(window!.therapeuticRatio, `${candidate.pulseDurationS} s`).toBeLessThanOrEqual(1);
    }
  });

  it('says no window as no window, with the reason', () => {
    const [only] = askRanking({
      skin: { phototype: 'VI' },
      target: { kind: 'vessel', diameterUm: 1000, depthMm: 2 },
      wavelengthsNm: [532],
      pulseDurationsS: [0.01],
      spots: [spot],
    });
    expect(only!.reasons[0]).toMatch(/^no window: at .* J\/cm2 .* before the target responds at .* J\/cm2$/);
  });

  it('hair without melanin is no target', () => {
    const window = askWindow({
      skin: { phototype: 'I' },
      target: { ...hair, melaninFraction: 0 },
      wavelengthNm: 755,
      pulse: { durationS: 0.003 },
      spot,
    });
    expect(window.targetThresholdJPerCm2).toBeNull();
    expect(window.therapeuticRatio).toBeNull();
  });

  it('dermal pigment answers nanosecond pulses and has no window with millisecond pulses', () => {
    const ask = (durationS: number) =>
      askWindow({
        skin: { phototype: 'II' },
        target: { kind: 'dermal-pigment', granuleDiameterUm: 1, depthMm: 0.5, chromophoreId: 'melanosome' },
        wavelengthNm: 1064,
        pulse: { durationS },
        spot: { shape: 'circle', diameterMm: 4 },
      });
    expect(ask(1e-8).targetThresholdJPerCm2!).toBeLessThan(20);
    expect(ask(1e-2).therapeuticRatio ?? 0).toBeLessThan(1);
  });

  it('a cooled lipid target near 1720 nm does better than at 1450 nm', () => {
    const ratio = (wavelengthNm: number) =>
      askWindow({
        skin: { phototype: 'II' },
        target: { kind: 'sebaceous-gland', diameterUm: 500, depthMm: 0.8 },
        cooling: { kind: 'contact', temperatureC: 4, preS: 1 },
        wavelengthNm,
        pulse: { durationS: 0.1 },
        spot,
      }).therapeuticRatio ?? 0;
    expect(ratio(1726)).toBeGreaterThan(ratio(1450));
  });
});

describe('[physics] cooling, spot and pigment act as they must', () => {
  const window = (change: object) =>
    askWindow({
      skin: { phototype: 'II' },
      target: { kind: 'vessel', diameterUm: 100, depthMm: 0.4 },
      wavelengthNm: 585,
      pulse: { durationS: 0.0015 },
      spot,
      ...change,
    });
  it('cooling raises the epidermal limit, longer pre-cooling more', () => {
    const limits = [undefined, { ...contact, preS: 0.05 }, { ...contact, preS: 0.5 }].map(
      (cooling) => window(cooling ? { cooling } : {}).epidermalLimitJPerCm2,
    );
    expect(limits[1]).toBeGreaterThan(limits[0]!);
    expect(limits[2]).toBeGreaterThan(limits[1]!);
  });
  it('a larger spot lowers the threshold of a deep target', () => {
    const at = (diameterMm: number) =>
      window({ spot: { shape: 'circle', diameterMm }, target: { kind: 'vessel', diameterUm: 100, depthMm: 1 } });
    expect(at(3).targetThresholdJPerCm2!).toBeGreaterThan(at(10).targetThresholdJPerCm2!);
  });
  it('more pigment lowers the limit', () => {
    const limits = (['I', 'II', 'III', 'IV', 'V', 'VI'] as const).map(
      (phototype) => window({ skin: { phototype } }).epidermalLimitJPerCm2,
    );
    expect(limits).toEqual([...limits].sort((a, b) => b - a));
  });
  it('energy over area counts for a Gaussian: its axis gets twice the mean, so thresholds are about half', () => {
    const flat = window({ spot: { shape: 'circle', diameterMm: 20 } });
    const gaussian = window({ spot: { shape: 'gaussian', diameterMm: 30 } });
    expect(gaussian.targetThresholdJPerCm2! / flat.targetThresholdJPerCm2!).toBeGreaterThan(0.48);
    expect(gaussian.targetThresholdJPerCm2! / flat.targetThresholdJPerCm2!).toBeLessThan(0.55);
  });
});
