import { median } from "simple-statistics";
import { SampleFlag, type StageLog } from "../ingest/types.js";
import type { TemperatureTrace } from "../thermometry/types.js";
import type { Contents } from "./cell-laws.js";
import { type Choice, chooseModel, type Evidence, evidenceOf, NO_EVIDENCE } from "./choose-method.js";
import type { PulsesConfig } from "./config.js";
import { type DriftBias, driftBias, smoothedLink } from "./drift-bias.js";
import { type DriftStep, type PulseSpan, readDriftStep } from "./drift-step.js";
import { flagBits } from "./flags.js";
import type { ForwardFit } from "./forward-fit.js";
import { type ForwardFits, fitForwardNight } from "./forward-night.js";
import type { HeaterPulses } from "./heater-pulses.js";
import { clearestJump } from "./jump.js";
import { pulsePicture } from "./picture.js";
import type { Transient } from "./prepared-transient.js";
import { type StageWindow, stageWindow } from "./stage-window.js";
import { PulseFlag, type PulseMethod, type PulsePicture, type PulseTable } from "./types.js";
import { sampleRange, samplingInterval_s, usableSamples } from "./window.js";

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
  /** null where nobody logs it. */
  readonly stage?: StageLog | null;
  /** Default: filled, with a body that nobody knows. */
  readonly contents?: Contents;
  /** What is left between the two clocks, k = 1. Default: a quarter of a sampling interval. */
  readonly u_clock_s?: number;
  /** Of each pulse's own start, where a sampled log shows it to its interval only. Default 0. */
  readonly u_start_s?: number;
  /** Lag of the thermometer behind the body; null: found where it matters. */
  readonly lag_s?: number | null;
  readonly verdicts: readonly Verdict[];
  readonly config: PulsesConfig;
}

export interface PulseAnalysis {
  readonly table: PulseTable;
  readonly pictures: readonly PulsePicture[];
}

/** One pulse, whichever way it was read. */
interface Reading {
  readonly method: PulseMethod;
  readonly drift: DriftStep | null;
  readonly bias: DriftBias | null;
  readonly fits: ForwardFits | null;
  /** null where `method` is drift. */
  readonly fit: ForwardFit | null;
  readonly evidence: Evidence;
  readonly Q_J: number;
  readonly T_before_K: number;
  readonly dT_K: number;
  /** Relative, of dT alone. */
  readonly u_dT: number;
  readonly link_W_per_K: number;
  readonly u_link_W_per_K: number;
}

/** A reading that jumps later than this after a pulse is cut off with the rest of the drift. */
const JUMP_S = 80;
/** A bias of this part of the uncertainty is not worth a model. */
const BIAS_SHARE = 0.2;

/**
 * Heat capacity of each pulse, with the doubts about it. No pulse is dropped: one that could not be read has NaN
 * where a number is missing, and a flag that says why.
 *
 * Every pulse is first read with drift lines, which is quick and tells how far they can be trusted; where they cannot, the
 * forward models are fitted, and evidence chooses.
 */
export function analysePulses(inputs: PulseInputs): PulseAnalysis {
  const { trace, heater, verdicts, config } = inputs;
  const stage = inputs.stage ?? null;
  const count = heater.pulse.length;
  const interval_s = samplingInterval_s(trace.time_s);
  const settleOption = config.settle === "auto" ? null : config.settle.value;
  const windowOption = config.window === "auto" ? null : config.window.value;
  const read: Omit<Transient, "sound">[] = [];
  for (let i = 0; i < count; i++) {
    const settled_s = read[i - 1]?.drift?.settle_s ?? settleOption ?? 2 * interval_s;
    const span = spanOf(heater, i, trace, settled_s);
    const dead = (heater.flag[i]! & PulseFlag.ZeroEnergy) !== 0;
    const drift = dead
      ? null
      : readDriftStep(trace, span, { settle_s: settleOption, window_s: windowOption, interval_s });
    read.push({ span, Q_J: heater.Q_J[i]!, drift });
  }
  const spans = read.map(({ span }) => span);
  const ordinary = ordinaryNight(heater, spans);
  const links = smoothedLink(
    read.map(({ drift }) => (drift === null ? Number.NaN : drift.T_before_K)),
    read.map(({ drift, span, Q_J }) => (drift === null ? Number.NaN : kinkLink_W_per_K(drift, span, Q_J))),
  );
  const biases = read.map(({ drift, span, Q_J }, i) =>
    drift === null
      ? null
      : driftBias(drift, span, {
          link_per_s: (links[i]! * (drift.T_after_K - drift.T_before_K)) / Q_J,
          lag_s: inputs.lag_s ?? 0,
          stage: stageOf(stage, span),
        }),
  );
  const transients = read.map((each, i): Transient => ({ ...each, sound: Number.isFinite(biases[i]?.left) }));
  const wanted = [...transients.keys()].filter((i) =>
    wantsModel(config, heater, transients[i]!, biases[i]!, i),
  );
  const fits = fitForwardNight(
    {
      trace,
      stage,
      contents: inputs.contents ?? { kind: "filled", body: null },
      interval_s,
      u_clock_s: inputs.u_clock_s ?? interval_s / 4,
      u_start_s: inputs.u_start_s ?? 0,
      lag_s: inputs.lag_s ?? null,
      window_s: windowOption,
    },
    transients,
    wanted,
  );
  const readings = transients.map((transient, i) =>
    readingOf(transient, biases[i]!, fits.get(i) ?? null, config.method),
  );
  const excluding = flagBits(config.exclude_flags);
  const column = (pick: (reading: Reading, i: number) => number): Float64Array =>
    Float64Array.from(readings, (reading, i) => (reading === null ? Number.NaN : pick(reading, i)));
  const ofTwo = (pick: (fit: ForwardFit) => number): Float64Array =>
    column(({ method, fit }) => (method === "two-body" && fit !== null ? pick(fit) : Number.NaN));

  const dT_K = column((r) => r.dT_K);
  const u_dT_K = column((r) => Math.abs(r.dT_K) * r.u_dT);
  const C = dT_K.map((dT, i) => heater.Q_J[i]! / dT);
  const flag = new Int32Array(count);
  const used = new Uint8Array(count);
  const reason = Array.from({ length: count }, () => "");
  for (let i = 0; i < count; i++) {
    flag[i] = doubts({ trace, heater, stage }, spans[i]!, readings[i]!, i, ordinary, config);
    const verdict = verdicts.find((word) => word.pulse === heater.pulse[i]);
    used[i] = (flag[i]! & excluding) === 0 ? 1 : 0;
    if (verdict !== undefined) {
      reason[i] = verdict.reason;
      used[i] = verdict.keep ? 1 : 0;
      if (!verdict.keep) flag[i]! |= PulseFlag.Vetoed;
    }
    // Nobody's word can make a number where there is none.
    if (!(C[i]! > 0) || !Number.isFinite(C[i]!) || !Number.isFinite(u_dT_K[i]!)) used[i] = 0;
  }

  const table: PulseTable = {
    pulse: heater.pulse,
    start_s: heater.start_s,
    duration_s: heater.duration_s,
    T_before_K: column((r) => r.T_before_K),
    T_after_K: column((r) => r.T_before_K + r.dT_K),
    T_K: column((r) => r.T_before_K + r.dT_K / 2),
    dT_K,
    // A model's C is the one at T itself: the bend of C within the step is part of it.
    mean_over_K: column((r) => (r.fit === null ? r.dT_K : 0)),
    u_dT_K,
    Q_J: heater.Q_J,
    u_Q_J: heater.u_Q_J,
    lead_heat_J: heater.lead_heat_J,
    heater_resistance_Ohm: heater.resistance_Ohm,
    C_total_J_per_K: C,
    u_C_total_J_per_K: C.map(
      (value, i) => Math.abs(value) * Math.hypot(u_dT_K[i]! / dT_K[i]!, heater.u_Q_J[i]! / heater.Q_J[i]!),
    ),
    method: readings.map((r) => r?.method ?? "drift"),
    drift_bias: Float64Array.from(biases, (bias) => bias?.left ?? Number.NaN),
    aic_drift: column((r) => r.evidence.drift),
    aic_two_body: column((r) => r.evidence.twoBody),
    aic_relaxation: column((r) => r.evidence.relaxation),
    link_W_per_K: column((r) => r.link_W_per_K),
    u_link_W_per_K: column((r) => r.u_link_W_per_K),
    boundary_time_s: ofTwo((fit) => fit.boundary_s),
    u_boundary_time_s: ofTwo((fit) => fit.u_boundary_s),
    boundary_W_per_K: ofTwo((fit) => fit.boundary_W_per_K),
    u_boundary_W_per_K: ofTwo((fit) => (fit.boundary_W_per_K * fit.u_boundary_s) / fit.boundary_s),
    flag,
    reason,
    used,
    noise_K: column((r) => r.fits?.samples.noise_K ?? r.drift!.after.noise_K),
    drift_K_per_s: column((r) => r.fit?.drift_K_per_s ?? r.drift!.before.slope_K_per_s(0)),
    settle_s: column((r) => r.drift?.settle_s ?? Number.NaN),
    step_s: column((r) => (r.fit === null ? r.drift!.step.time_s : Number.NaN)),
    spikes: Int32Array.from(readings, (r) => (r === null ? 0 : spikesOf(r))),
  };
  const pictures = spans.map((span, i) => pulsePicture(trace, heater.pulse[i]!, span, readings[i]!));
  return { table, pictures };
}

/** The body loses more heat after the pulse than before, by K·ΔT: the drifts differ by that over C. */
function kinkLink_W_per_K(
  { before, after, T_before_K, T_after_K }: DriftStep,
  span: PulseSpan,
  Q_J: number,
): number {
  const middle_s = (span.end_s - span.start_s) / 2;
  const kink_K_per_s = after.slope_K_per_s(middle_s) - before.slope_K_per_s(middle_s);
  return (-kink_K_per_s * Q_J) / (T_after_K - T_before_K) ** 2;
}

function stageOf(stage: StageLog | null, span: PulseSpan): StageWindow | null {
  if (stage === null) return null;
  return stageWindow(
    stage,
    span.start_s,
    span.earliest_s - span.start_s,
    span.latest_s - span.start_s,
    "as read",
  );
}

function wantsModel(
  config: PulsesConfig,
  heater: HeaterPulses,
  { drift, Q_J }: Transient,
  bias: DriftBias | null,
  i: number,
): boolean {
  if (config.method === "drift" || !(Q_J > 0) || !(heater.duration_s[i]! > 0)) return false;
  if (config.method !== "auto") return true;
  if (drift === null || bias === null) return true;
  const rise_K = drift.T_after_K - drift.T_before_K;
  // No rise, no model: what is not there is not fitted.
  if (!(rise_K > 5 * Math.min(drift.u_dT_K, drift.after.noise_K))) return false;
  const u_C = Math.hypot(drift.u_dT_K / rise_K, heater.u_Q_J[i]! / Q_J);
  return bias.left > BIAS_SHARE * u_C;
}

function readingOf(
  { drift, Q_J, span }: Transient,
  bias: DriftBias | null,
  fits: ForwardFits | null,
  method: PulsesConfig["method"],
): Reading | null {
  const lines = drift === null ? null : byDrift(drift, bias, Q_J, span);
  if (fits === null) return lines;
  const evidence = evidenceOf(fits, drift);
  const choice: Choice =
    method === "relaxation"
      ? { method, fit: fits.one, u_C: fits.one.u_C }
      : method === "two-body" && fits.two !== null
        ? { method, fit: fits.two, u_C: fits.two.u_C }
        : chooseModel(
            fits,
            evidence,
            lines === null ? Number.NaN : Q_J / lines.dT_K,
            lines === null ? Number.POSITIVE_INFINITY : lines.u_dT,
          );
  const { fit } = choice;
  if (fit === null) return { ...lines!, fits, evidence };
  return {
    method: choice.method,
    drift,
    bias,
    fits,
    fit,
    evidence,
    Q_J,
    // So that (T_before + T_after)/2 is where the fit's C holds.
    T_before_K: fit.T_K - Q_J / fit.C_J_per_K / 2,
    dT_K: Q_J / fit.C_J_per_K,
    u_dT: choice.u_C,
    link_W_per_K: fit.link_W_per_K,
    u_link_W_per_K: fit.u_link_W_per_K,
  };
}

function byDrift(drift: DriftStep, bias: DriftBias | null, Q_J: number, span: PulseSpan): Reading {
  const rise_K = drift.T_after_K - drift.T_before_K;
  const { lag, u_lag } = bias ?? { lag: 0, u_lag: 0 };
  const left = bias !== null && Number.isFinite(bias.left) ? bias.left : 0;
  const dT_K = rise_K * (1 + lag);
  return {
    method: "drift",
    drift,
    bias,
    fits: null,
    fit: null,
    evidence: NO_EVIDENCE,
    Q_J,
    T_before_K: drift.T_before_K,
    dT_K,
    // The step's own place enters both the rise read there and the lag, with the same sign.
    u_dT: Math.hypot(drift.u_dT_K / rise_K, u_lag, left),
    link_W_per_K: kinkLink_W_per_K(drift, span, Q_J),
    u_link_W_per_K: Number.NaN,
  };
}

function spikesOf({ fit, drift }: Reading): number {
  return fit === null ? drift!.before.spikes + drift!.after.spikes : fit.spikes;
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

interface Logs {
  readonly trace: TemperatureTrace;
  readonly heater: HeaterPulses;
  readonly stage: StageLog | null;
}

function doubts(
  { trace, heater, stage }: Logs,
  span: PulseSpan,
  reading: Reading | null,
  i: number,
  ordinary: OrdinaryNight,
  config: PulsesConfig,
): number {
  let flag = heater.flag[i]!;
  const off = Math.abs(heater.resistance_Ohm[i]! / ordinary.resistance_Ohm - 1);
  if (off > config.heater_resistance_tolerance) flag |= PulseFlag.HeaterResistance;
  if (Math.abs(heater.power_change[i]!) > config.largest_power_change) flag |= PulseFlag.HeaterUnsteady;
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
  if (reading === null) return flag | PulseFlag.NoData;

  const { dT_K: rise, T_before_K, u_dT, drift, fit } = reading;
  const share = rise / (T_before_K + rise / 2);
  // Three standard uncertainties: below that a rise is not told from none.
  if (share < config.smallest_rise || u_dT > 1 / 3) flag |= PulseFlag.RiseTooSmall;
  if (share > config.largest_rise) flag |= PulseFlag.RiseTooLarge;
  const slope = fit?.drift_K_per_s ?? drift!.before.slope_K_per_s(0);
  if (Math.abs(slope) * (span.end_s - span.start_s) > config.largest_drift_share * Math.abs(rise))
    flag |= PulseFlag.DriftTooStrong;
  const { samples, missing } = samplesUnder(trace, reading, span);
  if (missing > config.largest_missing_share * (samples + missing)) flag |= PulseFlag.SamplesMissing;
  if (spikesOf(reading) > config.largest_spike_share * samples) flag |= PulseFlag.Spikes;
  if (fit === null) {
    if (drift!.settle_s > config.largest_settle_share * window_s) flag |= PulseFlag.NotSettled;
    const window = stageOf(stage, span);
    const after_s = drift!.afterSamples.time_s[drift!.afterSamples.time_s.length - 1]!;
    const moved = window === null ? 0 : stageHeat(window, reading, span, after_s);
    if (moved > config.largest_stage_share) flag |= PulseFlag.StageNotSteady;
    const soon = sampleRange(trace.time_s, span.end_s, Math.min(span.latest_s, span.end_s + JUMP_S));
    if (clearestJump(usableSamples(trace, soon, span.end_s)) !== null) flag |= PulseFlag.ReadingJumps;
    return flag;
  }
  if (fit.boundary_s > config.largest_boundary_share * window_s) flag |= PulseFlag.SlowBoundary;
  if (fit.misfit * reading.fits!.samples.noise_K > config.largest_misfit * Math.abs(rise))
    flag |= PulseFlag.Unexplained;
  return flag;
}

/** Usable samples under the fit, and those of its windows that carry no temperature. */
function samplesUnder(trace: TemperatureTrace, { drift, fit, fits }: Reading, span: PulseSpan) {
  if (fit === null) {
    return {
      samples: drift!.before.samples + drift!.after.samples,
      missing: drift!.beforeSamples.missing + drift!.afterSamples.missing,
    };
  }
  const { time_s, count } = fits!.samples;
  const samples = count.reduce((sum, n) => sum + n, 0);
  const range = sampleRange(
    trace.time_s,
    span.start_s + time_s[0]!,
    span.start_s + time_s[time_s.length - 1]!,
  );
  let missing = 0;
  for (let j = range.from; j < range.to; j++) if (trace.flag[j] !== 0) missing++;
  return { samples, missing };
}

/** Heat that came over the link because the stage was elsewhere between the two drifts, relative to the rise. */
function stageHeat(window: StageWindow, reading: Reading, span: PulseSpan, after_s: number): number {
  const { drift, Q_J, link_W_per_K } = reading;
  const settled_s = span.end_s - span.start_s + drift!.settle_s;
  const before = window.mean_K(drift!.beforeSamples.time_s[0]!, 0);
  const during = window.mean_K(0, settled_s);
  const after = window.mean_K(settled_s, after_s);
  const moved_K = Math.max(Math.abs(during - before), Math.abs(during - after));
  return Math.abs((link_W_per_K * moved_K * settled_s) / Q_J);
}
