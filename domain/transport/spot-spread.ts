import { bandedPosition, makeBanded, solveBanded } from '../numeric/banded.js';
import { hankelWeights } from '../numeric/hankel.js';
import type { OpticalLayer } from '../tissue/optical-layer.js';
import { type BeamProfile, beamTransform } from './beam-profile.js';
import { fresnelMoments } from './fresnel.js';

const frequencies = Float64Array.from({ length: 20 }, (_, i) => 0.05 * 1e4 ** (i / 19)); // per cm

/** On-axis ratio of finite-spot to broad-beam fluence by the delta-P1 approximation. */
export interface SpotSpread {
  ratios(profile: BeamProfile, layers: Int32Array, belowTopsUm: Float64Array): Float64Array;
}

export function solveSpotSpread(layers: readonly OpticalLayer[]): SpotSpread {
  const n = layers.length;
  const scaled = layers.map((l) => {
    const g = l.anisotropy / (1 + l.anisotropy);
    const scattering = l.scatteringPerCm * (1 - l.anisotropy ** 2);
    const extinction = Math.max(1e-6, l.absorptionPerCm + scattering);
    const transport = Math.max(1e-6, l.absorptionPerCm + scattering * (1 - g));
    return { g, scattering, extinction, transport, absorption: l.absorptionPerCm, d: l.thicknessUm * 1e-4 };
  });
  const arriving: number[] = [1];
  for (let j = 0; j < n; j++) arriving.push(arriving[j]! * Math.exp(-scaled[j]!.extinction * scaled[j]!.d));
  const topFactor = 2 * fresnelMoments(layers[0]!.refractiveIndex, 1).boundaryFactor;
  const bottomFactor = 2 * fresnelMoments(layers[n - 1]!.refractiveIndex, 1).boundaryFactor;

  const solveAt = (k: number) => {
    const parts = scaled.map((s, j) => {
      const diffusion = 1 / (3 * s.transport);
      const kappa2 = s.absorption / diffusion + k * k;
      const source = 3 * s.scattering * (s.transport + s.g * s.extinction) * arriving[j]!;
      let denominator = s.extinction ** 2 - kappa2;
      if (Math.abs(denominator) < 1e-6 * kappa2) denominator = 1e-6 * kappa2;
      return { kappa: Math.sqrt(kappa2), diffusion, particular: -source / denominator };
    });
    // phi = a e^{-kz} + b e^{-k(d-z)} + particular e^{-mu z}
    const matrix = makeBanded(2 * n, Math.min(2 * n - 1, 3), Math.min(2 * n - 1, 3));
    const right = new Float64Array(2 * n);
    const add = (row: number, j: number, z: number, phi: number, flux: number): void => {
      const { kappa, diffusion, particular } = parts[j]!;
      const s = scaled[j]!;
      const e1 = Math.exp(-kappa * z);
      const e2 = Math.exp(-kappa * (s.d - z));
      const e0 = Math.exp(-s.extinction * z);
      matrix.values[bandedPosition(matrix, row, 2 * j)]! += e1 * (phi + flux * diffusion * kappa);
      matrix.values[bandedPosition(matrix, row, 2 * j + 1)]! += e2 * (phi - flux * diffusion * kappa);
      const ownFlux = diffusion * (particular * s.extinction + 3 * s.g * s.scattering * arriving[j]!);
      right[row]! -= e0 * (phi * particular + flux * ownFlux);
    };
    add(0, 0, 0, 1, topFactor);
    for (let j = 0; j + 1 < n; j++) {
      add(2 * j + 1, j, scaled[j]!.d, 1, 0);
      add(2 * j + 1, j + 1, 0, -1, 0);
      add(2 * j + 2, j, scaled[j]!.d, 0, 1);
      add(2 * j + 2, j + 1, 0, 0, -1);
    }
    add(2 * n - 1, n - 1, scaled[n - 1]!.d, 1, -bottomFactor);
    const amplitudes = solveBanded(matrix, right);
    return (j: number, z: number): number => {
      const { kappa, particular } = parts[j]!;
      const s = scaled[j]!;
      return (
        amplitudes[2 * j]! * Math.exp(-kappa * z) +
        amplitudes[2 * j + 1]! * Math.exp(-kappa * (s.d - z)) +
        particular * Math.exp(-s.extinction * z)
      );
    };
  };
  const broad = solveAt(1e-4);
  const solutions = Array.from(frequencies, solveAt);
  return {
    ratios: (profile, where, belowTopsUm) => {
      const { powerBelow, reachCm } = beamTransform(profile);
      const weights = hankelWeights(frequencies, powerBelow, reachCm);
      return Float64Array.from(where, (j, i) => {
        const z = belowTopsUm[i]! * 1e-4;
        const beam = arriving[j]! * Math.exp(-scaled[j]!.extinction * z);
        let diffuse = 0;
        for (let q = 0; q < weights.length; q++) diffuse += weights[q]! * solutions[q]!(j, z);
        const whole = beam + broad(j, z);
        return whole > 0 ? Math.min(1, Math.max(0, (beam + diffuse) / whole)) : 1;
      });
    },
  };
}
