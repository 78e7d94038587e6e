/** Why a pulse is doubted, bit by bit; words in flags.ts. */
export const PulseFlag = {
  NoData: 1,
  RiseTooSmall: 2,
  RiseTooLarge: 4,
  DriftTooStrong: 8,
  NotSettled: 16,
  SamplesMissing: 32,
  Spikes: 64,
  OutsideCalibration: 128,
  HeaterResistance: 256,
  Truncated: 512,
  Vetoed: 1024,
  ZeroEnergy: 2048,
  VoltageInverted: 4096,
  HeaterLeftOn: 8192,
  SlowBoundary: 16384,
  StageNotSteady: 32768,
  Unexplained: 65536,
  HeaterUnsteady: 131072,
  ReadingJumps: 262144,
} as const;

export type PulseMethod = "drift" | "two-body" | "relaxation";

/** One row a pulse. Every column has length n. */
export interface PulseTable {
  /** 1-based number in the heater log. */
  readonly pulse: Int32Array;
  readonly start_s: Float64Array;
  readonly duration_s: Float64Array;
  /** Body and liquid in balance, before the heat and with it. */
  readonly T_before_K: Float64Array;
  readonly T_after_K: Float64Array;
  /** (T_before + T_after)/2, to which C belongs. */
  readonly T_K: Float64Array;
  readonly dT_K: Float64Array;
  /** Width in T over which C is a mean; 0 where the method gives C at T itself. */
  readonly mean_over_K: Float64Array;
  /** Repeatability of dT from the fits, k = 1. */
  readonly u_dT_K: Float64Array;
  /** Heat that reached the cell, lead heat included. */
  readonly Q_J: Float64Array;
  /** Repeatability of Q (readings, pulse length), k = 1. */
  readonly u_Q_J: Float64Array;
  /** Share of Q that came from the leads. */
  readonly lead_heat_J: Float64Array;
  readonly heater_resistance_Ohm: Float64Array;
  readonly C_total_J_per_K: Float64Array;
  /** Repeatability, k = 1. */
  readonly u_C_total_J_per_K: Float64Array;
  readonly method: readonly PulseMethod[];
  /** What drift lines are expected to be wrong by after their correction, relative to C; Infinity: not bounded. */
  readonly drift_bias: Float64Array;
  /** AIC of each method on the same samples, above the lowest; NaN where it was not tried. */
  readonly aic_drift: Float64Array;
  readonly aic_two_body: Float64Array;
  readonly aic_relaxation: Float64Array;
  /** Weak link to the stage. */
  readonly link_W_per_K: Float64Array;
  readonly u_link_W_per_K: Float64Array;
  /** Time in which body and liquid come to one temperature; NaN unless the method is two-body. */
  readonly boundary_time_s: Float64Array;
  readonly u_boundary_time_s: Float64Array;
  /** Thermal conductance between body and liquid; NaN unless the method is two-body. */
  readonly boundary_W_per_K: Float64Array;
  readonly u_boundary_W_per_K: Float64Array;
  /** Bits of PulseFlag. */
  readonly flag: Int32Array;
  /** "" or the reason of a veto, as written in run.yaml. */
  readonly reason: readonly string[];
  /** 1 where the pulse goes on to the dataset. */
  readonly used: Uint8Array;
  readonly noise_K: Float64Array;
  /** Drift before the pulse, at its start. */
  readonly drift_K_per_s: Float64Array;
  /** Skipped after the heater stopped. */
  readonly settle_s: Float64Array;
  /** Where drift lines read the step, after the start of the pulse; NaN for the other methods. */
  readonly step_s: Float64Array;
  /** Samples left out as spikes, of those under both fits. */
  readonly spikes: Int32Array;
}

/** A fitted curve, thinned. Both columns have one length. */
export interface FittedCurve {
  /** Seconds from the start of the pulse. */
  readonly time_s: Float64Array;
  readonly temperature_K: Float64Array;
}

/** What a figure of one pulse needs: samples thinned to a few hundred, fits on their own time axis. */
export interface PulsePicture {
  readonly pulse: number;
  readonly method: PulseMethod;
  /** Seconds from the start of the pulse. Length n. */
  readonly time_s: Float64Array;
  /** Length n. */
  readonly temperature_K: Float64Array;
  /** Sample less fit, length n; NaN where the sample lies under no fit. */
  readonly residual_K: Float64Array;
  /** Standard deviation of one sample about the fit; NaN without a fit. */
  readonly noise_K: number;
  /** Drift lines: one before, one after, each drawn on to the step. A forward model: one curve through all. */
  readonly fits: readonly FittedCurve[];
  /** Where samples were fitted, from the start of the pulse. */
  readonly windows: readonly { readonly from_s: number; readonly to_s: number }[];
  /** The step as read, from the start of the pulse; null where nothing was read. */
  readonly step: { readonly time_s: number; readonly from_K: number; readonly to_K: number } | null;
  readonly duration_s: number;
}
