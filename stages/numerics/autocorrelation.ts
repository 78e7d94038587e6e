/** Correlation is followed no further: 400 lags, or a quarter of the samples. */
const MOST_LAGS = 400;

/**
 * Stopping at the first negative pair keeps the chance correlations that happened to be positive: white noise seems
 * correlated by this over √n. Measured on normal noise, n = 50…4000 (autocorrelation.test.ts), and taken off.
 */
const CHANCE = 1.8;

/**
 * Independent samples that correlated noise amounts to: n / (1 + 2 Σ ρ_k), so that the variance of a mean is
 * variance/effectiveSampleSize. The sum runs over pairs of lags while they are positive (Geyer's initial positive
 * sequence, Stat. Sci. 7, 473 (1992), with his monotone bound).
 * @param residual length n, evenly spaced in time, mean near zero
 * @param weight length n; samples of weight 0 (spikes) do not count as noise; null: all count
 * @returns between 1 and the number of counted samples
 */
export function effectiveSampleSize(residual: Float64Array, weight: Float64Array | null = null): number {
  const n = residual.length;
  let counted = n;
  let r = residual;
  if (weight !== null) {
    counted = 0;
    r = new Float64Array(n);
    for (let i = 0; i < n; i++) {
      if (weight[i]! <= 0) continue;
      r[i] = residual[i]!;
      counted++;
    }
  }
  const variance = lagProduct(r, 0);
  if (counted < 4 || variance === 0) return counted;
  const lags = Math.min(MOST_LAGS, Math.floor(n / 4));
  let sum = 0;
  let bound = Number.POSITIVE_INFINITY;
  for (let k = 0; k + 1 <= lags; k += 2) {
    const pair = (lagProduct(r, k) + lagProduct(r, k + 1)) / variance;
    if (pair <= 0) break;
    bound = Math.min(bound, pair);
    sum += bound;
  }
  const time = 2 * sum - 1 - CHANCE / Math.sqrt(counted);
  return Math.max(1, counted / Math.max(1, time));
}

function lagProduct(r: Float64Array, lag: number): number {
  let sum = 0;
  for (let i = lag; i < r.length; i++) sum += r[i]! * r[i - lag]!;
  return sum;
}
