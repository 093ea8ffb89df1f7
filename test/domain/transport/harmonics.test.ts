import { describe, expect, it } from 'vitest';
import { gaussLegendre } from '../../../domain/numeric/quadrature.js';
import { faceCondition } from '../../../domain/transport/harmonic-faces.js';
import { modeSolver, scaleLayer } from '../../../domain/transport/harmonic-modes.js';
import {
  axialCoupling,
  harmonicPosition,
  harmonicsAt,
  harmonicsUpTo,
  lateralCoupling,
} from '../../../domain/transport/harmonics.js';
import { layer } from '../../support/stacks.js';

describe('spherical harmonics of a radiance with one lateral frequency', () => {
  it('are orthonormal over the cosine within each order', () => {
    const harmonics = harmonicsUpTo(5);
    const { nodes, weights } = gaussLegendre(16);
    const values = new Float64Array(harmonics.count);
    const overlap = (i: number, j: number): number => {
      let sum = 0;
      for (let q = 0; q < 16; q++) {
        harmonicsAt(harmonics, Math.abs(nodes[q]!), values);
        const turned = nodes[q]! < 0 ? harmonics.reflectionSigns[i]! * harmonics.reflectionSigns[j]! : 1;
        sum += weights[q]! * turned * values[i]! * values[j]!;
      }
      return sum;
    };
    for (let i = 0; i < harmonics.count; i++) {
      for (let j = 0; j <= i; j++) {
        if (harmonics.orders[i] === harmonics.orders[j]) expect(overlap(i, j)).toBeCloseTo(i === j ? 1 : 0, 12);
      }
    }
  });

  it('couple by the lateral direction as its integral over all directions says', () => {
    // sin(theta) cos(phi) between (l, m) and (l + 1, m + side), by midpoint rule over azimuth and Gauss over the polar angle
    const harmonics = harmonicsUpTo(7);
    const { nodes, weights } = gaussLegendre(60);
    const values = new Float64Array(harmonics.count);
    for (const [l, m, side] of [
      [0, 0, 1],
      [1, 1, -1],
      [2, 1, 1],
      [3, 2, -1],
      [4, 0, 1],
      [5, 3, 1],
    ] as const) {
      let sum = 0;
      for (let q = 0; q < 60; q++) {
        const theta = (Math.PI * (nodes[q]! + 1)) / 2;
        const mu = Math.cos(theta);
        harmonicsAt(harmonics, Math.abs(mu), values);
        const from = harmonicPosition(l, m);
        const to = harmonicPosition(l + 1, m + side);
        const turned = mu < 0 ? harmonics.reflectionSigns[from]! * harmonics.reflectionSigns[to]! : 1;
        sum += ((weights[q]! * Math.PI) / 2) * Math.sin(theta) ** 2 * turned * values[from]! * values[to]!;
      }
      let azimuth = 0;
      const wave = (order: number, phi: number): number => (order === 0 ? 1 : Math.SQRT2 * Math.cos(order * phi));
      for (let i = 0; i < 64; i++) {
        const phi = (2 * Math.PI * (i + 0.5)) / 64;
        azimuth += (wave(m, phi) * Math.cos(phi) * wave(m + side, phi)) / 64;
      }
      expect(sum * azimuth).toBeCloseTo(side * lateralCoupling(l, m, side), 10);
    }
  });

  it.each([1, 3, 5, 7])(
    'of degree %d: every rotated mode, and the answer to the beam, satisfies the transfer equation',
    (degree) => {
      const harmonics = harmonicsUpTo(degree);
      const { count, degrees, orders, modeCount } = harmonics;
      const scaled = scaleLayer(layer(1000, 8, 150, 0.85, 1.4), degree);
      const solve = modeSolver(harmonics, scaled);
      for (const k of [0.1, 5, 30]) {
        const modes = solve(k);
        const left = (f: Float64Array, decay: number, i: number): number => {
          const l = degrees[i]!;
          const m = orders[i]!;
          let sum = (scaled.absorption + scaled.scattering * (1 - scaled.moments[l]!)) * f[i]!;
          for (const other of [l - 1, l + 1]) {
            if (other < 0 || other > degree) continue;
            if (other >= m) sum -= decay * axialCoupling(Math.max(l, other), m) * f[harmonicPosition(other, m)]!;
            for (const side of [1, -1] as const) {
              if (m + side < 0 || m + side > other) continue;
              const strength =
                other > l ? side * lateralCoupling(l, m, side) : -side * lateralCoupling(other, m + side, -side as 1 | -1);
              sum -= side * k * strength * f[harmonicPosition(other, m + side)]!;
            }
          }
          return sum;
        };
        for (let mode = 0; mode < modeCount; mode++) {
          const f = modes.vectors.subarray(mode * count, (mode + 1) * count);
          for (let i = 0; i < count; i++) expect(Math.abs(left(f, modes.kappas[mode]!, i))).toBeLessThan(1e-9);
        }
        for (let i = 0; i < count; i++) {
          const l = degrees[i]!;
          const source =
            orders[i] === 0 ? (scaled.scattering / scaled.index2) * scaled.moments[l]! * Math.sqrt((2 * l + 1) / 2) : 0;
          expect(Math.abs(left(modes.beamAnswer, scaled.extinction, i) - source)).toBeLessThan(1e-9);
        }
      }
    },
  );

  it('let light pass a face between equal indices unchanged', () => {
    const harmonics = harmonicsUpTo(3);
    const { own, beyond } = faceCondition(harmonics, 1.4, 1.4, true);
    const isotropic = new Float64Array(harmonics.count);
    isotropic[0] = 1;
    for (let row = 0; row < harmonics.modeCount; row++) {
      let sum = 0;
      for (let i = 0; i < harmonics.count; i++)
        sum += (own[row * harmonics.count + i]! + beyond[row * harmonics.count + i]!) * isotropic[i]!;
      expect(sum).toBeCloseTo(0, 12);
    }
  });

  it('leave isotropic light over n^2 in balance across a refracting face', () => {
    const harmonics = harmonicsUpTo(3);
    for (const [here, there] of [
      [1.4, 1.44],
      [1.44, 1.4],
      [1.5, 1.33],
    ] as const) {
      const { own, beyond } = faceCondition(harmonics, here, there, true);
      for (let row = 0; row < harmonics.modeCount; row++) {
        expect(own[row * harmonics.count]! + beyond[row * harmonics.count]!).toBeCloseTo(0, 12);
      }
    }
  });
});
