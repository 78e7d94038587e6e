import { DomainError } from "../errors.js";
import { cubicSpline } from "../numerics/cubic-spline.js";

/**
 * Second virial coefficient of ⁴He gas.
 *
 * Computed from the published pair potential of M. Przybytek, W. Cencek et al., Phys. Rev. Lett. 104, 183003 (2010)
 * and W. Cencek et al., J. Chem. Phys. 136, 224303 (2012): rows of [T/K, B/(cm³/mol)], 1 to 10 K. The fit of C. Gaiser
 * and B. Fellmuth, Metrologia 46, 525 (2009) lies within 0.7 cm³/mol at 3 K and 0.1 from 4 K.
 */
// biome-ignore format: a table reads as a table
const COLD: readonly (readonly [number, number])[] = [
  [1, -475.893], [1.2, -370.388], [1.5, -276.993], [2, -194.456], [2.1768, -175.736], [2.5, -149.157],
  [3, -120.249], [3.5, -100.057], [4, -85.094], [4.2221, -79.615], [5, -64.327], [7, -40.751], [10, -23.134],
];
const U_COLD_M3_PER_MOL = 0.5e-6;

// In 1/T the coefficient is nearly straight, so few knots serve.
const descending = [...COLD].reverse();
const spline = cubicSpline(
  Float64Array.from(descending, ([T]) => 1 / T),
  Float64Array.from(descending, ([, B]) => B * 1e-6),
  "not-a-knot",
);

/**
 * About room temperature a straight line through the same potential's values at 273.15 and 300 K,
 * within 0.0003 cm³/mol of those between (11.8392 at 295 K).
 */
const WARM = {
  range_K: [268, 313],
  at_K: 273.15,
  B_m3_per_mol: 11.9273e-6,
  slope: (11.8187e-6 - 11.9273e-6) / 26.85,
} as const;
const U_WARM_M3_PER_MOL = 0.01e-6;

function isWarm(T_K: number): boolean {
  return T_K >= WARM.range_K[0] && T_K <= WARM.range_K[1];
}

function refuse(T_K: number): never {
  throw new DomainError(
    `no second virial coefficient of helium at ${T_K} K: it is tabulated from 1 to 10 K and from 268 to 313 K`,
  );
}

/**
 * @returns m³/mol, with its standard uncertainty
 * @throws DomainError outside 1…10 K and 268…313 K
 */
export function secondVirial_m3_per_mol(T_K: number): { readonly value: number; readonly u: number } {
  if (isWarm(T_K)) {
    return { value: WARM.B_m3_per_mol + WARM.slope * (T_K - WARM.at_K), u: U_WARM_M3_PER_MOL };
  }
  if (!(T_K >= 1 && T_K <= 10)) refuse(T_K);
  return { value: spline.value(1 / T_K), u: U_COLD_M3_PER_MOL };
}

/**
 * dB/dT, m³/(mol K).
 * @throws DomainError outside 1…10 K and 268…313 K
 */
export function secondVirialSlope_m3_per_mol_K(T_K: number): number {
  if (isWarm(T_K)) return WARM.slope;
  if (!(T_K >= 1 && T_K <= 10)) refuse(T_K);
  return -spline.slope(1 / T_K) / (T_K * T_K);
}
