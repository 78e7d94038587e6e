import { expect, test } from "vitest";
import { fitPolynomial } from "../../../stages/numerics/polynomial.js";
import { expectRelative } from "../../expect-relative.js";

const cubic = (x: number) => 2 - 3 * x + 0.5 * x * x + 0.25 * x ** 3;
const grid = (n: number, from: number, to: number) =>
  Float64Array.from({ length: n }, (_, i) => from + ((to - from) * i) / (n - 1));

test("a cubic is found again, slope too", () => {
  const x = grid(41, -2, 5);
  const fit = fitPolynomial(x, x.map(cubic), null, 3);
  // Rounding only: values up to 40, forty terms.
  for (const at of [-2, 0.3, 4.9]) {
    expect(Math.abs(fit.value(at) - cubic(at))).toBeLessThan(1e-13);
    expect(Math.abs(fit.slope(at) - (-3 + at + 0.75 * at * at))).toBeLessThan(1e-12);
  }
  expect(fit.effectiveDegreesOfFreedom).toBe(37);
  expect(fit.sumOfSquares).toBeLessThan(1e-24);
});

test("a straight line has the textbook variances", () => {
  const x = Float64Array.of(1, 2, 4, 7, 11);
  const y = Float64Array.of(2, 1, 5, 4, 9);
  const fit = fitPolynomial(x, y, null, 1);
  const mean = 5;
  const Sxx = [1, 2, 4, 7, 11].reduce((sum, v) => sum + (v - mean) ** 2, 0);
  // var(ŷ) = 1/n + (x − x̄)²/Sxx for unit variance; both sides rounded once or twice.
  expectRelative([fit.variance(3), fit.variance(20)], [1 / 5 + 4 / Sxx, 1 / 5 + 225 / Sxx], 1e-14);
  const slope = [1, 2, 4, 7, 11].reduce((sum, v, i) => sum + (v - mean) * y[i]!, 0) / Sxx;
  expectRelative([fit.slope(0)], [slope], 1e-14);
});

test("weights: 0 leaves a sample out, 2 counts it twice", () => {
  const x = Float64Array.of(0, 1, 2, 3, 4);
  const y = Float64Array.of(1, 2.2, 2.9, 1e9, 5.2);
  const weighted = fitPolynomial(x, y, Float64Array.of(1, 2, 1, 0, 1), 1);
  const doubled = fitPolynomial(
    Float64Array.of(0, 1, 1, 2, 4),
    Float64Array.of(1, 2.2, 2.2, 2.9, 5.2),
    null,
    1,
  );
  expectRelative(
    [weighted.value(3), weighted.slope(3), weighted.variance(3), weighted.sumOfSquares],
    [doubled.value(3), doubled.slope(3), doubled.variance(3), doubled.sumOfSquares],
    1e-12, // order of the sums
  );
  expect(weighted.effectiveDegreesOfFreedom).toBe(2);
});

test("epoch seconds cost no digits", () => {
  const x = grid(4000, 1.8e9, 1.8e9 + 400);
  const y = x.map((t) => 0.5 + 1e-5 * (t - 1.8e9) + 1e-9 * (t - 1.8e9) ** 2);
  const fit = fitPolynomial(x, y, null, 2);
  // Epoch seconds are stored to 2⁻²² s, so x itself carries 1e-9 of the span; y moves by 1e-12 of itself with it.
  expectRelative([fit.value(1.8e9 + 200)], [0.5 + 2e-3 + 4e-5], 1e-11);
});

test("too few distinct abscissae: no slope is made up", () => {
  const fit = fitPolynomial(Float64Array.of(2, 2, 2), Float64Array.of(1, 2, 3), null, 1);
  expect(fit.value(2)).toBe(2);
  expect(fit.slope(2)).toBe(0);
  expect(fit.variance(3)).toBe(Number.POSITIVE_INFINITY);
});
