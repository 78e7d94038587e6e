import type { StageLog } from "../ingest/types.js";
import type { TemperatureTrace } from "../thermometry/types.js";
import type { Contents } from "./cell-laws.js";
import { type DriftStep, FEWEST_SAMPLES, type PulseSpan } from "./drift-step.js";
import { medianOf } from "./order.js";
import { type StageWindow, stageWindow } from "./stage-window.js";
import { type TransientSamples, thinTransient } from "./transient-samples.js";
import { type Samples, sampleRange, usableSamples } from "./window.js";

/** One pulse as the forward models need it. */
export interface Transient {
  readonly span: PulseSpan;
  readonly Q_J: number;
  readonly drift: DriftStep | null;
  /** The drift lines' own bias is bounded: their C may serve as a first idea of how C changes. */
  readonly sound: boolean;
}

/** What a night is to the forward models. */
export interface ForwardNight {
  readonly trace: TemperatureTrace;
  readonly stage: StageLog | null;
  readonly contents: Contents;
  readonly interval_s: number;
  /** Between the two clocks, the same for all pulses; k = 1. */
  readonly u_clock_s: number;
  /** Of each pulse's own start, where a sampled log shows it to its interval only; 0 for events. */
  readonly u_start_s: number;
  /** null: found from the night. */
  readonly lag_s: number | null;
  /** Longest stretch on either side of a pulse; null: up to its neighbours. */
  readonly window_s: number | null;
}

/** Samples of one transient, thinned, and a first idea of its numbers. */
export interface Prepared {
  readonly samples: TransientSamples;
  readonly T_K: number;
  readonly Q_J: number;
  readonly duration_s: number;
  readonly C_J_per_K: number;
  readonly link_per_s: number;
  readonly drift_K_per_s: number;
  readonly start_K: number;
  /** By how much the equal areas put the step before mid-pulse: the overheating of the body, in seconds. */
  readonly early_s: number;
  readonly rise_K: number;
  /** As seen at the window's end, where body and liquid have come together. */
  readonly lateRise_K: number;
  /** Until what is over that level has fallen to 1/e after the heating. */
  readonly settling_s: number;
  /** From the end of the pulse before to the first sample; Infinity for the first pulse. */
  readonly rested_s: number;
  /** The liquid may be off its rest by about as much as the pulse before lifted the body. */
  readonly previousRise_K: number;
}

/**
 * How far from its start, in parts of the highest rise, a transient is looked at: power laws hold so far, and what lies
 * beyond is another pulse's overheating before it, a stage's step after it.
 */
const EXCURSION = { before: 0.25, after: 1.5 };
const BLOCK = 7;
/** A move of the stage, in parts of the highest rise, that ends a window. */
const STAGE_STEP = 0.02;

/**
 * @param window "wide": from the pulse before to the next, for the model holds all that; "quiet": no further than the
 * drift lines went, where something happens that no log shows
 * @returns null where there are too few samples on either side
 */
export function prepare(
  night: ForwardNight,
  transient: Transient,
  previous: Transient | undefined,
  window: "wide" | "quiet",
): Prepared | null {
  const { trace, stage, interval_s } = night;
  const { span, Q_J, drift } = transient;
  const duration_s = span.end_s - span.start_s;
  const previousEnd_s = previous?.span.end_s ?? Number.NEGATIVE_INFINITY;
  const longest_s = night.window_s ?? Number.POSITIVE_INFINITY;
  const quiet = window === "quiet" && drift !== null ? drift : null;
  const rested_s = previousEnd_s + 3 * interval_s + 5 * (night.lag_s ?? 0);
  // Without a log of the stage, a drift that was cut short of the pulse before was cut by a step of the stage.
  const plain_s = drift === null ? Number.NEGATIVE_INFINITY : span.start_s + drift.beforeSamples.time_s[0]!;
  const cut = stage === null && plain_s > span.earliest_s + 4 * interval_s;
  const from_s =
    cut || quiet !== null ? plain_s : Math.max(trace.time_s[0]!, span.start_s - longest_s, rested_s);
  const to_s =
    quiet === null
      ? Math.min(span.latest_s, span.end_s + longest_s)
      : span.start_s + quiet.afterSamples.time_s[quiet.afterSamples.time_s.length - 1]!;
  const all = usableSamples(trace, sampleRange(trace.time_s, from_s, to_s), span.start_s);
  const levels = levelsOf(all, duration_s);
  if (levels === null) return null;
  const stageOf =
    stage === null
      ? null
      : stageWindow(stage, span.start_s, from_s - span.start_s, to_s - span.start_s, "quietened");
  const samples = atOneStage(nearTo(all, levels, duration_s), stageOf, levels, duration_s);
  const { late_K, settling_s } = lateOf(samples, duration_s);
  const thin = thinTransient(samples, duration_s, interval_s, previousEnd_s - span.start_s, stageOf);
  const { time_s } = thin;
  if (!(time_s[0]! < 0) || !(time_s[time_s.length - 1]! > duration_s)) return null;
  const read = drift === null ? late_K - levels.before_K : drift.T_after_K - drift.T_before_K;
  const rise_K = Math.max(read, 3 * thin.noise_K);
  const middle_s = duration_s / 2;
  const kink =
    drift === null ? 0 : drift.after.slope_K_per_s(middle_s) - drift.before.slope_K_per_s(middle_s);
  return {
    samples: thin,
    T_K: levels.before_K + rise_K / 2,
    Q_J,
    duration_s,
    C_J_per_K: Q_J / rise_K,
    lateRise_K: Math.max(late_K - levels.before_K, 3 * thin.noise_K),
    settling_s,
    link_per_s: Math.max(0, -kink / rise_K),
    drift_K_per_s: drift === null ? 0 : drift.before.slope_K_per_s(0),
    start_K: thin.temperature_K[0]!,
    early_s: drift === null ? 0 : middle_s - drift.step.time_s,
    rise_K,
    rested_s: from_s - previousEnd_s,
    previousRise_K: levels.peak_K - levels.before_K,
  };
}

interface Levels {
  /** Just before the pulse, and highest in it or right after: a body is hottest when its heater stops. */
  readonly before_K: number;
  readonly peak_K: number;
}

/** A first look by medians of a few samples, which no spike disturbs; null where there are too few on either side. */
function levelsOf({ time_s: t, temperature_K: T }: Samples, duration_s: number): Levels | null {
  const begin = t.findIndex((time) => time >= 0);
  const end = t.findIndex((time) => time >= duration_s);
  if (begin < FEWEST_SAMPLES || end < 0 || t.length - end < FEWEST_SAMPLES) return null;
  const size = Math.min(BLOCK, begin, t.length - end);
  const middle = (from: number): number => medianOf(T.slice(from, from + size));
  let peak_K = middle(end);
  for (let i = begin; i + size <= t.length && (t[i]! < 2 * duration_s || i < end + BLOCK); i++)
    peak_K = Math.max(peak_K, middle(i));
  return { before_K: middle(begin - size), peak_K };
}

/** Level at the window's end, and when what is over it after the heating has fallen to 1/e. */
function lateOf({ time_s: t, temperature_K: T }: Samples, duration_s: number) {
  const end = t.findIndex((time) => time >= duration_s);
  const size = Math.min(BLOCK, t.length - end);
  const middle = (from: number): number => medianOf(T.slice(from, from + size));
  const late_K = middle(t.length - size);
  const over_K = middle(end) - late_K;
  let settled = end;
  while (settled + size < t.length && middle(settled) - late_K > over_K / Math.E) settled++;
  return { late_K, settling_s: t[settled]! - duration_s };
}

/**
 * The stage's steps between set points are many rises high, and a log that is read every few seconds does not show their
 * shape well enough: within one reading of a step the link may carry a per cent of the pulse's heat.
 */
function atOneStage(
  samples: Samples,
  stage: StageWindow | null,
  { before_K, peak_K }: Levels,
  duration_s: number,
): Samples {
  if (stage === null) return samples;
  const { time_s: t, temperature_K: T } = samples;
  const n = t.length;
  const limit_K = STAGE_STEP * (peak_K - before_K);
  // From where it was on this side of the pulse: a step within the pulse must be taken with it.
  const before = stage.mean_K(-duration_s, 0);
  const after = stage.mean_K(duration_s, 2 * duration_s);
  const steady = (i: number): boolean =>
    Math.abs(stage.mean_K(t[i]!, t[i]!) - (t[i]! < 0 ? before : after)) < limit_K;
  const begin = t.findIndex((time) => time >= 0);
  const end = t.findIndex((time) => time >= duration_s);
  let from = Math.max(0, begin - FEWEST_SAMPLES);
  while (from > 0 && steady(from - 1)) from--;
  let to = Math.min(n, end + FEWEST_SAMPLES);
  while (to < n && steady(to)) to++;
  return { time_s: t.subarray(from, to), temperature_K: T.subarray(from, to), missing: samples.missing };
}

/** The samples from the last excursion before the pulse to the first after it. */
function nearTo(samples: Samples, { before_K, peak_K }: Levels, duration_s: number): Samples {
  const { time_s: t, temperature_K: T } = samples;
  const highest_K = peak_K - before_K;
  const n = t.length;
  if (n < 2 * BLOCK || !(highest_K > 0)) return samples;
  let from = 0;
  let to = n;
  for (let i = 0; i + BLOCK <= n; i++) {
    const reach_K = highest_K * (t[i]! < 0 ? EXCURSION.before : EXCURSION.after);
    let off = 0;
    for (let k = i; k < i + BLOCK; k++) if (Math.abs(T[k]! - before_K) > reach_K) off++;
    // One spike is no excursion.
    if (2 * off < BLOCK) continue;
    if (t[i + BLOCK - 1]! < 0) from = i + BLOCK;
    else if (t[i]! > duration_s) {
      to = i;
      break;
    }
  }
  return { time_s: t.subarray(from, to), temperature_K: T.subarray(from, to), missing: samples.missing };
}
