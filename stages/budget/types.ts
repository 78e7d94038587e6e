/** One line of the uncertainty budget of u₁ and Δ. */
export interface BudgetLine {
  readonly name: string;
  readonly title: string;
  /** Relative standard uncertainty of Cv from this source, root mean square over the fitted points; null if it enters elsewhere. */
  readonly relative_Cv: number | null;
  /** Signed change for one standard uncertainty of the source; NaN where the separation has no such number. */
  readonly sound_speed_m_per_s: number;
  readonly roton_gap_K: number;
  /** Share of the variance, 0…1. */
  readonly share_sound_speed: number;
  readonly share_roton_gap: number;
}

export interface Budget {
  readonly lines: readonly BudgetLine[];
  /** Root sum of squares over the lines. */
  readonly u_sound_speed_m_per_s: number;
  readonly u_roton_gap_K: number;
}

/** One night against the fit to all. */
export interface NightOffset {
  readonly run: string;
  readonly points: number;
  /** Weighted mean of (C − fit)/fit. */
  readonly relative_offset: number;
  /** From repeatability alone, k = 1. */
  readonly u_relative_offset: number;
}

/** Scatter between nights. */
export interface BetweenNights {
  readonly nights: readonly NightOffset[];
  /** √(χ²/(K − 1)) of the K nights' offsets; null for one night. */
  readonly birge_ratio: number | null;
}
