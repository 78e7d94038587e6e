import { DomainError } from "../errors.js";
import { cubicSpline, type SplineEvaluator } from "../numerics/cubic-spline.js";
import { density_kg_per_m3, LAMBDA_TEMPERATURE_K } from "./density.js";
import { FIRST_SOUND_ABOVE_LAMBDA, FIRST_SOUND_BELOW_LAMBDA } from "./tables/first-sound.js";

/** Relative standard uncertainty of first sound: how closely its source follows the measured rows. */
export const RELATIVE_U_FIRST_SOUND = 1e-3;

function splineOf(rows: readonly (readonly [number, number])[]): SplineEvaluator {
  return cubicSpline(
    Float64Array.from(rows, ([T]) => T),
    Float64Array.from(rows, ([, u]) => u),
    "natural",
  );
}
const below = splineOf(FIRST_SOUND_BELOW_LAMBDA);
const above = splineOf(FIRST_SOUND_ABOVE_LAMBDA);

/**
 * First sound of ⁴He along saturated vapour pressure, m/s, at ultrasonic frequencies.
 * @throws DomainError outside 0…4.2 K
 */
export function firstSound_m_per_s(T_K: number): number {
  if (!(T_K >= 0 && T_K <= 4.2)) throw new DomainError(`no first sound at ${T_K} K: 0 to 4.2 K`);
  return (T_K <= LAMBDA_TEMPERATURE_K ? below : above).value(T_K);
}

/**
 * Adiabatic compressibility κ_S = 1/(ρu₁²), 1/Pa.
 * @throws DomainError outside 0…4.2 K
 */
export function compressibility_per_Pa(T_K: number): number {
  return 1 / (density_kg_per_m3(T_K) * firstSound_m_per_s(T_K) ** 2);
}
