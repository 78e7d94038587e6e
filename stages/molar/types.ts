import type { Quantity } from "../quantities/types.js";

/** A source of uncertainty that moves all points together; the shape that the combined dataset carries. */
export interface MolarSource {
  /** Machine name: `amount`, `addenda_1`, `addenda_2` …, `vapour_space`. */
  readonly name: string;
  readonly title: string;
  /** Length n: change of Cv for one standard uncertainty of the source, with its sign. */
  readonly s_Cv_J_per_mol_K: Float64Array;
}

/** Total heat capacities as the pulses gave them. Every column has length n. */
export interface TotalHeatCapacity {
  /** Middle of the step. */
  readonly T_K: Float64Array;
  /** Width of the step. */
  readonly dT_K: Float64Array;
  /** Mean over the step. */
  readonly C_total_J_per_K: Float64Array;
  /** Repeatability, k = 1. */
  readonly u_C_total_J_per_K: Float64Array;
}

/** What fills the cell. */
export interface HeliumSample {
  /** mol. */
  readonly amount: Quantity;
  readonly condition: "constant-volume" | "saturated-vapour";
  /** Volume above the liquid when cold, m³; wanted for saturated vapour only. */
  readonly vapour_space?: Quantity | undefined;
}

/** Heat capacity per mole at constant volume. Every column has length n. */
export interface MolarHeatCapacity {
  readonly T_K: Float64Array;
  /** Mean over the step dT_K about T_K; finite-step.ts says what that costs. */
  readonly Cv_J_per_mol_K: Float64Array;
  /** Repeatability, k = 1. */
  readonly u_repeat_J_per_mol_K: Float64Array;
  /** Addenda over total heat capacity. */
  readonly addenda_share: Float64Array;
  /** Vapour part over total heat capacity; 0 at constant volume. */
  readonly vapour_share: Float64Array;
  readonly sources: readonly MolarSource[];
  /** What a person should know; never an error. */
  readonly notes: readonly string[];
}
