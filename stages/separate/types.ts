export interface Estimate {
  readonly value: number;
  readonly standard_uncertainty: number;
  readonly unit: string;
}

/** What a separation needs of a dataset: any C(T) table will do. Every column has length n. */
export interface SeparationInput {
  readonly T_K: Float64Array;
  readonly Cv_J_per_mol_K: Float64Array;
  /** k = 1, uncorrelated; null where the table has none: then the scatter about the fit sets it. */
  readonly u_repeat_J_per_mol_K: Float64Array | null;
  readonly sources: readonly import("../combine/types.js").CommonSource[];
  readonly molar_volume_m3_per_mol: { readonly value: number; readonly u: number };
}

export type SeparationModel = "landau" | "whole-curve";

export interface SeparationConfig {
  readonly window_K: readonly [number, number];
  /** Exponents of the phonon series, or "auto": ranked by AICc among [3], [3,5], [3,5,7]. */
  readonly phonon_powers: readonly number[] | "auto";
  readonly other_powers: readonly number[];
  readonly model: SeparationModel | "auto";
}

/**
 * How one source of uncertainty moves the results: the change for one standard uncertainty, with its sign (common to
 * all sources for repeatability). Their squares sum to the square of the standard uncertainty.
 */
export interface Influence {
  readonly name: string;
  readonly title: string;
  /** Relative standard uncertainty of Cv from this source, root mean square over the fitted points; null if it enters elsewhere. */
  readonly relative_Cv: number | null;
  /** Null where there is no sound speed. */
  readonly sound_speed_m_per_s: number | null;
  readonly roton_gap_K: number | null;
}

/** A parameter that could not be had is null, and `missing` says why. */
export interface Separation {
  readonly model: SeparationModel;
  readonly phonon_powers: readonly number[];
  readonly points: number;
  readonly window: { readonly from: number; readonly to: number; readonly unit: "K" };
  readonly sound_speed: Estimate | null;
  readonly roton_gap: Estimate | null;
  /** Coefficient of T³. */
  readonly phonon_coefficient: Estimate | null;
  /** Of √T e^{−y}(3/4 + y + y²); the whole curve has none. */
  readonly roton_amplitude: Estimate | null;
  /** Every fitted amplitude and Δ, in the order of `correlation`. */
  readonly parameters: readonly ({ readonly name: string } & Estimate)[];
  readonly chi_squared: number;
  readonly degrees_of_freedom: number;
  /** AICc of this fit; comparable among fits to the same points only. Infinity where the points are too few for one. */
  readonly aicc: number;
  readonly correlation: {
    readonly names: readonly string[];
    readonly matrix: readonly (readonly number[])[];
  };
  readonly graphical: { readonly sound_speed: Estimate | null; readonly roton_gap: Estimate | null };
  readonly alternatives: readonly {
    readonly model: SeparationModel;
    readonly phonon_powers: readonly number[];
    readonly sound_speed: Estimate | null;
    readonly roton_gap: Estimate | null;
    readonly chi_squared: number;
    readonly degrees_of_freedom: number;
    readonly aicc: number;
  }[];
  readonly missing: readonly string[];
  readonly influences: readonly Influence[];
  /** The fitted points and the model on them, for figures; every column has the length `points`. */
  readonly curve: {
    /** Index of the point in the input. */
    readonly row: Int32Array;
    readonly T_K: Float64Array;
    readonly Cv_J_per_mol_K: Float64Array;
    readonly u_repeat_J_per_mol_K: Float64Array;
    readonly fit_J_per_mol_K: Float64Array;
    readonly phonon_J_per_mol_K: Float64Array;
    readonly roton_J_per_mol_K: Float64Array;
  };
}
