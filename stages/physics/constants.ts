/** A constant with its unit, standard uncertainty (k = 1) and source. */
export interface Constant {
  readonly value: number;
  readonly u: number;
  readonly unit: string;
  readonly source: string;
}

export const BOLTZMANN: Constant = { value: 1.380649e-23, u: 0, unit: "J/K", source: "SI 2019, exact" };
export const AVOGADRO: Constant = { value: 6.02214076e23, u: 0, unit: "1/mol", source: "SI 2019, exact" };
export const PLANCK: Constant = { value: 6.62607015e-34, u: 0, unit: "J.s", source: "SI 2019, exact" };
export const ELEMENTARY_CHARGE: Constant = {
  value: 1.602176634e-19,
  u: 0,
  unit: "C",
  source: "SI 2019, exact",
};
export const PLANCK_REDUCED: Constant = {
  value: PLANCK.value / (2 * Math.PI),
  u: 0,
  unit: "J.s",
  source: "h/(2π)",
};
export const GAS_CONSTANT: Constant = {
  value: BOLTZMANN.value * AVOGADRO.value,
  u: 0,
  unit: "J/(mol.K)",
  source: "k·N_A",
};
/** Kelvin per millielectronvolt: neutron spectra are published in meV. */
export const KELVIN_PER_MEV: Constant = {
  value: (1e-3 * ELEMENTARY_CHARGE.value) / BOLTZMANN.value,
  u: 0,
  unit: "K/meV",
  source: "e/k",
};
export const ATOMIC_MASS: Constant = {
  value: 1.66053906892e-27,
  u: 5.2e-37,
  unit: "kg",
  source: "CODATA 2022",
};
/** In atomic mass units; the number itself is from memory, its uncertainty does not matter to us. */
const HELIUM4_RELATIVE_MASS = { value: 4.00260325413, u: 1.6e-10 };
export const HELIUM4_ATOMIC_MASS: Constant = {
  value: HELIUM4_RELATIVE_MASS.value * ATOMIC_MASS.value,
  u: Math.hypot(HELIUM4_RELATIVE_MASS.u * ATOMIC_MASS.value, HELIUM4_RELATIVE_MASS.value * ATOMIC_MASS.u),
  unit: "kg",
  source: "m(4He) = 4.00260325413(16) u, AME2020 (from memory), times the atomic mass constant, CODATA 2022",
};
/** Of the helium that gas bottles hold; the 1.4 ppm of ³He in it is far below any amount's uncertainty. */
export const HELIUM4_MOLAR_MASS: Constant = {
  value: 4.002602e-3,
  u: 2e-9,
  unit: "kg/mol",
  source: "standard atomic weight of helium, IUPAC/CIAAW",
};
