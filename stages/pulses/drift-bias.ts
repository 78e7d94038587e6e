import type { DriftStep, PulseSpan } from "./drift-step.js";
import { medianOf } from "./order.js";
import type { StageWindow } from "./stage-window.js";
import type { Samples } from "./window.js";

/** What drift lines with equal areas leave out, as far as they themselves can tell. All relative to C. */
export interface DriftBias {
  /**
   * Lag of the liquid, which the drift after the pulse holds fixed: C is too high by this much. Known, so corrected.
   */
  readonly lag: number;
  readonly u_lag: number;
  /** What is left after the correction, at most; Infinity where settling or something else takes a fair part of the window. */
  readonly left: number;
}

/** Settling this long a part of the window is a second body that the lines cannot hold. */
const SETTLE_SHARE = 0.06;
const NEIGHBOURS = 15;
/** A drift after the pulse that holds for less than this part of the time to the next is none of a quiet night's. */
const SHORT_SHARE = 0.2;
/** A lag above this is found by a model, not by its first order. */
const LARGEST_LAG = 2e-3;

/**
 * Two bodies in a linear world: with the liquid's share l = C_l/C, the body overheats by P·l²/G while heated, and the
 * area of it over all time is Q·l²/G whatever the boundary time. Equal areas therefore put the step early by
 * ε = C·l²/G. Afterwards the liquid lags by the heat of its own drift, which the body's drift lines do not see: the
 * mean temperature rises by (1 + C·l²/(G·τ)) = (1 + ε/τ) times the body's rise, τ = C/K. So the lines themselves tell
 * their error: ε from the equal areas, 1/τ from the kink between the drifts.
 */
export function driftBias(
  step: DriftStep,
  span: PulseSpan,
  known: { readonly link_per_s: number; readonly lag_s: number; readonly stage: StageWindow | null },
): DriftBias {
  const { before, after, beforeSamples, afterSamples, settle_s } = step;
  const { link_per_s, lag_s, stage } = known;
  const duration_s = span.end_s - span.start_s;
  const rise_K = step.T_after_K - step.T_before_K;
  // With one body alone the areas are equal a little after the middle: (eˣ − 1)/x = e^{t/τ}, x = duration/τ.
  const alone_s = duration_s / 2 + (duration_s ** 2 * link_per_s) / 24;
  const early_s = step.step.by === "mid-pulse" ? 0 : alone_s + lag_s - step.step.time_s;
  const lag = early_s * link_per_s;
  const rate = Math.abs(link_per_s);
  const spanBefore_s = lengthOf(beforeSamples);
  const spanAfter_s = lengthOf(afterSamples);
  const between_s = duration_s + settle_s;
  const slope = Math.abs(before.slope_K_per_s(0));
  // The exponential before has the height slope·τ; for a cell without a link that is 0/0, and it is a line.
  const heightBefore = rate > 0 ? Math.min(10, slope / rate / Math.abs(rise_K)) : 0;
  const bend =
    heightBefore * truncation(before.degree, rate * spanBefore_s, (2 * duration_s) / spanBefore_s) +
    truncation(after.degree, rate * spanAfter_s, (2 * between_s) / spanAfter_s);
  const travel_K = stage === null ? 0 : stageTravel_K(stage, -spanBefore_s, between_s + spanAfter_s);
  const moved = (rate * (between_s + spanAfter_s / 10) * travel_K) / Math.abs(rise_K);
  const secondOrder = Math.abs(lag) * Math.max(0.05, rate * between_s);
  const settling = settle_s > SETTLE_SHARE * (settle_s + spanAfter_s) || Math.abs(lag) > LARGEST_LAG;
  const short = spanAfter_s < SHORT_SHARE * (span.latest_s - span.end_s);
  return {
    lag,
    u_lag: step.step.u_s * rate,
    left: settling || short ? Number.POSITIVE_INFINITY : bend + moved + secondOrder,
  };
}

/**
 * Conductance of the link from the kink between the drifts, W/K, one a pulse: K/T as the median over the nearest
 * pulses in T, since one kink alone is little more than noise where the link is weak, while the link changes slowly. What
 * the scatter of those kinks could make of no link at all is taken off, else a quiet night would seem to leak.
 * @param T_K, link_W_per_K length n; NaN where there is none
 */
export function smoothedLink(T_K: readonly number[], link_W_per_K: readonly number[]): Float64Array {
  const known = [...T_K.keys()].filter((i) => Number.isFinite(link_W_per_K[i]!) && T_K[i]! > 0);
  known.sort((a, b) => T_K[a]! - T_K[b]!);
  const out = new Float64Array(T_K.length);
  known.forEach((row, rank) => {
    const from = Math.max(0, Math.min(known.length - NEIGHBOURS, rank - (NEIGHBOURS >> 1)));
    const near = Float64Array.from(known.slice(from, from + NEIGHBOURS), (i) => link_W_per_K[i]! / T_K[i]!);
    const middle = medianOf(near.slice());
    const scatter = 1.4826 * medianOf(near.map((value) => Math.abs(value - middle)));
    const chance = (1.2533 * scatter) / Math.sqrt(near.length);
    out[row] = T_K[row]! * Math.sign(middle) * Math.max(0, Math.abs(middle) - chance);
  });
  return out;
}

function lengthOf({ time_s }: Samples): number {
  return time_s[time_s.length - 1]! - time_s[0]!;
}

/**
 * What a least-squares polynomial lacks of a decay exp(−x·s), s = 0…1, at its end: the next Legendre term,
 * xⁿ/(n!·C(2n, n)) with n = degree + 1. Carried beyond the end by `beyond` of the window it grows as that polynomial does, by
 * n(n + 1) per window length.
 */
function truncation(degree: number, x: number, beyond: number): number {
  const n = degree + 1;
  let term = 1;
  for (let k = 1; k <= n; k++) term *= x / (n + k);
  return term * Math.exp(-x / 2) * (1 + n * (n + 1) * beyond);
}

/**
 * Range of the stage's temperature in a window, from means over eighths of it: a noisy log does not move. A little of
 * either end is left out, for a window often ends where the stage steps.
 */
function stageTravel_K(stage: StageWindow, from_s: number, to_s: number): number {
  const inset_s = 0.02 * (to_s - from_s);
  const eighth_s = (to_s - from_s - 2 * inset_s) / 8;
  const means = Array.from({ length: 8 }, (_, k) =>
    stage.mean_K(from_s + inset_s + k * eighth_s, from_s + inset_s + (k + 1) * eighth_s),
  );
  return Math.max(...means) - Math.min(...means);
}
