import { median } from "simple-statistics";
import { SampleFlag } from "../ingest/types.js";
import type { TemperatureTrace } from "../thermometry/types.js";
import type { PulsesConfig } from "./config.js";
import { type DriftStep, type PulseSpan, readDriftStep } from "./drift-step.js";
import { flagBits } from "./flags.js";
import type { HeaterPulses } from "./heater-pulses.js";
import { pulsePicture } from "./picture.js";
import { PulseFlag, type PulseMethod, type PulsePicture, type PulseTable } from "./types.js";
import { sampleRange, samplingInterval_s } from "./window.js";

/** A person's word on a pulse: out, or in spite of its flags in. */
export interface Verdict {
  readonly pulse: number;
  readonly reason: string;
  readonly keep: boolean;
}

export interface PulseInputs {
  readonly trace: TemperatureTrace;
  /** On the thermometer's clock. */
  readonly heater: HeaterPulses;
  readonly verdicts: readonly Verdict[];
  readonly config: PulsesConfig;
}

export interface PulseAnalysis {
  readonly table: PulseTable;
  readonly pictures: readonly PulsePicture[];
}

/**
 * Heat capacity of each pulse, Q/ΔT, with the doubts about it. No pulse is dropped: one that could not be read
 * has NaN where a number is missing, and a flag that says why.
 */
export function analysePulses({ trace, heater, verdicts, config }: PulseInputs): PulseAnalysis {
  const count = heater.pulse.length;
  const interval_s = samplingInterval_s(trace.time_s);
  const settleOption = config.settle === "auto" ? null : config.settle.value;
  const windowOption = config.window === "auto" ? null : config.window.value;
  const spans: PulseSpan[] = [];
  const results: (DriftStep | null)[] = [];
  for (let i = 0; i < count; i++) {
    const span = spanOf(heater, i, trace, results[i - 1]?.settle_s ?? settleOption ?? 2 * interval_s);
    spans.push(span);
    results.push(
      (heater.flag[i]! & PulseFlag.ZeroEnergy) !== 0
        ? null
        : readDriftStep(trace, span, { settle_s: settleOption, window_s: windowOption, interval_s }),
    );
  }
  const ordinary = ordinaryNight(heater, spans);
  const excluding = flagBits(config.exclude_flags);
  const column = (pick: (result: DriftStep, i: number) => number): Float64Array =>
    Float64Array.from(results, (result, i) => (result === null ? Number.NaN : pick(result, i)));

  const dT_K = column((r) => r.T_after_K - r.T_before_K);
  const u_dT_K = column((r) => r.u_dT_K);
  const C = dT_K.map((dT, i) => heater.Q_J[i]! / dT);
  const flag = new Int32Array(count);
  const used = new Uint8Array(count);
  const reason = Array.from({ length: count }, () => "");
  for (let i = 0; i < count; i++) {
    flag[i] = doubts(trace, heater, spans[i]!, results[i]!, i, ordinary, config);
    const verdict = verdicts.find((word) => word.pulse === heater.pulse[i]);
    used[i] = (flag[i]! & excluding) === 0 ? 1 : 0;
    if (verdict !== undefined) {
      reason[i] = verdict.reason;
      used[i] = verdict.keep ? 1 : 0;
      if (!verdict.keep) flag[i]! |= PulseFlag.Vetoed;
    }
    // Nobody's word can make a number where there is none.
    if (!(C[i]! > 0) || !Number.isFinite(C[i]!)) used[i] = 0;
  }

  const table: PulseTable = {
    pulse: heater.pulse,
    start_s: heater.start_s,
    duration_s: heater.duration_s,
    T_before_K: column((r) => r.T_before_K),
    T_after_K: column((r) => r.T_after_K),
    T_K: column((r) => (r.T_before_K + r.T_after_K) / 2),
    dT_K,
    mean_over_K: dT_K,
    u_dT_K,
    Q_J: heater.Q_J,
    u_Q_J: heater.u_Q_J,
    lead_heat_J: heater.lead_heat_J,
    heater_resistance_Ohm: heater.resistance_Ohm,
    C_total_J_per_K: C,
    u_C_total_J_per_K: C.map(
      (value, i) => Math.abs(value) * Math.hypot(u_dT_K[i]! / dT_K[i]!, heater.u_Q_J[i]! / heater.Q_J[i]!),
    ),
    method: results.map((): PulseMethod => "drift"),
    flag,
    reason,
    used,
    noise_K: column((r) => r.after.noise_K),
    drift_K_per_s: column((r) => r.before.slope_K_per_s(0)),
    settle_s: column((r) => r.settle_s),
    step_s: column((r) => r.step.time_s),
    spikes: Int32Array.from(results, (r) => (r === null ? 0 : r.before.spikes + r.after.spikes)),
  };
  const pictures = spans.map((span, i) => pulsePicture(trace, heater.pulse[i]!, span, results[i]!));
  return { table, pictures };
}

function spanOf(heater: HeaterPulses, i: number, trace: TemperatureTrace, settleBefore_s: number): PulseSpan {
  const start_s = heater.start_s[i]!;
  const first_s = trace.time_s[0] ?? Number.NaN;
  const last_s = trace.time_s[trace.time_s.length - 1] ?? Number.NaN;
  const previousEnd = i === 0 ? Number.NEGATIVE_INFINITY : heater.start_s[i - 1]! + heater.duration_s[i - 1]!;
  const next = i + 1 < heater.start_s.length ? heater.start_s[i + 1]! : Number.POSITIVE_INFINITY;
  return {
    start_s,
    end_s: start_s + heater.duration_s[i]!,
    earliest_s: Math.max(first_s, previousEnd + settleBefore_s),
    latest_s: Math.min(last_s, next),
  };
}

/** What a pulse of this night looks like, to tell the odd ones by. */
interface OrdinaryNight {
  readonly resistance_Ohm: number;
  readonly window_s: number;
}

function ordinaryNight(heater: HeaterPulses, spans: readonly PulseSpan[]): OrdinaryNight {
  const middle = (values: number[]): number => (values.length === 0 ? Number.NaN : median(values));
  return {
    resistance_Ohm: middle([...heater.resistance_Ohm].filter(Number.isFinite)),
    window_s: middle(spans.map((span) => span.latest_s - span.end_s).filter(Number.isFinite)),
  };
}

function doubts(
  trace: TemperatureTrace,
  heater: HeaterPulses,
  span: PulseSpan,
  result: DriftStep | null,
  i: number,
  ordinary: OrdinaryNight,
  config: PulsesConfig,
): number {
  let flag = heater.flag[i]!;
  const off = Math.abs(heater.resistance_Ohm[i]! / ordinary.resistance_Ohm - 1);
  if (off > config.heater_resistance_tolerance) flag |= PulseFlag.HeaterResistance;
  const window_s = span.latest_s - span.end_s;
  if (window_s < 0.5 * ordinary.window_s || span.start_s - span.earliest_s < 0.1 * ordinary.window_s) {
    flag |= PulseFlag.Truncated;
  }
  const range = sampleRange(trace.time_s, span.earliest_s, span.latest_s);
  for (let j = range.from; j < range.to; j++) {
    if ((trace.flag[j]! & SampleFlag.OutsideCalibration) !== 0) {
      flag |= PulseFlag.OutsideCalibration;
      break;
    }
  }
  if (result === null) return flag | PulseFlag.NoData;

  const rise = result.T_after_K - result.T_before_K;
  const share = rise / ((result.T_after_K + result.T_before_K) / 2);
  // Three standard uncertainties: below that a rise is not told from none.
  if (share < config.smallest_rise || rise < 3 * result.u_dT_K) flag |= PulseFlag.RiseTooSmall;
  if (share > config.largest_rise) flag |= PulseFlag.RiseTooLarge;
  const drift_K = Math.abs(result.before.slope_K_per_s(0)) * (span.end_s - span.start_s);
  if (drift_K > config.largest_drift_share * Math.abs(rise)) flag |= PulseFlag.DriftTooStrong;
  if (result.settle_s > config.largest_settle_share * window_s) flag |= PulseFlag.NotSettled;
  const samples = result.before.samples + result.after.samples;
  const missing = result.beforeSamples.missing + result.afterSamples.missing;
  if (missing > config.largest_missing_share * (samples + missing)) flag |= PulseFlag.SamplesMissing;
  if (result.before.spikes + result.after.spikes > config.largest_spike_share * samples)
    flag |= PulseFlag.Spikes;
  return flag;
}
