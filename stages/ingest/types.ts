/** Why a thermometer sample carries no temperature, bit by bit; words in flag-words.ts. */
export const SampleFlag = {
  OverRange: 1,
  NotANumber: 2,
  TimeNotIncreasing: 4,
  Ragged: 8,
  Excluded: 16,
  OutsideCalibration: 32,
} as const;

/** One night's thermometer log. Every column has length n; flagged samples stay, their resistance NaN. */
export interface ThermometerLog {
  /** From the night's origin; non-decreasing where `flag` has no TimeNotIncreasing bit. */
  readonly time_s: Float64Array;
  readonly resistance_Ohm: Float64Array;
  /** Bits of SampleFlag. */
  readonly flag: Uint8Array;
}

/** One row a pulse. Every column has length n. */
export interface HeaterEvents {
  readonly kind: "events";
  /** Start of the pulse on the heater's clock, from the night's origin. */
  readonly time_s: Float64Array;
  readonly duration_s: Float64Array;
  readonly current_A: Float64Array;
  readonly voltage_V: Float64Array;
}

/** Current and voltage against time. Every column has length n; unusable samples are NaN in both. */
export interface HeaterSamples {
  readonly kind: "sampled";
  readonly time_s: Float64Array;
  readonly current_A: Float64Array;
  readonly voltage_V: Float64Array;
}
export type HeaterLog = HeaterEvents | HeaterSamples;

/** Temperature of the stage the cell hangs from. Every column has length n. */
export interface StageLog {
  readonly time_s: Float64Array;
  readonly temperature_K: Float64Array;
}

/** Something a person should know about a log; never an error. */
export interface Note {
  readonly file: string;
  /** 1-based line of the first occurrence, where it has one. */
  readonly line?: number;
  readonly count: number;
  readonly text: string;
}

/** What one log file held. */
export interface LogSummary {
  readonly log: "thermometer" | "heater" | "stage";
  readonly file: string;
  readonly rows: number;
  readonly usable: number;
  readonly from_s: number;
  readonly to_s: number;
  /** Spans without a usable sample, longer than 10 sampling intervals. */
  readonly gaps: readonly { readonly from_s: number; readonly to_s: number }[];
  readonly dialect: { readonly delimiter: string; readonly decimal: "." | "," };
}

/** All logs of one night on one time axis. */
export interface RawNight {
  readonly thermometer: ThermometerLog;
  readonly heater: HeaterLog;
  readonly stage: StageLog | null;
  /** Unix time of time_s = 0 where the logs carry absolute times, else null. */
  readonly origin_epoch_s: number | null;
  readonly notes: readonly Note[];
  readonly summaries: readonly LogSummary[];
}
