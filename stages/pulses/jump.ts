import { medianOf } from "./order.js";
import type { Samples } from "./window.js";

/** A step from one sample to the next, as an instrument makes when it changes its range. */
export interface Jump {
  /** Halfway between the two samples, on the axis of the samples. */
  readonly time_s: number;
  readonly size_K: number;
  readonly u_K: number;
}

/** Samples to a block, where a jump is looked for. */
const BLOCKS = [1, 2, 4, 8] as const;
/** Standard deviations; of thousands of places that are looked at none gets there by noise. */
const SIGNIFICANT = 7;
/** Places enough to know the scatter by. */
const FEWEST = 12;

/**
 * The clearest jump among samples that otherwise drift or settle. Between four blocks in a row there are three steps.
 * Wherever the trace bends one way, as a drift or any one settling does, the middle one lies between its neighbours; a
 * jump takes it outside both, and as far in blocks of one sample as in blocks of eight, where a bend that turns gets there
 * only slowly. How far is judged by the scatter of the same figure all over the samples, so slow noise counts too.
 * @returns null where nothing stands out; two blocks are needed to either side of a jump
 */
export function clearestJump({ time_s, temperature_K }: Samples): Jump | null {
  const n = temperature_K.length;
  const sum = new Float64Array(n + 1);
  // From the first sample, or the digits of so many kelvin are lost in the sum.
  for (let i = 0; i < n; i++) sum[i + 1] = sum[i]! + (temperature_K[i]! - temperature_K[0]!);
  const scales = BLOCKS.filter((m) => n - 4 * m + 1 >= FEWEST).map((m) => stepsOf(sum, m));
  let clearest: Jump | null = null;
  let most = SIGNIFICANT;
  for (const [k, { m, outside_K, u_K }] of scales.entries()) {
    for (let i = 0; i < outside_K.length; i++) {
      const size_K = outside_K[i]!;
      if (!(Math.abs(size_K) > most * u_K)) continue;
      const last = i + 2 * m - 1;
      const sharp = scales.slice(0, k).every((finer) => {
        const there = finer.outside_K[last - 2 * finer.m + 1]! * Math.sign(size_K);
        return there > Math.abs(size_K) / 2 - 3 * finer.u_K;
      });
      if (!sharp) continue;
      most = Math.abs(size_K) / u_K;
      clearest = { time_s: (time_s[last]! + time_s[last + 1]!) / 2, size_K, u_K };
    }
  }
  return clearest;
}

interface Steps {
  /** Samples to a block. */
  readonly m: number;
  /** By how much the step in the middle of four blocks lies outside its neighbours; by the blocks' first sample. */
  readonly outside_K: Float64Array;
  readonly u_K: number;
}

function stepsOf(sum: Float64Array, m: number): Steps {
  const places = sum.length - 4 * m;
  const bend_K = new Float64Array(places);
  const outside_K = new Float64Array(places);
  for (let i = 0; i < places; i++) {
    const block = (k: number): number => (sum[i + (k + 1) * m]! - sum[i + k * m]!) / m;
    const [a, b, c, d] = [block(0), block(1), block(2), block(3)];
    const [before, step, after] = [b - a, c - b, d - c];
    bend_K[i] = Math.abs(step - after);
    const [low, high] = before < after ? [before, after] : [after, before];
    const size = step > high ? step - high : step < low ? step - low : 0;
    // A spike goes there and comes back; beside a jump the steps are alike.
    outside_K[i] = high - low > Math.abs(size) / 2 ? 0 : size;
  }
  // A difference of two neighbouring steps scatters as what lies outside does, at most.
  return { m, outside_K, u_K: 1.4826 * medianOf(bend_K) };
}
