import { type ForwardFit, fitForward } from "./forward-fit.js";
import { type Common, planOf } from "./forward-plan.js";
import type { Laws } from "./night-laws.js";
import { type ForwardNight, type Prepared, prepare, type Transient } from "./prepared-transient.js";

/** One transient, its window chosen, fitted as if clock and thermometer were right but for what is known of them. */
export interface FirstFit {
  readonly at: Prepared;
  readonly fit: ForwardFit;
}

export const bodiesOf = (night: ForwardNight): "one" | "two" =>
  night.contents.kind === "empty" ? "one" : "two";

/** A misfit of half the noise of a sample: worth another start, or a shorter window. */
const POOR = 0.5;
/** A shorter window may cost this much certainty, no more. */
const DEARER = 1.5;

/**
 * Where to begin: by the drift lines' numbers or, where those do not fit, by how the trace settles. The window is the
 * widest; where something happened in it that no log shows, drift lines' own window fits far better and costs little.
 * @returns null where there are too few samples
 */
export function firstFit(
  night: ForwardNight,
  transient: Transient,
  previous: Transient | undefined,
  laws: Laws,
): FirstFit | null {
  const wide = fitWindow(night, prepare(night, transient, previous, "wide"), laws);
  if (wide !== null && wide.fit.misfit < POOR) return wide;
  const quiet = fitWindow(night, prepare(night, transient, previous, "quiet"), laws);
  if (wide === null || quiet === null) return wide ?? quiet;
  // A stage that nobody logs may have stepped in the wide window, and a fit may follow it anyhow.
  if (night.stage === null) return quiet;
  const better = quiet.fit.misfit < wide.fit.misfit / 2 && quiet.fit.u_C < DEARER * wide.fit.u_C;
  return better ? quiet : wide;
}

function fitWindow(night: ForwardNight, at: Prepared | null, laws: Laws): FirstFit | null {
  if (at === null) return null;
  const common: Common = {
    shift: { value: 0, u: Math.hypot(night.u_clock_s, night.u_start_s) },
    lag: { value: night.lag_s ?? 0, u: 0 },
  };
  const by = (by: "drift" | "settling"): ForwardFit =>
    fitForward(at.samples, planOf(night, at, bodiesOf(night), { laws, common, before: null, by }));
  const drift = by("drift");
  if (drift.misfit < POOR || bodiesOf(night) === "one") return { at, fit: drift };
  const settling = by("settling");
  return { at, fit: settling.score < drift.score ? settling : drift };
}
