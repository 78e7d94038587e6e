import { expect, test } from "vitest";
import { effectiveSampleSize } from "../../../stages/numerics/autocorrelation.js";
import { normal, pcg32 } from "../../../stages/numerics/random.js";

/** Mean of n/effectiveSampleSize over many AR(1) records with their mean taken off, as a fit does. */
function meanTime(n: number, correlation: number, records: number): number {
  const z = normal(pcg32(5));
  let sum = 0;
  for (let k = 0; k < records; k++) {
    let state = z() / Math.sqrt(1 - correlation ** 2);
    const r = new Float64Array(n);
    for (let i = 0; i < n; i++) {
      state = correlation * state + z();
      r[i] = state;
    }
    const mean = r.reduce((a, b) => a + b) / n;
    sum += n / effectiveSampleSize(r.map((v) => v - mean));
  }
  return sum / records;
}

// An AR(1) record has 1 + 2Σρᵏ = (1 + ρ)/(1 − ρ), exactly. The estimate scatters by about 2√(lags/n) of itself, which
// 200 records bring below 2 %; what is left is the bias of truncation, with its sign, that the tolerance allows.
test.each([
  [4000, 0, 1, 0.03],
  [4000, 0.5, 3, 0.04],
  [4000, 0.9, 19, 0.04],
  [1000, 0.5, 3, 0.05],
  [200, 0, 1, 0.12],
  [200, 0.8, 9, 0.15],
] as const)("AR(1), %i samples, ρ = %f", (n, correlation, expected, tolerance) => {
  expect(Math.abs(meanTime(n, correlation, 200) / expected - 1)).toBeLessThan(tolerance);
});

test("never more than the samples, never less than one", () => {
  const alternating = Float64Array.from({ length: 100 }, (_, i) => (i % 2 === 0 ? 1 : -1));
  expect(effectiveSampleSize(alternating)).toBe(100);
  expect(effectiveSampleSize(Float64Array.from({ length: 100 }, (_, i) => i - 49.5))).toBeGreaterThanOrEqual(
    1,
  );
  expect(effectiveSampleSize(Float64Array.of(1, -1))).toBe(2);
  expect(effectiveSampleSize(new Float64Array(50))).toBe(50);
});

test("spikes of weight 0 do not make slow noise look fast", () => {
  const slow = Float64Array.from({ length: 1000 }, (_, i) => Math.sin(i / 20));
  const clean = effectiveSampleSize(slow);
  const spiked = slow.slice();
  const weight = new Float64Array(1000).fill(1);
  for (let i = 50; i < 1000; i += 200) {
    spiked[i] = 100;
    weight[i] = 0;
  }
  expect(effectiveSampleSize(spiked)).toBeGreaterThan(5 * clean);
  expect(Math.abs(effectiveSampleSize(spiked, weight) / clean - 1)).toBeLessThan(0.05); // five samples of a thousand
});
