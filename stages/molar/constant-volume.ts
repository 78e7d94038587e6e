import type { Addenda } from "../addenda/types.js";
import type { TotalHeatCapacity } from "./types.js";

/** The total split into sample and addenda. Every column has length n. */
export interface SampleHeatCapacity {
  /** Mean over the step. */
  readonly C_sample_J_per_K: Float64Array;
  /** Mean over the same step. */
  readonly C_addenda_J_per_K: Float64Array;
  readonly addenda_share: Float64Array;
}

/**
 * C_sample = C_total − addenda, both means over each pulse's own step: a finite step then costs the addenda nothing.
 */
export function subtractAddenda(points: TotalHeatCapacity, addenda: Addenda): SampleHeatCapacity {
  const { T_K, dT_K, C_total_J_per_K: C } = points;
  const C_addenda_J_per_K = T_K.map((T, i) => addenda.meanOver(T - dT_K[i]! / 2, T + dT_K[i]! / 2));
  return {
    C_sample_J_per_K: C.map((total, i) => total - C_addenda_J_per_K[i]!),
    C_addenda_J_per_K,
    addenda_share: C_addenda_J_per_K.map((part, i) => part / C[i]!),
  };
}
