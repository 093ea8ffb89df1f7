import { combineRelative } from '../../../domain/dosimetry/uncertainty-budget.js';
import { deliver } from '../../../server/api/fluence/fluence.actions.js';
import { FluenceRequest } from '../../../server/api/fluence/fluence.schema.js';

const ask = (inputs: object) => deliver(FluenceRequest.parse({ wavelengthNm: 1064, ...inputs })).result;

export const solvers = {
  'peak power': (inputs: object) => ask(inputs).peakPowerW,
  'average power': (inputs: object) => ask(inputs).averagePowerW,
  'duty cycle': (inputs: object) => ask(inputs).dutyCycleFraction,
  irradiance: (inputs: object) => ask(inputs).irradianceWPerCm2,
  'electric field': (inputs: object) => ask(inputs).electricFieldVPerM,
  'peak fluence': (inputs: object) => ask(inputs).peakFluenceJPerCm2,
  fluence: (inputs: object) => ask(inputs).fluenceJPerCm2,
  'peak over mean fluence': (inputs: object) => ask(inputs).peakFluenceJPerCm2 / ask(inputs).fluenceJPerCm2,
  'photon energy': ({ nm }: { nm: number }) =>
    ask({ wavelengthNm: nm, pulseEnergyJ: 1, pulse: { durationS: 1e-3 }, spot: { shape: 'circle', diameterMm: 5 } })
      .photonEnergyEv,
  'relative standard uncertainty of fluence': (inputs: object) => ask(inputs).uncertainty.relativeStandard,
  'upper end of fluence, k = 2': (inputs: object) => ask(inputs).uncertainty.highJPerCm2,
  'combined relative standard uncertainty': ({ parts }: { parts: [number, number][] }) =>
    combineRelative(parts.map(([relativeStandard, sensitivity], i) => ({ quantity: String(i), relativeStandard, sensitivity })))
      .relativeStandard,
};
