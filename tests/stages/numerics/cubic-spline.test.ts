import { expect, test } from "vitest";
import { cubicSpline } from "../../../stages/numerics/cubic-spline.js";
import { expectRelative } from "../../expect-relative.js";

const knots = Float64Array.of(0, 0.7, 1.1, 2.4, 3, 4.5);

test("not-a-knot gives a cubic back", () => {
  const f = (x: number) => 1 + x - 2 * x * x + 0.5 * x ** 3;
  const spline = cubicSpline(knots, knots.map(f), "not-a-knot");
  for (const x of [0.01, 0.9, 2, 2.7, 4.4]) {
    // Rounding of a 4 × 4 system with values near 10.
    expect(Math.abs(spline.value(x) - f(x))).toBeLessThan(1e-13);
    expect(Math.abs(spline.slope(x) - (1 - 4 * x + 1.5 * x * x))).toBeLessThan(1e-12);
    expect(Math.abs(spline.curvature(x) - (-4 + 3 * x))).toBeLessThan(1e-12);
  }
});

test("three knots are one parabola, two a line", () => {
  const parabola = cubicSpline(Float64Array.of(0, 1, 3), Float64Array.of(0, 1, 9), "not-a-knot");
  expectRelative([parabola.value(2), parabola.slope(2), parabola.curvature(0.5)], [4, 4, 2], 1e-14);
  const line = cubicSpline(Float64Array.of(0, 2), Float64Array.of(1, 5), "not-a-knot");
  expectRelative([line.value(0.5), line.slope(1.9)], [2, 2], 1e-15);
});

test("natural: no curvature at the ends, and the classic three-point solution", () => {
  const spline = cubicSpline(Float64Array.of(0, 1, 2), Float64Array.of(0, 1, 0), "natural");
  // By hand: M₁ = 6·(−1 − 1)/4 = −3, S(1/2) = 1/2 + 3/16.
  expectRelative([spline.curvature(1), spline.value(0.5)], [-3, 0.6875], 1e-15);
  expect(spline.curvature(0)).toBe(0);
  expect(spline.curvature(2)).toBe(0);
});

test("value, slope and curvature are continuous at the knots", () => {
  const spline = cubicSpline(knots, knots.map(Math.sin), "natural");
  for (const x of knots.subarray(1, 5)) {
    const d = 1e-9;
    expect(Math.abs(spline.value(x + d) - spline.value(x - d))).toBeLessThan(1e-8);
    expect(Math.abs(spline.slope(x + d) - spline.slope(x - d))).toBeLessThan(1e-8);
    expect(Math.abs(spline.curvature(x + d) - spline.curvature(x - d))).toBeLessThan(1e-8);
  }
});

test("a cursor gives the same numbers, wherever it is sent", () => {
  const spline = cubicSpline(knots, knots.map(Math.cos), "not-a-knot");
  const cursor = spline.cursor();
  for (const x of [4.5, 0, 0.5, 0.7, 1, 2.3, 2.5, 4.4, 0.1, 3, 2.99]) {
    expect(cursor.value(x)).toBe(spline.value(x));
    expect(cursor.slope(x)).toBe(spline.slope(x));
  }
});

test("nothing outside the knots", () => {
  const spline = cubicSpline(knots, knots, "natural");
  for (const x of [-1e-9, 4.5000001, Number.NaN]) {
    expect(spline.value(x)).toBeNaN();
    expect(spline.cursor().value(x)).toBeNaN();
  }
  expect(spline.range).toEqual([0, 4.5]);
});

test("knots must increase", () => {
  expect(() => cubicSpline(Float64Array.of(0, 1, 1), Float64Array.of(0, 0, 0), "natural")).toThrow(
    /does not lie/,
  );
});
