import { fc, test } from '@fast-check/vitest';
import { describe, expect, it } from 'vitest';
import {
  answerRun,
  figureCount,
  planRun,
  type RunQuestion,
  runChunk,
  worstRelativeError,
} from '../../../domain/transport/monte-carlo.js';
import { addChunk, emptyTally, standardErrors } from '../../../domain/transport/tally.js';

const layer = (
  thicknessUm: number,
  absorptionPerCm: number,
  scatteringPerCm: number,
  anisotropy: number,
  refractiveIndex: number,
) => ({
  name: 'layer',
  thicknessUm,
  absorptionPerCm,
  scatteringPerCm,
  anisotropy,
  refractiveIndex,
});
const skin = [layer(60, 20, 400, 0.8, 1.4), layer(1500, 1, 200, 0.8, 1.4), layer(3000, 0.5, 150, 0.8, 1.44)];

function run(question: RunQuestion, chunks: number, photonsPerChunk: number, seed = 1) {
  const plan = planRun(question);
  let tally = emptyTally(figureCount(plan));
  for (let chunk = 0; chunk < chunks; chunk++) tally = addChunk(tally, runChunk(plan, seed, chunk, photonsPerChunk));
  return { plan, tally, answer: answerRun(plan, tally, photonsPerChunk) };
}

describe('Monte Carlo in layers', () => {
  it('follows Beer and Lambert exactly where nothing scatters, under every beam shape', () => {
    const depthsUm = [0, 100, 500, 900];
    const beams = [
      null,
      { shape: 'circle', diameterMm: 1 },
      { shape: 'gaussian', diameterMm: 2 },
      { shape: 'square', widthMm: 1 },
      { shape: 'rectangle', widthMm: 1, heightMm: 3 },
      { shape: 'measured', radiiMm: [0, 1, 2], relativeIrradiances: [1, 0.5, 0] },
    ] as const;
    const { plan, answer } = run({ layers: [layer(1000, 5, 0, 0, 1)], beams, depthsUm }, 16, 2000);
    answer.fluenceRatios.forEach((ratios, beam) => {
      depthsUm.forEach((depthUm, i) => {
        const center = Math.max(depthUm, plan.resolutionsUm[i]!);
        expect(Math.abs(ratios[i]!.value / plan.weights[beam]![0]! - Math.exp(-5e-4 * center))).toBeLessThan(
          5 * ratios[i]!.standardError + 1e-4,
        );
      });
      expect(plan.weights[beam]![0]).toBeGreaterThan(0.999);
    });
    expect(Math.abs(answer.transmittance.value - Math.exp(-0.5))).toBeLessThan(5 * answer.transmittance.standardError);
    expect(answer.diffuseReflectance.value).toBe(0);
  });

  it('adds up reflections between three clear sheets of different index as geometric optics does', () => {
    const layers = [layer(500, 0, 0, 0, 1.5), layer(200, 0, 0, 0, 1.33), layer(700, 0, 0, 0, 1.7)];
    // Incoherent sum over all internal reflections, by adding sheet after sheet.
    const indices = [1, 1.5, 1.33, 1.7, 1];
    let down = 1;
    let up = 0;
    for (let face = indices.length - 2; face >= 0; face--) {
      const r = ((indices[face]! - indices[face + 1]!) / (indices[face]! + indices[face + 1]!)) ** 2;
      down = ((1 - r) * down) / (1 - r * up);
      up = r + ((1 - r) ** 2 * up) / (1 - r * up);
    }
    const { answer } = run({ layers, beams: [null], depthsUm: [10] }, 32, 4000);
    const reflected = answer.specularReflectance + answer.diffuseReflectance.value;
    expect(Math.abs(reflected - up)).toBeLessThan(5 * answer.diffuseReflectance.standardError);
    expect(Math.abs(answer.transmittance.value - down)).toBeLessThan(5 * answer.transmittance.standardError);
  });

  it('gives equal bytes for an equal seed and chunk, other numbers for another, and does not depend on which chunk ran first', () => {
    const plan = planRun({ layers: skin, beams: [{ shape: 'circle', diameterMm: 5 }], depthsUm: [50, 500] });
    const second = runChunk(plan, 9, 1, 200);
    runChunk(plan, 9, 0, 200);
    expect(runChunk(plan, 9, 1, 200)).toEqual(second);
    expect(runChunk(plan, 9, 2, 200)).not.toEqual(second);
    expect(runChunk(plan, 10, 1, 200)).not.toEqual(second);
  });

  test.prop(
    [
      fc.array(
        fc.record({
          thicknessUm: fc.double({ min: 5, max: 3000, noNaN: true }),
          absorptionPerCm: fc.double({ min: 1, max: 200, noNaN: true }),
          scatteringPerCm: fc.double({ min: 0, max: 400, noNaN: true }),
          anisotropy: fc.double({ min: -0.5, max: 0.95, noNaN: true }),
          refractiveIndex: fc.double({ min: 1, max: 1.6, noNaN: true }),
        }),
        { minLength: 1, maxLength: 4 },
      ),
    ],
    { numRuns: 40, seed: 6 },
  )('keeps energy to rounding and never gives a negative or unreal figure', (drawn) => {
    const layers = drawn.map((entry) => ({ name: 'drawn', ...entry }));
    const thickness = layers.reduce((sum, entry) => sum + entry.thicknessUm, 0);
    const { answer, tally } = run(
      { layers, beams: [null, { shape: 'circle', diameterMm: 2 }], depthsUm: [0, thickness / 2, thickness] },
      2,
      100,
    );
    expect(Math.abs(answer.balanceError)).toBeLessThan(1e-11);
    expect([...tally.means].every(Number.isFinite)).toBe(true);
    for (const { value } of answer.fluenceRatios.flat()) expect(value).toBeGreaterThanOrEqual(0);
  });

  it('is unchanged when every length is doubled and every coefficient halved (similarity), history by history', () => {
    const stretched = skin.map((entry) => ({
      ...entry,
      thicknessUm: entry.thicknessUm * 2,
      absorptionPerCm: entry.absorptionPerCm / 2,
      scatteringPerCm: entry.scatteringPerCm / 2,
    }));
    const small = run({ layers: skin, beams: [null], depthsUm: [30] }, 4, 500).answer;
    const large = run({ layers: stretched, beams: [null], depthsUm: [60] }, 4, 500).answer;
    expect(large.diffuseReflectance.value).toBeCloseTo(small.diffuseReflectance.value, 10);
    expect(large.absorbedFraction.value).toBeCloseTo(small.absorbedFraction.value, 10);
  });

  it('obeys reciprocity: transmission of a two-layer slab at normal incidence is near that of the slab upside down at equal albedo', () => {
    // With isotropic scattering and one albedo throughout, the layers differ in density alone, so both ways are the same slab.
    const layers = [layer(100, 10, 90, 0, 1), layer(300, 5, 45, 0, 1)];
    const forward = run({ layers, beams: [null], depthsUm: [10] }, 40, 1000, 3).answer.transmittance;
    const backward = run({ layers: layers.toReversed(), beams: [null], depthsUm: [10] }, 40, 1000, 4).answer.transmittance;
    expect(Math.abs(forward.value - backward.value)).toBeLessThan(5 * Math.hypot(forward.standardError, backward.standardError));
  });

  it('one run serves all beams: wider discs never give less, a Gaussian is the mixture of discs that it is, a square lies between discs', () => {
    const diameters = Array.from({ length: 12 }, (_, i) => 0.5 + i);
    const circles = diameters.map((diameterMm) => ({ shape: 'circle', diameterMm }) as const);
    const { answer } = run(
      {
        layers: skin,
        beams: [...circles, { shape: 'square', widthMm: 1.5 }, { shape: 'gaussian', diameterMm: 2 }, null],
        depthsUm: [400],
      },
      8,
      1000,
    );
    const values = answer.fluenceRatios.map((ratios) => ratios[0]!.value);
    for (let i = 1; i < 12; i++) expect(values[i]!).toBeGreaterThanOrEqual(values[i - 1]!);
    const [square, gaussian, broad] = values.slice(12) as [number, number, number];
    expect(square).toBeGreaterThan(values[1]!);
    expect(square).toBeLessThan(values[2]!);
    expect(broad).toBeGreaterThanOrEqual(values[11]!);
    // exp(-2 r^2/w^2) = integral of disc(a) (4 a/w^2) exp(-2 a^2/w^2) da; trapezoid over the discs, coarse.
    const byDiscs = [0, ...values.slice(0, 12)].reduce((sum, value, i, all) => {
      const radius = (k: number) => (k === 0 ? 0 : diameters[k - 1]! / 2);
      if (i === 0) return 0;
      return sum + ((value + all[i - 1]!) / 2) * (Math.exp(-2 * radius(i - 1) ** 2) - Math.exp(-2 * radius(i) ** 2));
    }, 0);
    expect(Math.abs(gaussian / byDiscs - 1)).toBeLessThan(0.1);
  });

  it('batch errors tell the truth: over 40 seeds, four in ten to nine in ten of the errors stay within one standard error', () => {
    const question: RunQuestion = { layers: [layer(200, 10, 90, 0.75, 1)], beams: [null], depthsUm: [100] };
    const answers = Array.from({ length: 40 }, (_, seed) => run(question, 20, 200, seed).answer.diffuseReflectance);
    const mean = answers.reduce((sum, { value }) => sum + value, 0) / answers.length;
    const within = answers.filter(({ value, standardError }) => Math.abs(value - mean) < standardError).length;
    expect(within).toBeGreaterThan(16);
    expect(within).toBeLessThan(36);
  });

  it('refuses depths outside the stack and faulty layers, and needs two chunks for an error', () => {
    expect(() => planRun({ layers: skin, beams: [null], depthsUm: [5000] })).toThrow(/depth in um is 5000/);
    expect(() => planRun({ layers: [layer(10, -1, 0, 0, 1)], beams: [null], depthsUm: [1] })).toThrow(/absorption/);
    const plan = planRun({ layers: skin, beams: [null], depthsUm: [50] });
    const one = addChunk(emptyTally(figureCount(plan)), runChunk(plan, 1, 0, 100));
    expect(() => standardErrors(one)).toThrow(/chunks is 1/);
    expect(worstRelativeError(plan, addChunk(one, runChunk(plan, 1, 1, 100)))).toBeGreaterThan(0);
  });
});
