import type { DriftFit } from "./drift.js";
import type { Samples } from "./window.js";

/** Where the temperature step is read. */
export interface StepTime {
  readonly time_s: number;
  readonly u_s: number;
  /** "equal-area" from the samples during the pulse; "mid-pulse" where there are too few of them. */
  readonly by: "equal-area" | "mid-pulse";
}

/**
 * The time at which extrapolating both drifts encloses equal areas with the trace: from there to here the cell
 * exchanged the heat with its surroundings that the two drifts tell of. Times on the axis of the drifts.
 * @param during usable samples between from_s (heater on) and to_s (settled again)
 */
export function equalAreaTime(
  before: DriftFit,
  after: DriftFit,
  during: Samples,
  from_s: number,
  to_s: number,
  pulseEnd_s: number,
): StepTime {
  const middle_s = (from_s + pulseEnd_s) / 2;
  const n = during.time_s.length;
  const rise_K = after.value_K(middle_s) - before.value_K(middle_s);
  // The quarter-points of the pulse must be seen, else the area is a guess.
  const seen = during.time_s.reduce((count, t) => (t < pulseEnd_s ? count + 1 : count), 0);
  if (seen < 4 || !(rise_K > 0)) return { time_s: middle_s, u_s: 0, by: "mid-pulse" };
  let area = 0;
  let t0 = from_s;
  let T0 = before.value_K(from_s);
  for (let i = 0; i <= n; i++) {
    const t1 = i < n ? during.time_s[i]! : to_s;
    const T1 = i < n ? during.temperature_K[i]! : after.value_K(to_s);
    area += (t1 - t0) * ((T0 + T1) / 2);
    t0 = t1;
    T0 = T1;
  }
  let time_s = middle_s;
  for (let round = 0; round < 4; round++) {
    const excess = area - simpson(before, from_s, time_s) - simpson(after, time_s, to_s);
    // d(excess)/d(time) is the rise itself; a larger area means an earlier step.
    const next = time_s - excess / (after.value_K(time_s) - before.value_K(time_s));
    // A body that runs hotter than its liquid while heated loses more heat than either drift tells of: the areas
    // are then equal before the pulse has begun, and that is where the step belongs.
    time_s = Math.min(to_s, Math.max(from_s - (to_s - from_s), next));
  }
  const interval_s = (to_s - from_s) / (n + 1);
  return { time_s, u_s: (Math.sqrt(n) * interval_s * after.noise_K) / rise_K, by: "equal-area" };
}

/** Exact for drifts up to a cubic. */
function simpson(drift: DriftFit, a: number, b: number): number {
  return ((b - a) / 6) * (drift.value_K(a) + 4 * drift.value_K((a + b) / 2) + drift.value_K(b));
}
