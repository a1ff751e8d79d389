/** A physical constant: its value and unit. */
export interface PhysicalConstant {
  readonly value: number;
  readonly unit: string;
}

/**
 * The physical constants of the language, CODATA 2022 recommended values.
 *
 * Source: P. J. Mohr, D. B. Newell, B. N. Taylor and E. Tiesinga, "CODATA recommended values of the fundamental physical
 * constants: 2022", Rev. Mod. Phys. 97 (2025) 025002. c, h, k and e are exact by the definition of the SI; ħ = h/2π.
 */
export const physicalConstants: Readonly<Record<string, PhysicalConstant>> = {
  speedOfLight: { value: 299_792_458, unit: 'm s^-1' },
  planckConstant: { value: 6.626_070_15e-34, unit: 'J s' },
  reducedPlanckConstant: { value: 6.626_070_15e-34 / (2 * Math.PI), unit: 'J s' },
  boltzmann: { value: 1.380_649e-23, unit: 'J K^-1' },
  elementaryCharge: { value: 1.602_176_634e-19, unit: 'C' },
  electricConstant: { value: 8.854_187_818_8e-12, unit: 'F m^-1' },
  electronMass: { value: 9.109_383_713_9e-31, unit: 'kg' },
  bohrRadius: { value: 5.291_772_105_44e-11, unit: 'm' },
};
