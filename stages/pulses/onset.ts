import type { TemperatureTrace } from "../thermometry/types.js";
import type { HeaterPulses } from "./heater-pulses.js";
import { medianOf } from "./order.js";
import { type PulseFit, pulseFit } from "./pulse-fit.js";
import { type Samples, sampleRange, usableSamples } from "./window.js";

/** What the trace alone says of when one pulse began, in seconds from the heater's own start of it. */
export interface Onset {
  readonly best_s: number;
  /** Whether a plain corner does not fit there. */
  readonly bends: boolean;
  /** Both likelihoods lie on an even grid from here on, each with an integral of 1. */
  readonly from_s: number;
  readonly step_s: number;
  /** Whether or not something bends the trace beside the corner. */
  readonly bent_per_s: Float64Array;
  /** A plain corner where that fits as well. */
  readonly plain_per_s: Float64Array;
}

/** Clocks of one bench are never further apart than this; beyond it a neighbouring event would be taken for the pulse. */
export const REACH_S = 10;
const FEWEST_SAMPLES = 12;
/** Points of the likelihood's grid, over as much as counts. */
const POINTS = 48;
/** Less likely than the best by e to this, nothing counts. */
const DEPTH = 12;

/** The samples about one pulse, and where in time its rise is, roughly. */
export interface Surroundings {
  readonly samples: Samples;
  readonly duration_s: number;
  readonly coarse_s: number;
}

/** @returns null where the pulse does not stand out or has no room */
export function surroundings(
  trace: TemperatureTrace,
  heater: HeaterPulses,
  i: number,
  interval_s: number,
): Surroundings | null {
  const start = heater.start_s[i]!;
  const duration_s = heater.duration_s[i]!;
  const previousEnd = i === 0 ? Number.NEGATIVE_INFINITY : heater.start_s[i - 1]! + heater.duration_s[i - 1]!;
  const next = heater.start_s[i + 1] ?? Number.POSITIVE_INFINITY;
  const reach = Math.min(REACH_S, 0.4 * (next - start - duration_s), 0.4 * (start - previousEnd));
  if (!(reach > 3 * interval_s)) return null;
  const range = sampleRange(trace.time_s, start - 2 * reach, start + duration_s + 2 * reach);
  const all = withoutSpikes(usableSamples(trace, range, start));
  const coarse_s = steepestRise(all, duration_s, reach, interval_s);
  if (coarse_s === null) return null;
  const side = Math.max(duration_s / 3, 12 * interval_s);
  const samples = between(all, coarse_s - side, coarse_s + duration_s + side);
  return samples.time_s.length < FEWEST_SAMPLES ? null : { samples, duration_s, coarse_s };
}

/** The most likely start: from steps of a sample down to a small part of it. */
function bestStart(pulse: PulseFit, duration_s: number, coarse_s: number): number {
  const { spacing_s } = pulse;
  // A thermometer's lag brings the steepest rise that much late.
  const half = Math.max(4 * spacing_s, 0.6 * duration_s);
  let start_s = coarse_s;
  let most = Number.NEGATIVE_INFINITY;
  for (let t = coarse_s - half; t <= coarse_s + half; t += spacing_s) {
    const { plain } = pulse.at(t);
    if (plain <= most) continue;
    most = plain;
    start_s = t;
  }
  for (let step = spacing_s / 2; step > spacing_s / 100; step /= 2) {
    for (const t of [start_s - step, start_s + step]) {
      const { plain } = pulse.at(t);
      if (plain <= most) continue;
      most = plain;
      start_s = t;
    }
  }
  return start_s;
}

/**
 * Likelihood of each start, over a grid of them.
 * @param lag_s by which the thermometer follows the body, as far as it is known; what is not known shows as a bend
 */
export function onsetOf({ samples, duration_s, coarse_s }: Surroundings, lag_s: number): Onset {
  const pulse = pulseFit(samples, { duration_s, lag_s });
  return likelihoods(pulse, bestStart(pulse, duration_s, coarse_s));
}

function likelihoods(pulse: PulseFit, best_s: number): Onset {
  const { bent: top, bends } = pulse.at(best_s);
  const stride = pulse.spacing_s / 4;
  const end = (way: -1 | 1): number => {
    let steps = 1;
    // Further than a dozen samples nobody looks: that is a pulse that tells little.
    while (steps < 48 && pulse.at(best_s + way * steps * stride).bent > top - DEPTH) steps++;
    return best_s + way * steps * stride;
  };
  const [from_s, to_s] = [end(-1), end(1)];
  const step_s = (to_s - from_s) / (POINTS - 1);
  const grid = Array.from({ length: POINTS }, (_, j) => pulse.at(from_s + j * step_s));
  return {
    best_s,
    bends,
    from_s,
    step_s,
    bent_per_s: density(
      grid.map(({ bent }) => bent),
      step_s,
    ),
    plain_per_s: density(
      grid.map(({ plain }) => plain),
      step_s,
    ),
  };
}

function density(log: readonly number[], step: number): Float64Array {
  const highest = Math.max(...log);
  const height = Float64Array.from(log, (value) => Math.exp(value - highest));
  const area = height.reduce((sum, value) => sum + value, 0) * step;
  return height.map((value) => value / area);
}

function between({ time_s, temperature_K, missing }: Samples, from: number, to: number): Samples {
  let first = 0;
  let end = time_s.length;
  while (first < end && time_s[first]! < from) first++;
  while (end > first && time_s[end - 1]! > to) end--;
  return { time_s: time_s.subarray(first, end), temperature_K: temperature_K.subarray(first, end), missing };
}

/** A sample off both its neighbours by far more than the noise, and by more than they are apart: a spike, no corner. */
function withoutSpikes(samples: Samples): Samples {
  const { time_s: t, temperature_K: T } = samples;
  const n = T.length;
  if (n < FEWEST_SAMPLES) return samples;
  const bend = new Float64Array(n - 2);
  for (let j = 1; j < n - 1; j++) bend[j - 1] = Math.abs(T[j - 1]! - 2 * T[j]! + T[j + 1]!);
  const noise = (1.4826 * medianOf(bend)) / Math.sqrt(6);
  const keep: number[] = [];
  for (let j = 0; j < n; j++) {
    const [before, after] = [T[Math.max(0, j - 1)]!, T[Math.min(n - 1, j + 1)]!];
    const off = Math.min(Math.abs(T[j]! - before), Math.abs(T[j]! - after));
    if (!(off > 8 * noise && off > 2 * Math.abs(before - after))) keep.push(j);
  }
  if (keep.length === n) return samples;
  const take = (column: Float64Array): Float64Array => Float64Array.from(keep, (j) => column[j]!);
  return { time_s: take(t), temperature_K: take(T), missing: samples.missing };
}

/** The trial start from which the temperature rises most over the pulse's length. */
function steepestRise(samples: Samples, duration: number, reach: number, interval_s: number): number | null {
  if (samples.time_s.length < FEWEST_SAMPLES) return null;
  const level = (t: number): number => interpolate(samples, t);
  let best: number | null = null;
  let rise = 0;
  let quiet = 0;
  for (let t = -reach; t <= reach; t += interval_s) {
    const change = level(t + duration) - level(t);
    if (change > rise) {
      rise = change;
      best = t;
    }
    quiet = Math.max(quiet, Math.abs(level(-reach) - level(-2 * reach)));
  }
  return rise > 5 * quiet ? best : null;
}

function interpolate({ time_s, temperature_K }: Samples, t: number): number {
  let low = 0;
  let high = time_s.length - 1;
  if (t <= time_s[0]!) return temperature_K[0]!;
  if (t >= time_s[high]!) return temperature_K[high]!;
  while (high - low > 1) {
    const middle = (low + high) >>> 1;
    if (time_s[middle]! <= t) low = middle;
    else high = middle;
  }
  const share = (t - time_s[low]!) / (time_s[high]! - time_s[low]!);
  return temperature_K[low]! + share * (temperature_K[high]! - temperature_K[low]!);
}
