import { fc, test } from '@fast-check/vitest';
import { describe, expect, it } from 'vitest';
import { DomainError } from '../../../domain/quantities/errors.js';
import { collimatedBeam } from '../../../domain/transport/collimated.js';
import { solveLight } from '../../../domain/transport/layered-solver.js';
import { layer, skinLikeStacks } from '../../support/stacks.js';

const faces = Float64Array.from({ length: 121 }, (_, i) => 5 * (1.05 ** i - 1));
const skin = skinLikeStacks[1]!.layers;

describe('light in layers under a spot', () => {
  it.each(skinLikeStacks)('grows with the spot at every depth, up to the broad beam: $name', ({ layers }) => {
    const light = solveLight(layers, { accuracy: 'ranking' });
    const depths = [0, 30, 100, 300, 1000, 3000];
    const fluences = [0.5, 1, 2, 3, 5, 7, 12, 20, 40].map((diameterMm) =>
      light.fluenceRatios({ shape: 'circle', diameterMm }, depths),
    );
    fluences.push(light.fluenceRatios(null, depths));
    for (let s = 1; s < fluences.length; s++) {
      for (const i of depths.keys()) expect(fluences[s]![i]).toBeGreaterThanOrEqual(fluences[s - 1]![i]! * (1 - 2e-4));
    }
  });

  it('tends to the broad beam for a very wide spot', () => {
    const light = solveLight(skin, { accuracy: 'ranking' });
    const depths = [0, 100, 1000, 3000];
    const broad = light.fluenceRatios(null, depths);
    const wide = light.fluenceRatios({ shape: 'circle', diameterMm: 200 }, depths);
    for (const [i, f] of wide.entries()) expect(Math.abs(f / broad[i]! - 1)).toBeLessThan(1e-3);
  });

  it('does not notice a layer cut into two of the same optics', () => {
    const [top, middle, bottom] = skin as [(typeof skin)[0], (typeof skin)[0], (typeof skin)[0]];
    const cut = solveLight([top, { ...middle, thicknessUm: 700 }, { ...middle, thicknessUm: 1100 }, bottom], {
      accuracy: 'ranking',
    });
    const uncut = solveLight(skin, { accuracy: 'ranking' });
    for (const diameterMm of [0.3, 1, 3, 10]) {
      const [first, second] = [cut, uncut].map((light) =>
        light.fluenceRatios({ shape: 'circle', diameterMm }, [40, 300, 779, 781, 1500]),
      );
      for (const [i, f] of first!.entries()) expect(Math.abs(f / second![i]! - 1)).toBeLessThan(3e-3);
    }
  });

  it('gives the same answer whether asked for a spot at once or after others, at any depths', () => {
    const spot = { shape: 'circle', diameterMm: 3 } as const;
    const fresh = solveLight(skin, { accuracy: 'ranking' }).fluenceRatios(spot, [10, 500]);
    const light = solveLight(skin, { accuracy: 'ranking' });
    light.fluenceRatios({ shape: 'gaussian', diameterMm: 9 }, [10, 500]);
    light.absorbedPerCm(spot, faces);
    light.fluenceRatios(spot, [3]);
    expect([...light.fluenceRatios(spot, [10, 500])]).toEqual([...fresh]);
  });

  it('puts a square between its inscribed and circumscribed circles, near the circle of its area', () => {
    const light = solveLight(skin, { accuracy: 'ranking' });
    const at = (spot: Parameters<typeof light.fluenceRatios>[0]): number => light.fluenceRatios(spot, [1000])[0]!;
    const square = at({ shape: 'square', widthMm: 4 });
    expect(square).toBeGreaterThan(at({ shape: 'circle', diameterMm: 4 }));
    expect(square).toBeLessThan(at({ shape: 'circle', diameterMm: 4 * Math.SQRT2 }));
    expect(Math.abs(square / at({ shape: 'circle', diameterMm: 8 / Math.sqrt(Math.PI) }) - 1)).toBeLessThan(0.01);
    expect(at({ shape: 'rectangle', widthMm: 4, heightMm: 4 })).toBeCloseTo(square, 12);
    expect(at({ shape: 'rectangle', widthMm: 3, heightMm: 6 })).toBeCloseTo(
      at({ shape: 'rectangle', widthMm: 6, heightMm: 3 }),
      12,
    );
  });

  it('takes a measured table of a Gaussian or flat profile for that profile', () => {
    const light = solveLight(skin, { accuracy: 'ranking' });
    const radiiMm = Array.from({ length: 81 }, (_, i) => i * 0.1);
    const gaussian = { shape: 'measured', radiiMm, relativeIrradiances: radiiMm.map((r) => Math.exp((-2 * r * r) / 9)) } as const;
    const flat = { shape: 'measured', radiiMm: [0, 3], relativeIrradiances: [1, 1] } as const;
    const depths = [50, 500, 2000];
    const pairs = [
      [light.fluenceRatios(gaussian, depths), light.fluenceRatios({ shape: 'gaussian', diameterMm: 6 }, depths)],
      [light.fluenceRatios(flat, depths), light.fluenceRatios({ shape: 'circle', diameterMm: 6 }, depths)],
    ] as const;
    for (const [measured, known] of pairs) {
      for (const [i, f] of measured.entries()) expect(Math.abs(f / known[i]! - 1)).toBeLessThan(2e-3);
    }
  });

  it('absorbs on the axis what fluence times absorption says, and in the broad beam exactly what the stack absorbs', () => {
    const light = solveLight(skin, { accuracy: 'ranking' });
    const cells = light.absorbedPerCm(null, faces);
    const within = faces[faces.length - 1]!;
    const through = solveLight(skin, { accuracy: 'ranking' });
    let total = 0;
    cells.forEach((mean, i) => {
      total += mean * (faces[i + 1]! - faces[i]!) * 1e-4;
    });
    expect(total).toBeLessThanOrEqual(light.absorbedFraction);
    expect(total + through.absorbedPerCm(null, [within, 21_880])[0]! * (21_880 - within) * 1e-4).toBeCloseTo(
      light.absorbedFraction,
      10,
    );
    for (const spot of [null, { shape: 'circle', diameterMm: 3 } as const]) {
      const absorbed = light.absorbedPerCm(spot, [100, 102, 104]);
      for (const [i, f] of light.fluenceRatios(spot, [101, 103]).entries())
        expect(Math.abs(absorbed[i]! / (skin[1]!.absorptionPerCm * f) - 1)).toBeLessThan(1e-3);
    }
  });

  it('falls to 1/e of its greatest value at the penetration depth', () => {
    const light = solveLight(skin, { accuracy: 'ranking' });
    for (const spot of [null, { shape: 'circle', diameterMm: 5 } as const]) {
      const depthMm = light.penetrationDepthMm(spot)!;
      const greatest = Math.max(
        ...light.fluenceRatios(
          spot,
          Array.from({ length: 2000 }, (_, i) => i),
        ),
      );
      expect(Math.abs((light.fluenceRatios(spot, [depthMm * 1000])[0]! / greatest) * Math.E - 1)).toBeLessThan(2e-3);
    }
    expect(solveLight([layer(10, 1, 1, 0, 1.4)], { accuracy: 'ranking' }).penetrationDepthMm(null)).toBeNull();
  });

  test.prop([
    fc.array(fc.tuple(fc.double({ min: 1, max: 2, noNaN: true }), fc.double({ min: 0, max: 3, noNaN: true })), {
      minLength: 1,
      maxLength: 5,
    }),
  ])('sends the unscattered beam through a stack as well from below as from above', (pairs) => {
    const layers = pairs.map(([index]) => layer(100, 1, 0, 0, index));
    const depths = pairs.map(([, depth]) => depth);
    const forward = collimatedBeam(layers, depths);
    const backward = collimatedBeam([...layers].reverse(), [...depths].reverse());
    expect(forward.transmitted).toBeCloseTo(backward.transmitted, 12);
  });

  it('refuses layers, depths and faces that have no meaning, naming the quantity', () => {
    const bad = [
      layer(0, 1, 1, 0, 1.4),
      layer(Number.NaN, 1, 1, 0, 1.4),
      layer(Number.POSITIVE_INFINITY, 1, 1, 0, 1.4),
      layer(100, -1, 1, 0, 1.4),
      layer(100, 1, -1, 0, 1.4),
      layer(100, 1, 1, 1, 1.4),
      layer(100, 1, 1, -1, 1.4),
      layer(100, 1, 1, 0, 0.9),
      layer(100, 1, 1, 0, 2.1),
    ];
    for (const one of bad) expect(() => solveLight([one], { accuracy: 'ranking' })).toThrow(DomainError);
    expect(() => solveLight([], { accuracy: 'ranking' })).toThrow(DomainError);
    const light = solveLight([layer(100, 1, 1, 0, 1.4)], { accuracy: 'ranking' });
    expect(() => light.fluenceRatios(null, [-1])).toThrow(/depth/);
    expect(() => light.fluenceRatios(null, [101])).toThrow(/depth/);
    expect(() => light.absorbedPerCm(null, [0, 50, 50])).toThrow(/ascend/);
    expect([...light.absorbedPerCm(null, [])]).toEqual([]);
    const beams = [
      { shape: 'circle', diameterMm: 0 },
      { shape: 'gaussian', diameterMm: Number.NaN },
      { shape: 'square', widthMm: -1 },
      { shape: 'rectangle', widthMm: 1, heightMm: 0 },
      { shape: 'measured', radiiMm: [0, 1], relativeIrradiances: [0.9, 0] },
      { shape: 'measured', radiiMm: [0, 1, 1], relativeIrradiances: [1, 1, 0] },
      { shape: 'measured', radiiMm: [0, 1], relativeIrradiances: [1] },
      { shape: 'measured', radiiMm: [0, 1], relativeIrradiances: [1, -1] },
    ] as const;
    for (const beam of beams) expect(() => light.fluenceRatios(beam, [1])).toThrow(DomainError);
  });
});
