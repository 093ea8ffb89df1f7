import { elementaryChargeC, planckJS, speedOfLightMPerS, vacuumPermittivityFPerM } from './constants.js';

/** Energy of one photon in electron volts: h c / lambda. Valid: wavelengthNm > 0. @source BIPM2019 exact constants */
export function photonEnergyEv(wavelengthNm: number): number {
  return (planckJS * speedOfLightMPerS) / (wavelengthNm * 1e-9 * elementaryChargeC);
}

/** Peak electric field of a plane wave of an irradiance in vacuum: sqrt(2 I / (c eps0)). @source Tiesinga2021 electric constant */
export function electricFieldVPerM(irradianceWPerCm2: number): number {
  return Math.sqrt((2 * irradianceWPerCm2 * 1e4) / (speedOfLightMPerS * vacuumPermittivityFPerM));
}
