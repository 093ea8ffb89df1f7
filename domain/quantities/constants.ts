/** Physical constants in SI units. The first five are exact by the 2019 definition of the SI.
 *  @source BIPM2019 SI brochure, 9th edition, table 1 and section 2.2 */
export const planckJS = 6.62607015e-34; // exact
export const speedOfLightMPerS = 299792458; // exact
export const elementaryChargeC = 1.602176634e-19; // exact
export const gasConstantJPerMolK = 8.31446261815324; // exact, product of Avogadro and Boltzmann constants
export const zeroCelsiusK = 273.15; // definition of the degree Celsius

/** Electric constant in F/m, the CODATA 2018 value (relative uncertainty 1.5e-10).
 *  @source Tiesinga2021 table of recommended values */
export const vacuumPermittivityFPerM = 8.8541878128e-12;
