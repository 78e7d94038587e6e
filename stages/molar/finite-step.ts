import { meanOverStep } from "../physics/step-mean.js";

/**
 * What a step of finite width adds to the heat capacity at its middle: mean over the step less the value there,
 * C″ΔT²/24 in lowest order. Subtract it from a measured column, with a smooth curve that is then fitted again.
 *
 * At ΔT/T = 0.05 the activated roton rise makes it about 0.5 % of C.
 * @param T_K, dT_K length n
 * @param smooth_Cv the smooth curve, J/(mol K) at a temperature in K
 * @returns length n, J/(mol K)
 */
export function finiteStepExcess_J_per_mol_K(
  T_K: Float64Array,
  dT_K: Float64Array,
  smooth_Cv: (T_K: number) => number,
): Float64Array {
  return T_K.map((T, i) => meanOverStep(smooth_Cv, T - dT_K[i]! / 2, T + dT_K[i]! / 2) - smooth_Cv(T));
}
