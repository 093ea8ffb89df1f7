import { fc, test } from '@fast-check/vitest';
import { describe, expect, it } from 'vitest';
import { gaussLegendre } from '../../../domain/numeric/quadrature.js';
import type { OpticalLayer } from '../../../domain/tissue/optical-layer.js';
import { solveBroadBeam } from '../../../domain/transport/broad-beam.js';
import { solveLight } from '../../../domain/transport/layered-solver.js';
import { addingDoubling } from '../../support/adding-doubling.js';
import { layer, skinLikeStacks } from '../../support/stacks.js';

const anyLayer = fc
  .record({
    thicknessUm: fc.double({ min: 5, max: 3000, noNaN: true }),
    absorptionPerCm: fc.oneof(fc.constant(0), fc.double({ min: 1e-3, max: 300, noNaN: true })),
    scatteringPerCm: fc.oneof(fc.constant(0), fc.double({ min: 1, max: 600, noNaN: true })),
    anisotropy: fc.double({ min: -0.3, max: 0.95, noNaN: true }),
    refractiveIndex: fc.constantFrom(1, 1.33, 1.38, 1.4, 1.43, 1.5),
  })
  .map((fields): OpticalLayer => ({ name: 'layer', ...fields }));
const anyStack = fc.array(anyLayer, { minLength: 1, maxLength: 4 });

/** Absorbed fraction of one layer from fluence alone, independent of the solver's own flux. */
function absorbedByQuadrature(
  layers: readonly OpticalLayer[],
  index: number,
  fluence: (layer: number, belowTopUm: number) => number,
): number {
  const { nodes, weights } = gaussLegendre(16);
  const { thicknessUm, absorptionPerCm, scatteringPerCm } = layers[index]!;
  const finest = Math.min(thicknessUm, 1e4 / (absorptionPerCm + scatteringPerCm + 1));
  let sum = 0;
  let from = 0;
  for (let cell = finest / 50; from < thicknessUm; cell *= 1.5) {
    const width = Math.min(cell, thicknessUm - from);
    for (let q = 0; q < 16; q++) sum += ((weights[q]! * width) / 2) * 1e-4 * fluence(index, from + (width * (nodes[q]! + 1)) / 2);
    from += width;
  }
  return absorptionPerCm * sum;
}

describe('broad beam by discrete ordinates', () => {
  test.prop([anyStack], { numRuns: 60 })('absorbs in each layer what the net flux through it loses', (layers) => {
    const broad = solveBroadBeam(layers, 4);
    layers.forEach((one, j) => {
      const lost = broad.flux(j, 0) - broad.flux(j, one.thicknessUm);
      expect(Math.abs(lost - absorbedByQuadrature(layers, j, broad.fluence))).toBeLessThan(2e-6);
    });
  });

  test.prop([anyStack], { numRuns: 60 })(
    'neither makes nor loses energy, and keeps every fraction and fluence physical',
    (layers) => {
      const light = solveLight(layers, { accuracy: 'ranking' });
      const { specularReflectance, diffuseReflectance, transmittance, absorbedFraction } = light;
      expect(Math.abs(specularReflectance + diffuseReflectance + transmittance + absorbedFraction - 1)).toBeLessThan(1e-12);
      for (const part of [diffuseReflectance, transmittance, absorbedFraction]) {
        expect(part).toBeGreaterThan(-1e-8);
        expect(part).toBeLessThanOrEqual(1);
      }
      const total = layers.reduce((sum, one) => sum + one.thicknessUm, 0);
      const depths = [0, 0.1, 0.3, 0.5, 0.9, 1].map((part) => part * total);
      for (const fluence of light.fluenceRatios(null, depths)) {
        expect(fluence).toBeGreaterThanOrEqual(0);
        expect(fluence).toBeLessThan(30);
      }
    },
  );

  test.prop([anyStack, fc.integer({ min: 0, max: 3 }), fc.double({ min: 0.05, max: 0.95, noNaN: true })], { numRuns: 40 })(
    'does not notice a layer cut into two of the same optics',
    (layers, which, part) => {
      const index = which % layers.length;
      const whole = layers[index]!;
      const upper = { ...whole, thicknessUm: whole.thicknessUm * part };
      const lower = { ...whole, thicknessUm: whole.thicknessUm - upper.thicknessUm };
      const cut = solveBroadBeam([...layers.slice(0, index), upper, lower, ...layers.slice(index + 1)], 4);
      const uncut = solveBroadBeam(layers, 4);
      expect(Math.abs(cut.diffuseReflectance - uncut.diffuseReflectance)).toBeLessThan(1e-7);
      expect(Math.abs(cut.transmittance - uncut.transmittance)).toBeLessThan(1e-7);
      expect(Math.abs(cut.fluence(index + 1, 0) - uncut.fluence(index, upper.thicknessUm))).toBeLessThan(1e-5);
    },
  );

  test.prop([anyStack, fc.double({ min: 0.1, max: 10, noNaN: true })], { numRuns: 40 })(
    'depends on optical depth alone: coefficients times c, thicknesses over c',
    (layers, c) => {
      const scaled = layers.map((one) => ({
        ...one,
        thicknessUm: one.thicknessUm / c,
        absorptionPerCm: one.absorptionPerCm * c,
        scatteringPerCm: one.scatteringPerCm * c,
      }));
      const first = solveBroadBeam(layers, 4);
      const second = solveBroadBeam(scaled, 4);
      expect(Math.abs(first.diffuseReflectance - second.diffuseReflectance)).toBeLessThan(1e-8);
      expect(Math.abs(first.transmittance - second.transmittance)).toBeLessThan(1e-8);
    },
  );

  it('follows Beer and Lambert with albedo 0', () => {
    const light = solveLight([layer(1000, 20, 0, 0, 1)], { accuracy: 'fine' });
    expect(light.transmittance).toBeCloseTo(Math.exp(-2), 12);
    expect(light.specularReflectance).toBe(0);
    expect(Math.abs(light.diffuseReflectance)).toBeLessThan(1e-12);
  });

  it('returns everything with albedo 1, at any thickness', () => {
    for (const thicknessUm of [1, 100, 1e4, 1e7]) {
      const { specularReflectance, diffuseReflectance, transmittance } = solveLight([layer(thicknessUm, 0, 100, 0.8, 1.4)], {
        accuracy: 'fine',
      });
      expect(Math.abs(specularReflectance + diffuseReflectance + transmittance - 1)).toBeLessThan(1e-9);
      expect(transmittance).toBeGreaterThan(0);
    }
  });

  it('finds 1 plus the part returned by the far face in a thin clear layer', () => {
    const [fluence] = solveLight([layer(10, 0, 0, 0, 1.4)], { accuracy: 'fine' }).fluenceRatios(null, [5]);
    const r = (0.4 / 2.4) ** 2;
    expect(fluence).toBeCloseTo(((1 - r) * (1 + r)) / (1 - r * r), 9);
  });

  it.each(skinLikeStacks)('in the ranking setting agrees within 1 % with adding-doubling: $name', ({ layers }) => {
    const depths = [0, 60, 150, 400, 1000, 2000];
    const check = addingDoubling(layers, depths, 14);
    const light = solveLight(layers, { accuracy: 'ranking' });
    light.fluenceRatios(null, depths).forEach((fluence, i) => {
      if (check.fluences[i]! > 0.01) expect(Math.abs(fluence / check.fluences[i]! - 1)).toBeLessThan(0.01);
    });
    expect(Math.abs(light.specularReflectance + light.diffuseReflectance - check.totalReflectance)).toBeLessThan(0.002);
  });

  it.each(skinLikeStacks)('in the fine setting agrees within 0.1 % with adding-doubling: $name', ({ layers }) => {
    const depths = [0, 60, 150, 400, 1000];
    const check = addingDoubling(layers, depths, 20);
    const light = solveLight(layers, { accuracy: 'fine' });
    light.fluenceRatios(null, depths).forEach((fluence, i) => {
      if (check.fluences[i]! > 0.01) expect(Math.abs(fluence / check.fluences[i]! - 1)).toBeLessThan(0.001);
    });
    expect(Math.abs(light.specularReflectance + light.diffuseReflectance - check.totalReflectance)).toBeLessThan(2e-4);
  });

  it('bears what lies far outside skin: water at 2.94 um, ultraviolet, a sheet of glass on tissue, backward scattering', () => {
    const stacks = [
      [layer(1e5, 12_000, 0, 0.8, 1.33)],
      [layer(20, 8000, 2000, 0.75, 1.5), layer(1e4, 4000, 1000, 0.75, 1.4)],
      [layer(3000, 0, 0, 0, 1.76), layer(100, 20, 300, 0.8, 1.43), layer(1e4, 0.5, 150, 0.85, 1.4)],
      [layer(1e4, 1, 100, -0.9, 1.4)],
      [layer(1e4, 1, 100, 0.99, 1.4)],
      [layer(0.01, 1e6, 1e6, 0.9, 1.4), layer(1e8, 1e-4, 1e-4, 0.1, 1.4)],
    ];
    for (const layers of stacks) {
      for (const accuracy of ['ranking', 'fine'] as const) {
        const light = solveLight(layers, { accuracy });
        for (const spot of [null, { shape: 'circle', diameterMm: 1 } as const]) {
          for (const value of light.fluenceRatios(
            spot,
            [0, 0.005, 1, 10, 1000, 9000].filter((d) => d < layers[0]!.thicknessUm),
          )) {
            expect(value).toBeGreaterThanOrEqual(0);
            expect(value).toBeLessThan(30);
          }
        }
      }
    }
  });
});
