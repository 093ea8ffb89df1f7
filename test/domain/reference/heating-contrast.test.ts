import { describe, expect, it } from 'vitest';
import { comparableAbsorptionPerCm, comparableRangeNm, heatingContrast } from '../../../domain/reference/heating-contrast.js';
import { solveLight } from '../../../domain/transport/layered-solver.js';
import { referenceData } from '../../support/ask.js';
import { skinLikeStacks } from '../../support/stacks.js';

const reference = referenceData();
const { layers } = skinLikeStacks[0]!;
const light = solveLight(layers, { accuracy: 'ranking' });

describe('contrast of heating', () => {
  it('is absorption times internal fluence over the mean of the same in the epidermis', () => {
    const found = heatingContrast({ chromophorePerCm: 200, layers, light, spot: null, depthUm: 300 });
    const fluence = light.fluenceRatios(null, [300])[0]!;
    expect(found.fluenceRatioAtDepth).toBe(fluence);
    expect(found.heatingContrast).toBeCloseTo((200 * fluence) / light.absorbedPerCm(null, [0, layers[0]!.thicknessUm])[0]!, 12);
  });

  it('is 1 for the absorption of a thin epidermis itself at its own depth, within its fall of fluence', () => {
    const own = { chromophorePerCm: layers[0]!.absorptionPerCm, layers, light, spot: null };
    const [top, bottom] = [0, layers[0]!.thicknessUm].map((depthUm) => heatingContrast({ ...own, depthUm }).heatingContrast);
    expect(Math.min(top!, bottom!)).toBeLessThan(1);
    expect(Math.max(top!, bottom!)).toBeGreaterThan(1);
  });

  it('[Verkruysse1997] is flattened by the cylinders that hold the chromophore: (1 - exp(-2)) / 2 for 2 mu R = 2', () => {
    const input = { chromophorePerCm: 200, layers, light, spot: null, depthUm: 300 };
    const ratio = heatingContrast({ ...input, cylinderRadiusUm: 50 }).heatingContrast / heatingContrast(input).heatingContrast;
    expect(ratio).toBeCloseTo((1 - Math.exp(-2)) / 2, 12);
  });

  it('falls with depth and has no value outside the stack or over a clear epidermis', () => {
    const at = (depthUm: number) =>
      heatingContrast({ chromophorePerCm: 200, layers, light, spot: null, depthUm }).heatingContrast;
    expect(at(1000)).toBeLessThan(at(300));
    expect(() => at(1e6)).toThrow();
    const clear = [{ ...layers[0]!, absorptionPerCm: 0 }, layers[1]!];
    const input = {
      chromophorePerCm: 1,
      layers: clear,
      light: solveLight(clear, { accuracy: 'ranking' }),
      spot: null,
      depthUm: 300,
    };
    expect(() => heatingContrast(input)).toThrow(/absorbs nothing/);
  });
});

describe('comparable range', () => {
  it('goes on to 1100 nm for oxy- and deoxyhemoglobin alone, without a step over 10 % in the first', () => {
    expect(comparableRangeNm(reference, 'oxyhemoglobin')).toEqual([250, 1100]);
    expect(comparableRangeNm(reference, 'methemoglobin')).toEqual([450, 1000]);
    expect(comparableRangeNm(reference, 'water')).toEqual([200, 12000]);
    for (let nm = 990; nm < 1100; nm++) {
      const [here, next] = [nm, nm + 1].map((at) => comparableAbsorptionPerCm(reference, 'oxyhemoglobin', at));
      expect(Math.abs(Math.log(next! / here!))).toBeLessThan(0.1);
    }
    expect(() => comparableAbsorptionPerCm(reference, 'methemoglobin', 1064)).toThrow(/from 450 to 1000/);
  });
});
