import { describe, expect, it } from 'vitest';
import { answerRun, figureCount, planRun, type RunQuestion, runChunk } from '../../domain/transport/monte-carlo.js';
import { addChunk, emptyTally } from '../../domain/transport/tally.js';

const slab = (
  absorptionPerCm: number,
  scatteringPerCm: number,
  anisotropy: number,
  refractiveIndex: number,
  thicknessUm: number,
) => ({
  name: 'slab',
  thicknessUm,
  absorptionPerCm,
  scatteringPerCm,
  anisotropy,
  refractiveIndex,
});

function run(question: RunQuestion, chunks: number, photonsPerChunk: number, seed: number) {
  const plan = planRun(question);
  let tally = emptyTally(figureCount(plan));
  for (let chunk = 0; chunk < chunks; chunk++) tally = addChunk(tally, runChunk(plan, seed, chunk, photonsPerChunk));
  return answerRun(plan, tally, photonsPerChunk);
}

describe('Monte Carlo with many photons', () => {
  it('[vandeHulst1980] slab, g 0.75: R 0.09739 and T 0.66096 to four standard errors of 20 million photons (about 6e-5)', () => {
    const answer = run({ layers: [slab(10, 90, 0.75, 1, 200)], beams: [null], depthsUm: [100] }, 100, 200_000, 77);
    expect(answer.diffuseReflectance.standardError).toBeLessThan(7e-5);
    expect(Math.abs(answer.diffuseReflectance.value - 0.09739)).toBeLessThan(4 * answer.diffuseReflectance.standardError + 5e-6);
    expect(Math.abs(answer.transmittance.value - 0.66096)).toBeLessThan(4 * answer.transmittance.standardError + 5e-6);
  });

  it('half-space, mu_a 1, mu_s 100, g 0.8, n 1.4: adding-doubling fluence to 4 errors and its last digit, 2 million photons', () => {
    const depthsUm = [0, 500, 1000, 2000, 5000];
    const answer = run({ layers: [slab(1, 100, 0.8, 1.4, 1e7)], beams: [null], depthsUm }, 100, 20_000, 78);
    for (const [i, expected] of [3.7643, 3.2848, 2.2843, 1.04424, 0.09903].entries()) {
      const { value, standardError } = answer.fluenceRatios[0]![i]!;
      expect(standardError / value).toBeLessThan(0.006);
      expect(Math.abs(value / expected - 1)).toBeLessThan((4 * standardError) / value + 1e-3);
    }
  });

  it('standard errors cover as they should: chi-square of 200 seeds about their mean stays inside its 1 in 10 000 points', () => {
    const question: RunQuestion = {
      layers: [slab(20, 400, 0.8, 1.4, 60), slab(1, 200, 0.8, 1.4, 3000)],
      beams: [{ shape: 'circle', diameterMm: 2 }, { shape: 'gaussian', diameterMm: 3 }, null],
      depthsUm: [0, 60, 300, 1000],
    };
    const answers = Array.from({ length: 200 }, (_, seed) => run(question, 40, 250, 1000 + seed).fluenceRatios.flat());
    for (let place = 0; place < answers[0]!.length; place++) {
      const values = answers.map((answer) => answer[place]!.value);
      const mean = values.reduce((sum, value) => sum + value, 0) / values.length;
      const chiSquare = answers.reduce(
        (sum, answer) => sum + ((answer[place]!.value - mean) / answer[place]!.standardError) ** 2,
        0,
      );
      // Student's t with 39 degrees widens the variance by 39/37; 199 degrees of freedom then give 210 +- 21, wings a little heavier.
      expect(chiSquare).toBeGreaterThan(135);
      expect(chiSquare).toBeLessThan(310);
    }
  });

  it('a Gaussian beam is the mixture of discs that it is, to four standard errors and the 0.3 % of the trapezoid over 60 discs', () => {
    const count = 60;
    const radiusMm = (i: number) => (3 * i) / count;
    const discs = Array.from({ length: 15 }, (_, i) => i);
    const layers = [slab(20, 400, 0.8, 1.4, 60), slab(1, 200, 0.8, 1.4, 3000)];
    // The same seed gives the same photons, so four runs of 15 discs see one set of histories.
    const values = [0, 1, 2, 3].flatMap((part) => {
      const beams = discs.map((i) => ({ shape: 'circle' as const, diameterMm: 2 * radiusMm(part * 15 + i + 1) }));
      return run({ layers, beams, depthsUm: [400] }, 40, 2000, 5).fluenceRatios.map((ratios) => ratios[0]!.value);
    });
    const gaussian = run({ layers, beams: [{ shape: 'gaussian', diameterMm: 2 }], depthsUm: [400] }, 40, 2000, 5)
      .fluenceRatios[0]![0]!;
    let mixture = 0;
    for (let i = 1; i <= count; i++) {
      const share = Math.exp(-2 * radiusMm(i - 1) ** 2) - Math.exp(-2 * radiusMm(i) ** 2);
      mixture += ((values[i - 1]! + (values[i - 2] ?? 0)) / 2) * share;
    }
    expect(Math.abs(gaussian.value / mixture - 1)).toBeLessThan(0.003);
  });
});
