import { fitPolynomial } from "../numerics/polynomial.js";
import { neighbourNoise_K } from "./noise.js";
import { medianOf } from "./order.js";
import type { Samples } from "./window.js";

/** A part of a window in which nothing happens but a drift; times as in the samples given. */
export interface QuietStretch {
  readonly from_s: number;
  readonly to_s: number;
}

const BLOCKS = 240;
const FEWEST_BLOCKS = 10;
const DEGREE = 3;
/** Scatter of a plain drift's blocks over what the noise from sample to sample makes of it, at most. */
const PLAIN = 1.5;
/** A head that lies this many standard deviations off its drift has not settled. */
const SIGNIFICANT = 4;

/**
 * The stretch of drift next to a pulse. The far end is cut where the trace stops being a smooth curve (the stage
 * steps, a heat switch closes, helium is transferred); after a pulse, the near end is cut where the cell has
 * settled. Both are judged against the noise from one sample to the next, so slow noise that is there all the time
 * is first measured on the quietest quarter and allowed for.
 * @param samples of the window, in order of time
 * @param side where the pulse is: "start" for the window after it, "end" for the window before it
 * @param least_s skipped next to the pulse in any case
 * @returns null where no stretch of some length is plain
 */
export function quietStretch(samples: Samples, side: "start" | "end", least_s: number): QuietStretch | null {
  const window = inBlocks(samples);
  const n = window.time_s.length;
  if (n < FEWEST_BLOCKS) return whole(samples, side, least_s);
  const near = side === "start" ? window : mirrored(window);
  const allowed = PLAIN * Math.max(1, quietestScatter(near));
  const span_s = near.time_s[n - 1]! - near.time_s[0]!;
  let longest = 0;
  const found: { skip: number; end: number }[] = [];
  // Before a pulse the drift goes right up to it; after it, settling may take up to half the window.
  const latest_s = side === "start" ? span_s / 2 : least_s;
  for (
    let skip_s = least_s;
    skip_s <= Math.max(latest_s, least_s);
    skip_s = Math.max(1.5 * skip_s, skip_s + span_s / n)
  ) {
    const skip = near.time_s.findIndex((t) => t - samplesStart(near, samples, side) >= skip_s);
    if (skip < 0 || n - skip < FEWEST_BLOCKS) break;
    const end = longestPlain(near, skip, allowed);
    found.push({ skip, end });
    longest = Math.max(longest, end - skip);
    if (end - skip >= Math.max(FEWEST_BLOCKS, n / 8)) break;
  }
  const chosen = found.find(
    ({ skip, end }) => end - skip >= Math.max(FEWEST_BLOCKS, Math.min(longest / 4, n / 8)),
  );
  if (chosen === undefined) return null;
  const half = near.interval_s / 2;
  const a = Math.max(near.time_s[chosen.skip]! - half, samplesStart(near, samples, side) + least_s);
  const b = near.time_s[chosen.end - 1]! + half;
  return side === "start" ? { from_s: a, to_s: b } : { from_s: -b, to_s: -a };
}

interface Blocks {
  readonly time_s: Float64Array;
  readonly temperature_K: Float64Array;
  readonly interval_s: number;
  /** Standard deviation of one block from the noise between neighbouring samples. */
  readonly noise_K: number;
}

function samplesStart(near: Blocks, samples: Samples, side: "start" | "end"): number {
  if (near.time_s.length === 0) return 0;
  return side === "start" ? samples.time_s[0]! : -samples.time_s[samples.time_s.length - 1]!;
}

function whole(samples: Samples, side: "start" | "end", least_s: number): QuietStretch | null {
  const first = samples.time_s[0];
  const last = samples.time_s[samples.time_s.length - 1];
  if (first === undefined || last === undefined) return null;
  return side === "start" ? { from_s: first + least_s, to_s: last } : { from_s: first, to_s: last - least_s };
}

function mirrored(blocks: Blocks): Blocks {
  return {
    ...blocks,
    time_s: blocks.time_s.map((t) => -t).reverse(),
    temperature_K: blocks.temperature_K.slice().reverse(),
  };
}

/** Scatter about a cubic over the noise, in the quietest of a few overlapping quarters. */
function quietestScatter(blocks: Blocks): number {
  const n = blocks.time_s.length;
  const quarter = Math.max(FEWEST_BLOCKS, Math.floor(n / 4));
  let least = Number.POSITIVE_INFINITY;
  for (let from = 0; from + quarter <= n; from += Math.max(1, quarter >> 1)) {
    least = Math.min(least, judge(blocks, from, from + quarter).scatter);
  }
  return least;
}

/** Largest `end` for which blocks [from, end) are a plain drift; `from` where there is none. */
function longestPlain(blocks: Blocks, from: number, allowed: number): number {
  const plain = (end: number): boolean => {
    const { scatter, head } = judge(blocks, from, end);
    return scatter <= allowed && head <= SIGNIFICANT * Math.max(1, allowed / PLAIN);
  };
  const n = blocks.time_s.length;
  if (plain(n)) return n;
  let high = n;
  let low = n;
  while (low - from >= FEWEST_BLOCKS) {
    high = low;
    low = from + Math.floor(0.8 * (low - from));
    if (low - from >= FEWEST_BLOCKS && plain(low)) break;
  }
  if (low - from < FEWEST_BLOCKS) return from;
  while (high - low > 1) {
    const middle = (low + high) >>> 1;
    if (plain(middle)) low = middle;
    else high = middle;
  }
  return low;
}

function judge(blocks: Blocks, from: number, end: number): { scatter: number; head: number } {
  const t = blocks.time_s.subarray(from, end);
  const T = blocks.temperature_K.subarray(from, end);
  const n = t.length;
  const fit = fitPolynomial(t, T, null, DEGREE);
  let sum = 0;
  let head = 0;
  const first = Math.max(2, Math.round(n / 40));
  for (let i = 0; i < n; i++) {
    const r = T[i]! - fit.value(t[i]!);
    sum += r * r;
    if (i < first) head += r;
  }
  // A transient at the head pulls the fit towards itself; the leverage says how much of it the fit takes.
  const share = Math.max(0.2, 1 - fit.variance(t[0]!) * first);
  return {
    scatter: Math.sqrt(sum / (n - DEGREE - 1)) / blocks.noise_K,
    head: Math.abs(head / first) / ((share * blocks.noise_K) / Math.sqrt(first)),
  };
}

/** Medians of neighbouring samples: spikes go, steps stay sharp to one block. */
function inBlocks(samples: Samples): Blocks {
  const n = samples.time_s.length;
  // A median of three is not moved by one spike; short windows cannot afford it.
  const size = Math.max(n >= 60 ? 3 : 1, Math.ceil(n / BLOCKS));
  const count = Math.floor(n / size);
  const time_s = new Float64Array(count);
  const temperature_K = new Float64Array(count);
  for (let b = 0; b < count; b++) {
    const at = b * size;
    // The middle sample's time: across a gap, half way between the ends is nowhere near the median sample.
    time_s[b] = (samples.time_s[at + ((size - 1) >> 1)]! + samples.time_s[at + (size >> 1)]!) / 2;
    temperature_K[b] = medianOf(samples.temperature_K.slice(at, at + size));
  }
  const interval_s = count > 1 ? (time_s[count - 1]! - time_s[0]!) / (count - 1) : 0;
  // A median of m normal values scatters √(π/2) more than their mean, and as they do for m = 1.
  const noise_K = (neighbourNoise_K(samples.temperature_K) * (size > 2 ? 1.2533 : 1)) / Math.sqrt(size);
  return { time_s, temperature_K, interval_s, noise_K };
}
