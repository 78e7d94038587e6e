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
}
