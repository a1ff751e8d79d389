/** Constants in SI units, CODATA 2022 (the first three exact by definition). */
export const SI = {
  planck: 6.62607015e-34,
  speedOfLight: 299_792_458,
  boltzmann: 1.380649e-23,
  /** CODATA 2022: 8.8541878188(14)e-12 F/m. */
  electricConstant: 8.8541878188e-12,
} as const;

/** ħ = h/2π, in J s. */
export const REDUCED_PLANCK = SI.planck / (2 * Math.PI);

/**
 * Mean number of thermal photons in a mode.
 *
 * Formula: 1/(e^{hν/k_BT} − 1).
 * @param frequency ν in Hz, > 0 (an angular frequency ω is ν = ω/2π)
 * @param temperature T in K, ≥ 0
 * @returns the occupation, a pure number; full relative precision for small and large hν/k_BT
 * @example thermalOccupation(ν, 0) = 0
 * Source: Planck's law; constants of CODATA 2022.
 */
export function thermalOccupation(frequency: number, temperature: number): number {
  if (temperature === 0) return 0;
  return 1 / Math.expm1((SI.planck * frequency) / (SI.boltzmann * temperature));
}

/**
 * Energy of a photon of frequency ν.
 *
 * Formula: hν.
 * @param frequency ν in Hz, > 0
 * @returns energy in J
 * @example photonEnergy(1) = 6.62607015e-34
 * Source: CODATA 2022.
 */
export const photonEnergy = (frequency: number): number => SI.planck * frequency;

/**
 * Energy of a photon of vacuum wavelength λ.
 *
 * Formula: hc/λ.
 * @param wavelength λ in m, > 0
 * @returns energy in J
 * @example photonEnergyOfWavelength(299792458) = 6.62607015e-34
 * Source: CODATA 2022.
 */
export const photonEnergyOfWavelength = (wavelength: number): number => (SI.planck * SI.speedOfLight) / wavelength;

/**
 * Photons per second of a beam.
 *
 * Formula: Pλ/(hc).
 * @param power P in W, ≥ 0
 * @param wavelength λ in m, > 0
 * @returns photons in s⁻¹
 * @example photonFlux(0, 1) = 0
 * Source: CODATA 2022.
 */
export const photonFlux = (power: number, wavelength: number): number =>
  (power * wavelength) / (SI.planck * SI.speedOfLight);

/**
 * Rate of spontaneous emission of a two-level atom (Einstein's A).
 *
 * Formula: ω³d²/(3πε₀ħc³).
 * @param angularFrequency ω in rad/s, ≥ 0
 * @param dipole matrix element d in C m
 * @returns rate in s⁻¹
 * @example spontaneousRate(0, 1) = 0
 * Source: Wigner and Weisskopf; constants of CODATA 2022.
 */
export function spontaneousRate(angularFrequency: number, dipole: number): number {
  const ratio = angularFrequency / SI.speedOfLight;
  return (ratio * ratio * ratio * dipole * dipole) / (3 * Math.PI * SI.electricConstant * REDUCED_PLANCK);
}
