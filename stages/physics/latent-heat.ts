import { DomainError } from "../errors.js";
import { cubicSpline, type SplineEvaluator } from "../numerics/cubic-spline.js";
import { GAS_CONSTANT } from "./constants.js";
import { LAMBDA_TEMPERATURE_K } from "./density.js";
import { LATENT_HEAT_ABOVE_LAMBDA, LATENT_HEAT_BELOW_LAMBDA } from "./tables/latent-heat.js";
import { LATENT_HEAT_AT_ZERO_J_PER_MOL } from "./vapour-pressure.js";

/** Relative standard uncertainty of the recommended latent heat, stated by its source. */
export const RELATIVE_U_LATENT_HEAT = 1e-3;

/** Up to here the table is L₀ + (5/2)RT within its last digit, and the formula has no rounding. */
const IDEAL_UP_TO_K = 0.6;

function splineOf(rows: readonly (readonly [number, number])[]): SplineEvaluator {
  return cubicSpline(
    Float64Array.from(rows, ([T]) => T),
    Float64Array.from(rows, ([, L]) => L),
    "not-a-knot",
  );
}
const below = splineOf(LATENT_HEAT_BELOW_LAMBDA.filter(([T]) => T >= IDEAL_UP_TO_K));
const above = splineOf(LATENT_HEAT_ABOVE_LAMBDA);

function branch(T_K: number): SplineEvaluator {
  if (!(T_K >= 0 && T_K <= 5.15)) throw new DomainError(`no latent heat at ${T_K} K: 0 to 5.15 K`);
  return T_K <= LAMBDA_TEMPERATURE_K ? below : above;
}

/**
 * Latent heat of ⁴He, J/mol, as recommended: R. J. Donnelly and C. F. Barenghi, J. Phys. Chem. Ref. Data 27, 1217 (1998).
 * Between 1.25 K and the lambda point it lies 0.3 to 0.5 % below what Clapeyron makes of the ITS-90.
 * @throws DomainError outside 0…5.15 K
 */
export function latentHeat_J_per_mol(T_K: number): number {
  const spline = branch(T_K);
  if (T_K < IDEAL_UP_TO_K) return LATENT_HEAT_AT_ZERO_J_PER_MOL + 2.5 * GAS_CONSTANT.value * T_K;
  return spline.value(T_K);
}
