import type { StageLog } from "../ingest/types.js";
import { fitPolynomial } from "../numerics/polynomial.js";
import { medianOf } from "./order.js";
import { firstAtOrAfter, type Samples } from "./window.js";

/**
 * The samples of one transient, thinned for a model: whole where the temperature changes fast, means of growing
 * blocks far from the heater's edges. Every column has length n; times from the start of the pulse.
 */
export interface TransientSamples {
  /** Mean time of a block's samples. */
  readonly time_s: Float64Array;
  readonly temperature_K: Float64Array;
  /** Samples in the block. */
  readonly count: Float64Array;
  /** Samples left out of blocks as spikes. */
  readonly spikes: number;
  /** Mean stage temperature between a block and the next; null where nobody logs it. */
  readonly stage_K: Float64Array | null;
  /** Standard deviation of one sample, from its neighbours. */
  readonly noise_K: number;
}

/**
 * A block is this part of its distance from the nearest edge of the pulse. An exponential that begins at the edge is
 * then flat to 1e-4 of its height within any block.
 */
const BLOCK_SHARE = 0.07;
/** Samples during a pulse that are kept whole; a longer pulse is thinned evenly. */
const MOST_IN_PULSE = 120;
const SPIKE = 5;

/** @param samples usable, from the start of the pulse, in order of time; at least 4 */
export function thinTransient(
  samples: Samples,
  duration_s: number,
  interval_s: number,
  stage: StageWindow | null,
): TransientSamples {
  const { time_s: t, temperature_K: T } = samples;
  const n = t.length;
  const evenly_s = duration_s / MOST_IN_PULSE;
  const time: number[] = [];
  const temperature: number[] = [];
  const count: number[] = [];
  let spikes = 0;
  const part = (x: number): number => (x < 0 ? 0 : x < duration_s ? 1 : 2);
  for (let from = 0; from < n; ) {
    const start = t[from]!;
    const where = part(start);
    const distance_s = where === 0 ? -start : where === 1 ? 0 : start - duration_s;
    const longest_s = where === 1 ? evenly_s : BLOCK_SHARE * distance_s;
    let to = from + 1;
    // Blocks before the pulse shrink towards it, so the far end's distance rules; half an interval for rounding.
    while (to < n && part(t[to]!) === where && t[to]! - start <= longest_s - 0.5 * interval_s) to++;
    const block = blockMean(t, T, from, to);
    time.push(block.time_s);
    temperature.push(block.temperature_K);
    count.push(block.count);
    spikes += to - from - block.count;
    from = to;
  }
  return {
    time_s: Float64Array.from(time),
    temperature_K: Float64Array.from(temperature),
    count: Float64Array.from(count),
    spikes,
    stage_K: stage === null ? null : Float64Array.from(time, (a, i) => stage.mean_K(a, time[i + 1] ?? a)),
    noise_K: neighbourNoise_K(T),
  };
}

/** Mean of a block, without what lies SPIKE standard deviations off the block's own line. */
function blockMean(t: Float64Array, T: Float64Array, from: number, to: number) {
  const m = to - from;
  let keep: ((i: number) => boolean) | null = null;
  if (m >= 7) {
    const line = fitPolynomial(t.subarray(from, to), T.subarray(from, to), null, 1);
    const off = T.slice(from, to).map((value, i) => Math.abs(value - line.value(t[from + i]!)));
    const limit = SPIKE * 1.4826 * medianOf(off.slice());
    if (limit > 0 && off.some((value) => value > limit)) keep = (i) => off[i - from]! <= limit;
  }
  let sumTime = 0;
  let sum = 0;
  let count = 0;
  for (let i = from; i < to; i++) {
    if (keep !== null && !keep(i)) continue;
    sumTime += t[i]!;
    sum += T[i]! - T[from]!;
    count++;
  }
  return { time_s: sumTime / count, temperature_K: T[from]! + sum / count, count };
}

/** Noise of one sample from second differences, which no drift touches; never below the digitising step's own. */
export function neighbourNoise_K(T: Float64Array): number {
  const n = T.length;
  const magnitude = new Float64Array(n - 2);
  let step = Number.POSITIVE_INFINITY;
  for (let i = 1; i < n - 1; i++) {
    magnitude[i - 1] = Math.abs(T[i - 1]! - 2 * T[i]! + T[i + 1]!);
    const d = Math.abs(T[i + 1]! - T[i]!);
    if (d > 0 && d < step) step = d;
  }
  const white = (1.4826 * medianOf(magnitude)) / Math.sqrt(6);
  return Math.max(
    white,
    Number.isFinite(step) ? Math.min(step, 1e-3 * T[0]!) / Math.sqrt(12) : 0,
    1e-12 * T[0]!,
  );
}

/** The stage's log about one pulse. */
export interface StageWindow {
  /** Mean over a…b, seconds from the start of the pulse; between readings a straight line, beyond them the nearest. */
  mean_K(a_s: number, b_s: number): number;
  /** Span of the stage's temperature over a…b. */
  travel_K(a_s: number, b_s: number): number;
}

/** @returns null where no usable reading lies near the window */
export function stageWindow(
  log: StageLog,
  origin_s: number,
  from_s: number,
  to_s: number,
): StageWindow | null {
  const first = Math.max(0, firstAtOrAfter(log.time_s, origin_s + from_s) - 1);
  const last = Math.min(log.time_s.length, firstAtOrAfter(log.time_s, origin_s + to_s) + 1);
  const t: number[] = [];
  const T: number[] = [];
  for (let i = first; i < last; i++) {
    if (!Number.isFinite(log.temperature_K[i]!)) continue;
    t.push(log.time_s[i]! - origin_s);
    T.push(log.temperature_K[i]!);
  }
  if (t.length < 2) return null;
  // ∫T dt up to each reading: a mean over any span is then a difference.
  const area = [0];
  for (let i = 1; i < t.length; i++)
    area.push(area[i - 1]! + ((T[i]! + T[i - 1]!) / 2) * (t[i]! - t[i - 1]!));
  const at = (x: number): { value: number; area: number } => {
    const end = t.length - 1;
    if (x <= t[0]!) return { value: T[0]!, area: T[0]! * (x - t[0]!) };
    if (x >= t[end]!) return { value: T[end]!, area: area[end]! + T[end]! * (x - t[end]!) };
    let low = 0;
    let high = end;
    while (high - low > 1) {
      const middle = (low + high) >>> 1;
      if (t[middle]! <= x) low = middle;
      else high = middle;
    }
    const share = (x - t[low]!) / (t[high]! - t[low]!);
    const value = T[low]! + share * (T[high]! - T[low]!);
    return { value, area: area[low]! + ((T[low]! + value) / 2) * (x - t[low]!) };
  };
  return {
    mean_K: (a, b) => (b > a ? (at(b).area - at(a).area) / (b - a) : at(a).value),
    travel_K(a, b) {
      let lowest = Math.min(at(a).value, at(b).value);
      let highest = Math.max(at(a).value, at(b).value);
      for (let i = 0; i < t.length; i++) {
        if (t[i]! < a || t[i]! > b) continue;
        lowest = Math.min(lowest, T[i]!);
        highest = Math.max(highest, T[i]!);
      }
      return highest - lowest;
    },
  };
}
