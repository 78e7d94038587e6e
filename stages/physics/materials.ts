import { DomainError } from "../errors.js";
import { MATERIALS, type Material, type MaterialName } from "./tables/materials.js";

export { MATERIALS, type Material, type MaterialName } from "./tables/materials.js";

export const MATERIAL_NAMES = Object.keys(MATERIALS) as readonly MaterialName[];

/** Heat capacity per mole (per gram for plastics and greases) by the material's own law, its range not checked. */
function lawPerKilogram(material: Material, T_K: number): number {
  switch (material.form) {
    case "powers": {
      let C = 0;
      for (const { power, coefficient_J_per_mol } of material.terms)
        C += coefficient_J_per_mol * T_K ** power;
      return C / material.molarMass_kg_per_mol;
    }
    case "log-polynomial": {
      const log = Math.log10(T_K);
      let sum = 0;
      for (let i = material.a.length - 1; i >= 0; i--) sum = sum * log + material.a[i]!;
      return 10 ** sum;
    }
    case "superconductor": {
      const { gammaTc_J_per_mol_K, prefactor, exponent, criticalTemperature_K, beta_J_per_mol_K4 } = material;
      const electrons = gammaTc_J_per_mol_K * prefactor * Math.exp((-exponent * criticalTemperature_K) / T_K);
      return (electrons + beta_J_per_mol_K4 * T_K ** 3) / material.molarMass_kg_per_mol;
    }
  }
}

/**
 * Published specific heat.
 * @returns J/(kg K) and its standard uncertainty
 * @throws DomainError outside the material's published range
 */
export function specificHeat_J_per_kg_K(
  material: MaterialName,
  T_K: number,
): { readonly value: number; readonly u: number } {
  const { range_K } = MATERIALS[material];
  if (!(T_K >= range_K[0] && T_K <= range_K[1])) {
    throw new DomainError(
      `no published specific heat of ${material} at ${T_K} K: ${range_K[0]} to ${range_K[1]} K`,
    );
  }
  return extrapolatedSpecificHeat_J_per_kg_K(material, T_K);
}

/** The same law beyond its range. Whoever uses it says so in the result. */
export function extrapolatedSpecificHeat_J_per_kg_K(
  material: MaterialName,
  T_K: number,
): { readonly value: number; readonly u: number } {
  const value = lawPerKilogram(MATERIALS[material], T_K);
  return { value, u: value * MATERIALS[material].relativeU };
}
