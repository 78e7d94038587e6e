import { fitPolynomial } from "../numerics/polynomial.js";
import { neighbourNoise_K } from "./noise.js";
import { medianOf } from "./order.js";
import type { StageWindow } from "./stage-window.js";
import type { Samples } from "./window.js";

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
 * A block is this part of its distance from the nearest edge of the pulse. The mean of an exponential that begins at
 * the edge is then within 1e-4 of its height of the value at the block's middle, and most of that is corrected.
 */
const BLOCK_SHARE = 0.07;
/** Samples during a pulse that are kept whole; a longer pulse is thinned evenly. */
const MOST_IN_PULSE = 120;
const SPIKE = 5;

/**
 * @param samples usable, from the start of the pulse, in order of time; at least 4
 * @param previousEnd_s end of the pulse before, whose settling may still go on; -Infinity for none
 */
export function thinTransient(
  samples: Samples,
  duration_s: number,
  interval_s: number,
  previousEnd_s: number,
  stage: StageWindow | null,
): TransientSamples {
  const { time_s: t, temperature_K: T } = samples;
  const n = t.length;
  const evenly_s = duration_s / MOST_IN_PULSE;
  const time: number[] = [];
  const temperature: number[] = [];
  const count: number[] = [];
  const spread: number[] = [];
  let spikes = 0;
  const part = (x: number): number => (x < 0 ? 0 : x < duration_s ? 1 : 2);
  for (let from = 0; from < n; ) {
    const start = t[from]!;
    const where = part(start);
    const distance_s =
      where === 0 ? Math.min(-start, start - previousEnd_s) : where === 1 ? 0 : start - duration_s;
    const longest_s = where === 1 ? evenly_s : BLOCK_SHARE * distance_s;
    let to = from + 1;
    // Blocks before the pulse shrink towards it, so the far end's distance rules; half an interval for rounding.
    while (to < n && part(t[to]!) === where && t[to]! - start <= longest_s - 0.5 * interval_s) to++;
    const block = blockMean(t, T, from, to);
    time.push(block.time_s);
    temperature.push(block.temperature_K);
    count.push(block.count);
    spread.push(block.variance_s2);
    spikes += to - from - block.count;
    from = to;
  }
  return {
    time_s: Float64Array.from(time),
    temperature_K: atMiddle(time, temperature, count, spread),
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
  let sumSquare = 0;
  let sum = 0;
  let count = 0;
  for (let i = from; i < to; i++) {
    if (keep !== null && !keep(i)) continue;
    sumTime += t[i]! - t[from]!;
    sumSquare += (t[i]! - t[from]!) ** 2;
    sum += T[i]! - T[from]!;
    count++;
  }
  const middle = sumTime / count;
  return {
    time_s: t[from]! + middle,
    temperature_K: T[from]! + sum / count,
    count,
    variance_s2: Math.max(0, sumSquare / count - middle * middle),
  };
}

/**
 * A block's mean differs from the value at its mean time by half the curvature times the variance of its times; the
 * curvature is that of the three blocks about it, which adds a tenth to the block's noise at most.
 */
function atMiddle(
  time: readonly number[],
  mean: readonly number[],
  count: readonly number[],
  spread: readonly number[],
): Float64Array {
  return Float64Array.from(mean, (value, i) => {
    const [before, after] = [count[i - 1] ?? 0, count[i + 1] ?? 0];
    // Never across an edge of the pulse, where the neighbours are single samples, nor by single samples at all.
    if (count[i]! < 3 || before < 3 || after < 3) return value;
    const left = (value - mean[i - 1]!) / (time[i]! - time[i - 1]!);
    const right = (mean[i + 1]! - value) / (time[i + 1]! - time[i]!);
    const curvature = (2 * (right - left)) / (time[i + 1]! - time[i - 1]!);
    return value - (curvature * spread[i]!) / 2;
  });
}
