import type { TemperatureTrace } from "../thermometry/types.js";

/** Samples [from, to) of a trace. */
export interface SampleRange {
  readonly from: number;
  readonly to: number;
}

/** First index with time ≥ t. `time_s` increases but for flagged samples, which differ too little to matter here. */
export function firstAtOrAfter(time_s: Float64Array, t: number): number {
  let low = 0;
  let high = time_s.length;
  while (low < high) {
    const middle = (low + high) >>> 1;
    if (time_s[middle]! < t) low = middle + 1;
    else high = middle;
  }
  return low;
}

/** Samples with from_s ≤ time < to_s. */
export function sampleRange(time_s: Float64Array, from_s: number, to_s: number): SampleRange {
  const from = firstAtOrAfter(time_s, from_s);
  return { from, to: Math.max(from, firstAtOrAfter(time_s, to_s)) };
}

/** The usable samples of a range, copied together. Both columns have length n. */
export interface Samples {
  readonly time_s: Float64Array;
  readonly temperature_K: Float64Array;
  /** Samples of the range that carry no temperature. */
  readonly missing: number;
}

/** Copies the usable samples of a range, times counted from `origin_s` (epoch seconds would cost digits). */
export function usableSamples(trace: TemperatureTrace, range: SampleRange, origin_s: number): Samples {
  const length = range.to - range.from;
  const time_s = new Float64Array(length);
  const temperature_K = new Float64Array(length);
  let n = 0;
  for (let i = range.from; i < range.to; i++) {
    if (trace.flag[i] !== 0) continue;
    time_s[n] = trace.time_s[i]! - origin_s;
    temperature_K[n] = trace.temperature_K[i]!;
    n++;
  }
  return {
    time_s: time_s.subarray(0, n),
    temperature_K: temperature_K.subarray(0, n),
    missing: length - n,
  };
}

/** Median interval between samples, from at most a few thousand of them. */
export function samplingInterval_s(time_s: Float64Array): number {
  const stride = Math.max(1, Math.floor(time_s.length / 4000));
  const steps: number[] = [];
  for (let i = stride; i < time_s.length; i += stride) {
    const step = time_s[i]! - time_s[i - 1]!;
    if (step > 0) steps.push(step);
  }
  steps.sort((a, b) => a - b);
  return steps.length === 0 ? Number.NaN : steps[Math.floor(steps.length / 2)]!;
}
