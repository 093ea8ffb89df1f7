import type { OpticalLayer } from '../../../domain/tissue/optical-layer.js';
import type { BeamProfile } from '../../../domain/transport/beam-profile.js';
import { type LightSolution, solveLight } from '../../../domain/transport/layered-solver.js';

export interface MatrixInputs {
  /** Thickness in um, absorption and scattering per cm, anisotropy, refractive index. */
  readonly layers: readonly (readonly [number, number, number, number, number])[];
  readonly spot: BeamProfile | null;
  readonly depthMm: number;
  readonly standardError: number;
}

function opticalLayer([
  thicknessUm,
  absorptionPerCm,
  scatteringPerCm,
  anisotropy,
  refractiveIndex,
]: MatrixInputs['layers'][number]): OpticalLayer {
  return { name: 'layer', thicknessUm, absorptionPerCm, scatteringPerCm, anisotropy, refractiveIndex };
}

let solved: { key: string; solution: LightSolution } | undefined;

function solve({ layers }: MatrixInputs, accuracy: 'ranking' | 'fine'): LightSolution {
  const key = `${accuracy} ${JSON.stringify(layers)}`;
  if (solved?.key !== key) solved = { key, solution: solveLight(layers.map(opticalLayer), { accuracy }) };
  return solved.solution;
}

function fluenceRatio(inputs: MatrixInputs): number {
  return solve(inputs, 'ranking').fluenceRatios(inputs.spot, [inputs.depthMm * 1000])[0]!;
}

export const solvers: Record<string, (inputs: MatrixInputs) => number> = {
  'fluence ratio on the axis, target 1 %': fluenceRatio,
  'fluence ratio on the axis, target 3 %': fluenceRatio,
  'fluence ratio on the axis, target 5 %': fluenceRatio,
  'diffuse reflectance': (inputs) => solve(inputs, 'fine').diffuseReflectance,
  'absorbed fraction': (inputs) => solve(inputs, 'fine').absorbedFraction,
};
