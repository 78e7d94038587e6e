/** One night's cell temperature. Every column has length n, the thermometer log's own. */
export interface TemperatureTrace {
  readonly time_s: Float64Array;
  /** NaN where `flag` is not 0. */
  readonly temperature_K: Float64Array;
  /** Bits of SampleFlag (ingest/types.ts). */
  readonly flag: Uint8Array;
}

/** A thermometer's own R → T, whichever form it was given in. */
export interface ResistanceCurve {
  readonly form: "table" | "log-polynomial" | "chebyshev";
  readonly resistanceRange_Ohm: readonly [number, number];
  readonly temperatureRange_K: readonly [number, number];
  /** @returns K; NaN outside the calibrated range, never an extrapolation. */
  temperature_K(resistance_Ohm: number): number;
}

/** The sensor's own warmth above the body it measures: T_sensor = T_body + P·R_th(T_body). */
export interface SelfHeating {
  /** What the reading puts into the sensor. */
  power_W(resistance_Ohm: number): number;
  /** R_th, a power law of the body's temperature. */
  resistance_K_per_W(temperature_K: number): number;
  readonly powerLaw: number;
  /** Relative standard uncertainty of P·R_th, common to all samples. */
  readonly u_relative: number;
}

/** The curve and all else that is known of the thermometer. */
export interface Calibration extends ResistanceCurve {
  /** Name of the temperature scale; travels with the data. */
  readonly scale: string;
  /** k = 1, taken as common to all temperatures. */
  readonly u_temperature_K: number;
  /**
   * Relative standard uncertainty of a difference of two temperatures, common to all pulses: a heat capacity Q/ΔT
   * changes by −u_slope of itself.
   */
  readonly u_slope: number;
  /** Time by which the sensor follows the body; null where it is left to be read from the trace. */
  readonly lag_s: number | null;
  /** k = 1; 0 where `lag_s` is null. */
  readonly u_lag_s: number;
  /** Taken off in toTemperature; `temperature_K` above is the sensor's own. null: none. */
  readonly selfHeating: SelfHeating | null;
}
