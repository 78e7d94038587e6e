import type { Separation } from "../separate/types.js";
import type { BetweenNights, NightOffset } from "./types.js";

/**
 * Do the nights agree? Each night's weighted mean of (C − fit)/fit, and the Birge ratio of those means: 1 within
 * √(1/2(K − 1)) where nothing but repeatability parts K nights, more where something changes from night to night.
 * The fit has been pulled towards every night, so a few points a night make the ratio a little too small.
 * @param run length of the separation's input: the night each point is from
 * @see Birge, Phys. Rev. 40, 207 (1932)
 */
export function betweenNights(separation: Separation, run: readonly string[]): BetweenNights {
  const { row, Cv_J_per_mol_K: C, fit_J_per_mol_K: fit, u_repeat_J_per_mol_K: u } = separation.curve;
  const sums = new Map<string, { points: number; weight: number; weighted: number }>();
  for (let i = 0; i < row.length; i++) {
    const night = run[row[i]!]!;
    const sum = sums.get(night) ?? { points: 0, weight: 0, weighted: 0 };
    const weight = (fit[i]! / u[i]!) ** 2;
    sums.set(night, {
      points: sum.points + 1,
      weight: sum.weight + weight,
      weighted: sum.weighted + weight * (C[i]! / fit[i]! - 1),
    });
  }
  const nights = [...sums].map(
    ([night, sum]): NightOffset => ({
      run: night,
      points: sum.points,
      relative_offset: sum.weighted / sum.weight,
      u_relative_offset: 1 / Math.sqrt(sum.weight),
    }),
  );
  const weights = nights.map((night) => night.u_relative_offset ** -2);
  const total = weights.reduce((a, b) => a + b, 0);
  const mean = nights.reduce((sum, night, i) => sum + weights[i]! * night.relative_offset, 0) / total;
  const chiSquared = nights.reduce(
    (sum, night, i) => sum + weights[i]! * (night.relative_offset - mean) ** 2,
    0,
  );
  return {
    nights,
    birge_ratio: nights.length > 1 ? Math.sqrt(chiSquared / (nights.length - 1)) : null,
  };
}
