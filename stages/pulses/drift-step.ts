import type { TemperatureTrace } from "../thermometry/types.js";
import { type DriftFit, fitDrift } from "./drift.js";
import { equalAreaTime, type StepTime } from "./equal-area.js";
import { quietStretch } from "./quiet-stretch.js";
import { type Samples, sampleRange, usableSamples } from "./window.js";

/** One pulse among its neighbours, on the thermometer's clock. */
export interface PulseSpan {
  readonly start_s: number;
  readonly end_s: number;
  /** Where the drift before may begin: the pulse before has ended and settled. */
  readonly earliest_s: number;
  /** Where the drift after must end: the next pulse, or the log. */
  readonly latest_s: number;
}

export interface DriftOptions {
  /** null: found from the trace. */
  readonly settle_s: number | null;
  /** Longest drift window; null: up to the neighbouring pulses. */
  readonly window_s: number | null;
  readonly interval_s: number;
}

/** A temperature step read between two drifts. Times from the start of the pulse. */
export interface DriftStep {
  readonly before: DriftFit;
  readonly after: DriftFit;
  readonly beforeSamples: Samples;
  readonly afterSamples: Samples;
  readonly step: StepTime;
  readonly settle_s: number;
  readonly T_before_K: number;
  readonly T_after_K: number;
  readonly u_dT_K: number;
}

/** A cubic bends as an exponential decay does over one of its time constants; more is not asked of a drift. */
const HIGHEST_DEGREE = 3;
export const FEWEST_SAMPLES = 8;

/** @returns null where either window holds fewer than FEWEST_SAMPLES usable samples */
export function readDriftStep(
  trace: TemperatureTrace,
  span: PulseSpan,
  options: DriftOptions,
): DriftStep | null {
  const { start_s, end_s } = span;
  const longest = options.window_s ?? Number.POSITIVE_INFINITY;
  const { time_s } = trace;
  const beforeFrom = Math.max(span.earliest_s, start_s - longest);
  const within = (from_s: number, to_s: number): Samples =>
    usableSamples(trace, sampleRange(time_s, from_s, to_s), start_s);
  const afterTo = Math.min(span.latest_s, end_s + longest);
  const head = within(beforeFrom, start_s);
  const tail = within(end_s, afterTo);
  if (head.time_s.length < FEWEST_SAMPLES || tail.time_s.length < FEWEST_SAMPLES) return null;
  const quietBefore = quietStretch(head, "end", 0);
  const quietAfter = quietStretch(tail, "start", options.settle_s ?? 2 * options.interval_s);
  if (quietBefore === null || quietAfter === null) return null;
  const settled_s = options.settle_s === null ? start_s + quietAfter.from_s : end_s + options.settle_s;
  const beforeSamples = within(start_s + quietBefore.from_s, start_s);
  const afterSamples = within(settled_s, start_s + quietAfter.to_s);
  if (beforeSamples.time_s.length < FEWEST_SAMPLES || afterSamples.time_s.length < FEWEST_SAMPLES)
    return null;
  const settle_s = settled_s - end_s;

  const before = fitDrift(beforeSamples, degreeFor(beforeSamples));
  const after = fitDrift(afterSamples, degreeFor(afterSamples));
  const during = usableSamples(trace, sampleRange(time_s, start_s, settled_s), start_s);
  const step = equalAreaTime(before, after, during, 0, settled_s - start_s, end_s - start_s);
  const t = step.time_s;
  const kink = after.slope_K_per_s(t) - before.slope_K_per_s(t);
  return {
    before,
    after,
    beforeSamples,
    afterSamples,
    step,
    settle_s,
    T_before_K: before.value_K(t),
    T_after_K: after.value_K(t),
    u_dT_K: Math.hypot(before.u_K(t), after.u_K(t), kink * step.u_s),
  };
}

function degreeFor(samples: Samples): number {
  // Five samples a parameter, else the criterion has nothing to judge by.
  return Math.max(1, Math.min(HIGHEST_DEGREE, Math.floor(samples.time_s.length / 5) - 1));
}
