import type { StageLog } from "../ingest/types.js";
import { fitPolynomial } from "../numerics/polynomial.js";
import { neighbourNoise_K } from "./noise.js";
import { firstAtOrAfter } from "./window.js";

/** The stage's log about one pulse. */
export interface StageWindow {
  /** Mean over a…b, seconds from the start of the pulse; between readings a straight line, beyond them the nearest. */
  mean_K(a_s: number, b_s: number): number;
}

/**
 * @param reading "quietened" takes the noise of its readings off a smooth log, for a model to be fed with
 * @returns null where no usable reading lies near the window
 */
export function stageWindow(
  log: StageLog,
  origin_s: number,
  from_s: number,
  to_s: number,
  reading: "as read" | "quietened",
): StageWindow | null {
  const first = Math.max(0, firstAtOrAfter(log.time_s, origin_s + from_s) - 1);
  const last = Math.min(log.time_s.length, firstAtOrAfter(log.time_s, origin_s + to_s) + 1);
  // A dense log is read in blocks: its own steps stay as sharp as the pulse's length asks.
  const size = Math.max(1, Math.floor((last - first) / MOST_READINGS));
  const time: number[] = [];
  const read: number[] = [];
  for (let i = first; i < last; ) {
    const block = { time: 0, temperature: 0, count: 0 };
    for (; i < last && block.count < size; i++) {
      if (!Number.isFinite(log.temperature_K[i]!)) continue;
      block.time += log.time_s[i]! - origin_s;
      block.temperature += log.temperature_K[i]!;
      block.count++;
    }
    if (block.count === 0) continue;
    time.push(block.time / block.count);
    read.push(block.temperature / block.count);
  }
  if (time.length < 2) return null;
  const t = Float64Array.from(time);
  const T = reading === "quietened" ? quietened(t, Float64Array.from(read)) : Float64Array.from(read);
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
  };
}

const MOST_READINGS = 400;
const LEAST_SEGMENT = 8;
/** A log with less noise than this, relative, has none: it was calculated, or is constant. */
const NOISELESS = 1e-8;
const DEGREE = 3;

/**
 * The log without its reading noise, wherever it is a smooth curve: the cell feels the stage, not the noise of the stage's
 * thermometer, and a model fed with that would put it into the cell. Where the log steps it is cut, and each part is
 * smoothed by itself; a part that is too short for that stays as it was read.
 */
function quietened(t: Float64Array, T: Float64Array): Float64Array {
  const out = T.slice();
  if (t.length < LEAST_SEGMENT) return out;
  const noise_K = neighbourNoise_K(T);
  if (noise_K < NOISELESS * T[0]!) return out;
  const smooth = (from: number, to: number): void => {
    const n = to - from;
    if (n < LEAST_SEGMENT) return;
    const ts = t.subarray(from, to);
    const Ts = T.subarray(from, to);
    for (let degree = 0; degree <= DEGREE; degree++) {
      const fit = fitPolynomial(ts, Ts, null, degree);
      if (
        !isNoise(
          Ts.map((value, i) => value - fit.value(ts[i]!)),
          noise_K,
          degree,
        )
      )
        continue;
      for (let i = 0; i < n; i++) out[from + i] = fit.value(ts[i]!);
      return;
    }
    // Where the running sum of what a line leaves is furthest from 0, the curve breaks.
    const line = fitPolynomial(ts, Ts, null, 1);
    let sum = 0;
    let furthest = 0;
    let cut = from + (n >> 1);
    for (let i = 0; i < n - 1; i++) {
      sum += Ts[i]! - line.value(ts[i]!);
      if (Math.abs(sum) <= furthest) continue;
      furthest = Math.abs(sum);
      cut = from + i + 1;
    }
    smooth(from, cut);
    smooth(cut, to);
  };
  smooth(0, t.length);
  return out;
}

/** Variance and running sum as white noise has them all but once in forty: a cut too many costs less than a bend unseen. */
function isNoise(residual: Float64Array, noise_K: number, degree: number): boolean {
  const n = residual.length;
  const freedom = n - degree - 1;
  let squares = 0;
  let sum = 0;
  let furthest = 0;
  for (let i = 0; i < n; i++) {
    squares += residual[i]! ** 2;
    sum += residual[i]!;
    furthest = Math.max(furthest, Math.abs(sum));
  }
  // The running sum of a bridge of n steps reaches 1.48 σ√n once in forty times (Kolmogorov).
  return (
    squares < noise_K ** 2 * (freedom + 2.5 * Math.sqrt(2 * freedom)) &&
    furthest < 1.48 * noise_K * Math.sqrt(n)
  );
}
