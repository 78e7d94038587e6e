import { medianOf } from "./order.js";

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
