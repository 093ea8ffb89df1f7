import { describe, expect, it } from 'vitest';
import { isClear, outsideReflectance } from '../../../domain/transport/clear-layers.js';
import { fresnelReflectance } from '../../../domain/transport/fresnel.js';
import { solveLight } from '../../../domain/transport/layered-solver.js';
import { answerRun, figureCount, planRun, runChunk } from '../../../domain/transport/monte-carlo.js';
import { addChunk, emptyTally } from '../../../domain/transport/tally.js';
import { layer, skinLikeStacks } from '../../support/stacks.js';

const skin = skinLikeStacks[1]!.layers;

describe('clear layers on scattering ones', () => {
  it('are told from layers that scatter or absorb most of the light', () => {
    expect(isClear(layer(3000, 0, 0, 0, 1.5))).toBe(true);
    expect(isClear(layer(3000, 0.1, 0.01, 0, 1.5))).toBe(true);
    expect(isClear(layer(10, 1, 200, 0.8, 1.4))).toBe(false);
    expect(isClear(layer(100, 12_000, 0, 0, 1.33))).toBe(false);
  });

  it('reflect like air when there are none, and like a plate at zero lateral frequency', () => {
    for (const invariant of [0, 0.5, 0.9, 1.2]) {
      const cosine = Math.sqrt(1 - (invariant / 1.4) ** 2);
      const air = fresnelReflectance(1.4, 1, cosine);
      expect(outsideReflectance(1.4, [], invariant, 50)).toBeCloseTo(air, 12);
      // a clear plate of the tissue's own index hands light on to its air side
      expect(outsideReflectance(1.4, [layer(1000, 0, 0, 0, 1.4)], invariant, 0)).toBeCloseTo(air, 9);
    }
    expect(outsideReflectance(1.4, [layer(1000, 0, 0, 0, 1.4)], 1.2, 300)).toBeLessThan(0.1);
  });

  it('change nothing when they are air', () => {
    const bare = solveLight(skin, { accuracy: 'ranking' });
    const under = solveLight([layer(5000, 0, 0, 0, 1), ...skin], { accuracy: 'ranking' });
    for (const diameterMm of [1, 3, 12]) {
      const spot = { shape: 'circle', diameterMm } as const;
      const direct = bare.fluenceRatios(spot, [1, 100, 1000]);
      for (const [i, f] of under.fluenceRatios(spot, [5001, 5100, 6000]).entries())
        expect(Math.abs(f / direct[i]! - 1)).toBeLessThan(5e-3);
    }
  });

  it('as a sapphire window, agree with Monte Carlo within 6 % below the window', () => {
    const layers = [layer(1000, 0.01, 1e-4, 0, 1.76), layer(80, 5, 250, 0.8, 1.43), layer(20_000, 0.5, 150, 0.85, 1.4)];
    const beams = [3, 7].map((diameterMm) => ({ shape: 'circle', diameterMm }) as const);
    const depthsUm = [1200, 1600];
    const plan = planRun({ layers, beams, depthsUm });
    let tally = emptyTally(figureCount(plan));
    for (let chunk = 0; chunk < 20; chunk++) tally = addChunk(tally, runChunk(plan, 11, chunk, 1000));
    const answer = answerRun(plan, tally, 1000);
    const light = solveLight(layers, { accuracy: 'ranking' });
    for (const [b, beam] of beams.entries()) {
      for (const [i, fluence] of light.fluenceRatios(beam, depthsUm).entries()) {
        const { value, standardError } = answer.fluenceRatios[b]![i]!;
        expect(Math.abs(fluence / value - 1)).toBeLessThan(0.06 + (4 * standardError) / value);
        expect(standardError / value).toBeLessThan(0.03);
      }
    }
  });

  it('alone let the beam through without any spread', () => {
    const light = solveLight([layer(3000, 0.1, 0, 0, 1.5)], { accuracy: 'ranking' });
    expect([...light.fluenceRatios({ shape: 'circle', diameterMm: 1 }, [10, 2000])]).toEqual([
      ...light.fluenceRatios(null, [10, 2000]),
    ]);
  });
});
