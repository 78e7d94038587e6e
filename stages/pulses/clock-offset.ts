import { median } from "simple-statistics";
import { fitPolynomial } from "../numerics/polynomial.js";
import type { TemperatureTrace } from "../thermometry/types.js";
import type { HeaterPulses } from "./heater-pulses.js";
import { medianOf } from "./order.js";
import { type Samples, sampleRange, samplingInterval_s, usableSamples } from "./window.js";

/** How far the heater's clock is from the thermometer's. */
export interface ClockOffset {
  /** Added to heater times. 0 where `applied` is false. */
  readonly offset_s: number;
  /** As estimated, applied or not; NaN where no pulse told. */
  readonly estimate_s: number;
  readonly u_s: number;
  /** Pulses it was read from. */
  readonly pulses: number;
  readonly applied: boolean;
}

export const NO_OFFSET: ClockOffset = {
  offset_s: 0,
  estimate_s: Number.NaN,
  u_s: Number.NaN,
  pulses: 0,
  applied: false,
};

/** The clearest pulses tell the offset; more of them only cost time. */
const CLEAREST = 24;
/** Clocks of one bench are never further apart than this; beyond it a neighbouring event would be taken for the pulse. */
const REACH_S = 10;
const SIGNIFICANT = 4;

/**
 * Offset of the heater's clock from the corners that each pulse makes in the thermometer's trace: the one where the
 * heater starts. It is applied only where it is SIGNIFICANT standard uncertainties from zero, since a correction
 * that is noise moves every pulse of the night together.
 */
export function clockOffset(trace: TemperatureTrace, heater: HeaterPulses): ClockOffset {
  const interval_s = samplingInterval_s(trace.time_s);
  const order = [...heater.pulse.keys()]
    .filter((i) => heater.flag[i] === 0)
    .sort((a, b) => heater.Q_J[b]! - heater.Q_J[a]!);
  // Not the strongest in energy alone: they crowd at one end of the night.
  const stride = Math.max(1, Math.floor(order.length / CLEAREST));
  const chosen = order.filter((_, rank) => rank % stride === 0).slice(0, CLEAREST);
  const onsets = chosen.map((i) => onset_s(trace, heater, i, interval_s)).filter((value) => value !== null);
  if (onsets.length < 3) return NO_OFFSET;
  const estimate_s = median(onsets);
  const scatter = 1.4826 * median(onsets.map((value) => Math.abs(value - estimate_s)));
  // 1.2533 is what a median of normal values loses against their mean. Between two samples nothing is seen, and
  // pulses in step with the samples do not average that away.
  const u_s = Math.hypot((1.2533 * scatter) / Math.sqrt(onsets.length), interval_s / Math.sqrt(12));
  const applied = Math.abs(estimate_s) > SIGNIFICANT * u_s;
  return { offset_s: applied ? estimate_s : 0, estimate_s, u_s, pulses: onsets.length, applied };
}

/** The heater pulses, moved to the thermometer's clock. */
export function onThermometerClock(heater: HeaterPulses, offset_s: number): HeaterPulses {
  return offset_s === 0 ? heater : { ...heater, start_s: heater.start_s.map((t) => t + offset_s) };
}

/** Start of the rise less the heater's own start; null where the pulse does not stand out. */
function onset_s(
  trace: TemperatureTrace,
  heater: HeaterPulses,
  i: number,
  interval_s: number,
): number | null {
  const start = heater.start_s[i]!;
  const duration = heater.duration_s[i]!;
  const previousEnd = i === 0 ? Number.NEGATIVE_INFINITY : heater.start_s[i - 1]! + heater.duration_s[i - 1]!;
  const next = heater.start_s[i + 1] ?? Number.POSITIVE_INFINITY;
  const reach = Math.min(REACH_S, 0.4 * (next - start - duration), 0.4 * (start - previousEnd));
  if (!(reach > 3 * interval_s)) return null;
  const all = usableSamples(
    trace,
    sampleRange(trace.time_s, start - 2 * reach, start + duration + 2 * reach),
    start,
  );
  if (all.time_s.length < 30) return null;
  const coarse = steepestRise(all, duration, reach, interval_s);
  if (coarse === null) return null;
  return corner(all, coarse, duration, interval_s);
}

/** The trial start from which the temperature rises most over the pulse's length. */
function steepestRise(samples: Samples, duration: number, reach: number, interval_s: number): number | null {
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

/**
 * Where the drift before meets the first part of the rise. The first part is short, so the bend of the rise does
 * not matter, and it begins two samples after the coarse start, so the thermometer's own lag matters little.
 */
function corner(samples: Samples, coarse: number, duration: number, interval_s: number): number | null {
  const { time_s, temperature_K } = samples;
  const pick = (from: number, to: number) => {
    const index = [...time_s.keys()].filter((j) => time_s[j]! >= from && time_s[j]! <= to);
    return {
      t: Float64Array.from(index, (j) => time_s[j]!),
      T: Float64Array.from(index, (j) => temperature_K[j]!),
    };
  };
  const before = pick(Number.NEGATIVE_INFINITY, coarse - 2 * interval_s);
  const rise = pick(coarse + 2 * interval_s, coarse + duration - 2 * interval_s);
  if (before.t.length < 6 || rise.t.length < 4) return null;
  const base = fitPolynomial(before.t, before.T, null, 1);
  const ramp = fitPolynomial(rise.t, rise.T, null, rise.t.length < 8 ? 1 : 2);
  const noise = 1.4826 * medianOf(before.T.map((T, j) => Math.abs(T - base.value(before.t[j]!))));
  const base_K = (t: number): number => base.value(t);
  if (!(ramp.value(coarse + duration) - base_K(coarse + duration) > 20 * noise)) return null;
  let t = coarse;
  for (let round = 0; round < 20; round++) {
    const slope = ramp.slope(t) - base.slope(t);
    if (!(slope > 0)) return null;
    const next = t - (ramp.value(t) - base_K(t)) / slope;
    if (Math.abs(next - t) < 1e-6) break;
    t = next;
  }
  // A body that overheats at once lifts the whole ramp, and the corner comes out too early. The first two samples
  // in a row above the drift say between which samples the heater really started.
  const above = (j: number): boolean => temperature_K[j]! - base_K(time_s[j]!) > 6 * noise;
  let first = 1;
  while (
    first + 1 < time_s.length &&
    !(time_s[first]! > coarse - duration && above(first) && above(first + 1))
  )
    first++;
  if (first + 1 >= time_s.length) return null;
  const from = time_s[first - 1]!;
  const to = time_s[first]!;
  const jump_K = temperature_K[first]! - base_K(to) - (temperature_K[first - 1]! - base_K(from));
  const jumped = jump_K > 2 * ramp.slope(to) * (to - from) + 4 * noise;
  if (!jumped) return t;
  return t < from ? (from + to) / 2 : Math.min(t, to);
}

function interpolate(samples: Samples, t: number): number {
  const { time_s, temperature_K } = samples;
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
