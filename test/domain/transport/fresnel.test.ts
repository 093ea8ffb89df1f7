import { fc, test } from '@fast-check/vitest';
import { describe, expect, it } from 'vitest';
import { fresnelMoments, fresnelReflectance } from '../../../domain/transport/fresnel.js';
import { makeOrdinates } from '../../../domain/transport/ordinates.js';

const index = fc.double({ min: 1, max: 2, noNaN: true });

describe('Fresnel reflection', () => {
  it('is ((n - 1)/(n + 1))^2 at normal incidence and total beyond the critical angle', () => {
    expect(fresnelReflectance(1, 1.4, 1)).toBeCloseTo((0.4 / 2.4) ** 2, 14);
    expect(fresnelReflectance(1.4, 1, Math.sqrt(1 - 1 / 1.96) - 1e-9)).toBe(1);
    expect(fresnelReflectance(1.4, 1, 0)).toBe(1);
    expect(fresnelReflectance(1.4, 1.4, 0.3)).toBe(0);
  });

  it('at the polarizing angle is half the perpendicular part', () => {
    const n = 1.5;
    const cosine = Math.cos(Math.atan(n));
    expect(fresnelReflectance(1, n, cosine)).toBeCloseTo(((n * n - 1) / (n * n + 1)) ** 2 / 2, 14);
  });

  test.prop([index, index, fc.double({ min: 0, max: 1, noNaN: true })])(
    'is the same from both sides of a ray',
    (from, to, cosine) => {
      const sine2 = (from / to) ** 2 * (1 - cosine * cosine);
      fc.pre(sine2 < 1 && cosine > 1e-3);
      expect(fresnelReflectance(to, from, Math.sqrt(1 - sine2))).toBeCloseTo(fresnelReflectance(from, to, cosine), 9);
    },
  );

  it('has no moments without an interface', () => {
    expect(fresnelMoments(1.3, 1.3)).toEqual({ first: 0, second: 0, boundaryFactor: 1 });
  });
});

describe('ordinates', () => {
  test.prop([fc.array(index, { minLength: 1, maxLength: 4 }), fc.integer({ min: 3, max: 12 })])(
    'share n sin(theta) and n^2 mu dmu between layers, and fill each hemisphere',
    (indices, perRegion) => {
      const { layers, invariants } = makeOrdinates(indices, perRegion);
      for (const [j, { count, cosines, weights }] of layers.entries()) {
        const n = indices[j]!;
        let solidAngle = 0;
        let flux = 0;
        for (let i = 0; i < count; i++) {
          expect(n * Math.sqrt(1 - cosines[i]! ** 2)).toBeCloseTo(invariants[i]!, 12);
          solidAngle += weights[i]!;
          flux += weights[i]! * cosines[i]!;
          for (const [m, other] of layers.entries()) {
            if (i >= other.count) continue;
            const share = indices[m]! ** 2 * other.cosines[i]! * other.weights[i]!;
            expect(share).toBeCloseTo(n * n * cosines[i]! * weights[i]!, 12);
          }
        }
        expect(Math.abs(flux - 0.5)).toBeLessThan(1e-10);
        expect(Math.abs(solidAngle - 1)).toBeLessThan(0.05);
      }
    },
  );
});
