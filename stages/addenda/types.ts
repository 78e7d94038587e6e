/** A common source within the addenda: one standard uncertainty of it moves every point by its column. */
export interface AddendaSensitivity {
  /** As a physicist would call it in a budget table. */
  readonly title: string;
  /** Length of the temperatures asked for. */
  readonly s_C_J_per_K: Float64Array;
}

/** Heat capacity of everything but the sample. */
export interface Addenda {
  readonly source: "empty-cell" | "parts" | "none";
  /** Exponents of T in an empty-cell fit; empty for the other sources. */
  readonly powers: readonly number[];
  /** Length of `powers`, J/K^{power + 1}. */
  readonly coefficient: readonly number[];
  /** Square, in the order of `powers`; Birge ratio included. */
  readonly covariance: readonly (readonly number[])[];
  /** Where the addenda are known. Beyond it the same law goes on, and `rangeNotes` says so. */
  readonly range_K: readonly [number, number];
  /** Of the fit, before any Birge scaling; 0 where there was no fit. */
  readonly chiSquared: number;
  readonly degreesOfFreedom: number;
  /** What a person should know; never an error. */
  readonly notes: readonly string[];

  heatCapacity_J_per_K(T_K: number): number;
  /** Mean over T₁…T₂, as a heat pulse over that step measures it. */
  meanOver(T1_K: number, T2_K: number): number;
  /**
   * Independent common sources whose outer products add up to the covariance of the addenda.
   * @param T_K length n
   */
  sensitivities(T_K: Float64Array): readonly AddendaSensitivity[];
  /** One sentence for each end at which the temperatures leave `range_K`; none if they stay inside. */
  rangeNotes(T_K: Float64Array): readonly string[];
}
