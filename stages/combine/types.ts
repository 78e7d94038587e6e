/** A source of uncertainty that moves all points together. */
export interface CommonSource {
  /** Machine name; its dataset column is `s_<name>`: lower case, digits and underscores. */
  readonly name: string;
  /** As a physicist would call it in a budget table. */
  readonly title: string;
  /** Length n: change of Cv for one standard uncertainty of the source, with its sign. */
  readonly s_Cv_J_per_mol_K: Float64Array;
}

/** Heat capacity points of all nights, in order of temperature. Every column has length n. */
export interface HeatCapacity {
  readonly T_K: Float64Array;
  readonly Cv_J_per_mol_K: Float64Array;
  /** Repeatability only, k = 1. */
  readonly u_repeat_J_per_mol_K: Float64Array;
  /** Everything: √(u_repeat² + Σ s²). */
  readonly u_Cv_J_per_mol_K: Float64Array;
  readonly dT_K: Float64Array;
  /** Addenda over total heat capacity. */
  readonly addenda_share: Float64Array;
  readonly run: readonly string[];
  readonly pulse: Int32Array;
  readonly sources: readonly CommonSource[];
}

/** The curve beside the points: weighted means in bins of equal width in ln T. Every column has length n. */
export interface BinnedCurve {
  readonly T_K: Float64Array;
  readonly Cv_J_per_mol_K: Float64Array;
  readonly u_Cv_J_per_mol_K: Float64Array;
  readonly points: Int32Array;
}
