import { BOLTZMANN, GAS_CONSTANT, HELIUM4_ATOMIC_MASS, PLANCK } from "../physics/constants.js";
import {
  adjustedCurve,
  heatCapacityOfCurve_J_per_mol_K,
  PUBLISHED_CURVE,
} from "../physics/excitation-curve.js";
import { phononHeatCapacity_J_per_mol_K } from "../physics/phonon.js";
import { rotonHeatCapacity_J_per_mol_K } from "../physics/roton.js";
import type { Filling, PowerLaw } from "./scenario.js";

/** Σ coefficient·T^power. */
export function sumOfPowers(terms: readonly PowerLaw[], T_K: number): number {
  return terms.reduce((sum, { coefficient, power }) => sum + coefficient * T_K ** power, 0);
}

/**
 * Molar heat capacity of the liquid at constant volume.
 * @returns length of T_K, J/(mol K)
 */
export function molarHeat_J_per_mol_K(filling: Filling, T_K: Float64Array): Float64Array {
  const { helium, molarVolume_m3_per_mol } = filling;
  if (helium.model === "whole-curve") {
    const curve = adjustedCurve(PUBLISHED_CURVE, helium);
    return heatCapacityOfCurve_J_per_mol_K(T_K, curve, molarVolume_m3_per_mol);
  }
  if (helium.model === "power-laws") return T_K.map((T) => sumOfPowers(helium.terms, T));
  const parts = { ...helium, molarVolume_m3_per_mol };
  return T_K.map((T) => phononHeatCapacity_J_per_mol_K(T, parts) + rotonHeatCapacity_J_per_mol_K(T, parts));
}

// L(0) of helium-4: 59.83 J/mol (Donnelly and Barenghi, J. Phys. Chem. Ref. Data 27, 1217 (1998), chapter 16).
const LATENT_HEAT_AT_ZERO_J_PER_MOL = 59.83;

/**
 * Amount of vapour over the liquid, ideal gas and liquid of negligible entropy:
 * p = (2πm)^{3/2}(kT)^{5/2}h⁻³ e^{−L₀/RT}. Within 1 % of the measured pressure up to 1.1 K.
 */
export function vapour_mol(T_K: number, space_m3: number): number {
  const kT = BOLTZMANN.value * T_K;
  const pressure_Pa =
    ((2 * Math.PI * HELIUM4_ATOMIC_MASS.value) ** 1.5 *
      kT ** 2.5 *
      Math.exp(-LATENT_HEAT_AT_ZERO_J_PER_MOL / (GAS_CONSTANT.value * T_K))) /
    PLANCK.value ** 3;
  return (pressure_Pa * space_m3) / (GAS_CONSTANT.value * T_K);
}

/**
 * Heat capacity of all helium in the cell: liquid, and what evaporates into a constant ullage. With λ = L/RT and
 * L = L₀ + (5/2)RT the vapour's part is n_v R(5/2 − 2λ + λ²) (methods.md §4). The liquid's own path along the
 * vapour pressure differs from constant volume by less than 1e-3 below 1.3 K and is taken as the latter.
 * @returns length of T_K, J/K
 */
export function fillingHeat_J_per_K(filling: Filling, T_K: Float64Array): Float64Array {
  const molar = molarHeat_J_per_mol_K(filling, T_K);
  const { amount_mol, vapourSpace_m3 } = filling;
  if (vapourSpace_m3 === 0) return molar.map((c) => amount_mol * c);
  return molar.map((c, i) => {
    const T = T_K[i]!;
    const vapour = vapour_mol(T, vapourSpace_m3);
    const lambda = LATENT_HEAT_AT_ZERO_J_PER_MOL / (GAS_CONSTANT.value * T) + 2.5;
    return amount_mol * c + vapour * GAS_CONSTANT.value * (2.5 - 2 * lambda + lambda * lambda);
  });
}
