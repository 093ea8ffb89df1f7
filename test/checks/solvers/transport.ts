import type { OpticalLayer } from '../../../domain/tissue/optical-layer.js';
import { reducedScatteringPerCm } from '../../../domain/tissue/scattering.js';
import { fresnelMoments } from '../../../domain/transport/fresnel.js';
import { type LightSolution, solveLight } from '../../../domain/transport/layered-solver.js';

interface Inputs {
  readonly layers: readonly (readonly [number, number, number, number, number])[];
  readonly depthUm: number;
  readonly diameterMm: number;
  readonly index: number;
  readonly absorptionPerCm: number;
  readonly reducedScatteringPerCm: number;
  readonly radiusCm: number;
  readonly rayleighPerCm: number;
  readonly miePerCm: number;
  readonly wavelengthNm: number;
}

// Layers stand in the truth file as thickness in um, absorption and scattering per cm, anisotropy, index.
function light(inputs: Inputs): LightSolution {
  const layers = inputs.layers.map(
    ([thicknessUm, absorptionPerCm, scatteringPerCm, anisotropy, refractiveIndex]): OpticalLayer => ({
      name: 'check',
      thicknessUm,
      absorptionPerCm,
      scatteringPerCm,
      anisotropy,
      refractiveIndex,
    }),
  );
  return solveLight(layers, { accuracy: 'fine' });
}

const totalReflectance = (inputs: Inputs): number => {
  const { specularReflectance, diffuseReflectance } = light(inputs);
  return specularReflectance + diffuseReflectance;
};

const fluenceRatio = (inputs: Inputs, diameterMm?: number): number =>
  light(inputs).fluenceRatios(diameterMm === undefined ? null : { shape: 'circle', diameterMm }, [inputs.depthUm])[0]!;

// Jacques 1998, fluence rule of thumb, fed with the solver's own reflectance
function engineeringFluence(inputs: Inputs): number {
  const [, absorption, scattering, anisotropy] = inputs.layers[0]!;
  const { diffuseReflectance } = light(inputs);
  const attenuation = Math.sqrt(3 * absorption * (absorption + scattering * (1 - anisotropy)));
  const backscatter = 3 + 5.1 * diffuseReflectance - 2 * Math.exp(-9.7 * diffuseReflectance);
  return backscatter * Math.exp(-attenuation * inputs.depthUm * 1e-4);
}

// Kienle and Patterson 1997: an isotropic source one transport length deep and its image beyond the extrapolated boundary
function diffusion({ absorptionPerCm, reducedScatteringPerCm, index, radiusCm }: Inputs): { flux: number; fluence: number } {
  const depth = 1 / (absorptionPerCm + reducedScatteringPerCm);
  const constant = depth / 3;
  const boundary = 2 * fresnelMoments(index, 1).boundaryFactor * constant;
  const attenuation = Math.sqrt(absorptionPerCm / constant);
  const near = Math.hypot(depth, radiusCm);
  const far = Math.hypot(depth + 2 * boundary, radiusCm);
  const pull = (r: number): number => ((attenuation + 1 / r) * Math.exp(-attenuation * r)) / (r * r);
  return {
    flux: (depth * pull(near) + (depth + 2 * boundary) * pull(far)) / (4 * Math.PI),
    fluence: (Math.exp(-attenuation * near) / near - Math.exp(-attenuation * far) / far) / (4 * Math.PI * constant),
  };
}

// A law given at 1000 nm with Mie exponent 1, brought to the 500 nm of our own
function reducedScattering({ rayleighPerCm, miePerCm, wavelengthNm }: Inputs): number {
  const aPerCm = 16 * rayleighPerCm + 2 * miePerCm;
  const law = { aPerCm, rayleighFraction: (16 * rayleighPerCm) / aPerCm, mieExponent: 1, fromNm: 400, toNm: 1300 };
  return reducedScatteringPerCm({ ...law, spreadFactor: 1, source: 'Jacques 2008', status: 'read' }, wavelengthNm);
}

export const solvers: Record<string, (inputs: Inputs) => number> = {
  'total reflectance': totalReflectance,
  'diffuse reflectance': (inputs) => light(inputs).diffuseReflectance,
  transmittance: (inputs) => light(inputs).transmittance,
  'fluence ratio': (inputs) => fluenceRatio(inputs),
  'spot over broad': (inputs) => fluenceRatio(inputs, inputs.diameterMm) / fluenceRatio(inputs),
  'first Fresnel moment': ({ index }) => fresnelMoments(index, 1).first,
  'second Fresnel moment': ({ index }) => fresnelMoments(index, 1).second,
  'boundary factor': ({ index }) => fresnelMoments(index, 1).boundaryFactor,
  'engineering fluence': engineeringFluence,
  'engineering over transport': (inputs) => engineeringFluence(inputs) / fluenceRatio(inputs),
  'diffusion flux': (inputs) => diffusion(inputs).flux,
  'diffusion fluence': (inputs) => diffusion(inputs).fluence,
  'diffusion reflectance': (inputs) => 0.118 * diffusion(inputs).fluence + 0.306 * diffusion(inputs).flux,
  'reduced scattering': reducedScattering,
  'energy returned': (inputs) => totalReflectance(inputs) + light(inputs).transmittance,
  'energy balance': (inputs) => totalReflectance(inputs) + light(inputs).transmittance + light(inputs).absorbedFraction,
};
