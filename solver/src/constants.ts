/**
 * Physical constants.
 *
 * q, k, h and c are exact by the SI of 2019; the vacuum permittivity is CODATA 2018
 * (Tiesinga et al., Rev. Mod. Phys. 93, 025010 (2021), table XXXI).
 */

/** Elementary charge, C. */
export const elementaryCharge = 1.602176634e-19;
/** Boltzmann constant, J/K. */
export const boltzmannConstant = 1.380649e-23;
/** Planck constant, J s. */
export const planckConstant = 6.62607015e-34;
/** Speed of light in vacuum, m/s. */
export const speedOfLight = 299792458;
/** Vacuum permittivity, F/m. */
export const vacuumPermittivity = 8.8541878128e-12;

/** Thermal voltage kT/q in V at a temperature in K. */
export function thermalVoltage(temperatureK: number): number {
  return (boltzmannConstant * temperatureK) / elementaryCharge;
}
