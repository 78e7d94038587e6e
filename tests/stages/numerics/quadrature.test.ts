import { expect, test } from "vitest";
import { integrate } from "../../../stages/numerics/quadrature.js";
import { expectRelative } from "../../expect-relative.js";

test("closed forms", () => {
  // The default target is 1e-13; the closed forms are exact.
  expectRelative([integrate(Math.exp, 0, 1)], [Math.E - 1], 1e-13);
  expectRelative([integrate((x) => 1 / (1 + x * x), -4, 4)], [2 * Math.atan(4)], 1e-13);
  expectRelative([integrate((x) => Math.sin(x) ** 2, 0, 20)], [10 - Math.sin(40) / 4], 1e-13);
  expectRelative([integrate((x) => x ** 22, -1, 1)], [2 / 23], 1e-14); // exact for the rule: checks every weight
});

test("the phonon integral: ∫ x⁴eˣ/(eˣ−1)² = 4π⁴/15 (Abramowitz and Stegun 27.1)", () => {
  const kernel = (x: number) => (x ** 4 * Math.exp(-x)) / Math.expm1(-x) ** 2;
  expectRelative([integrate(kernel, 0, 60)], [(4 * Math.PI ** 4) / 15], 1e-13); // the tail is below 1e-20
});

test("a narrow peak is found by halving", () => {
  expectRelative(
    [integrate((x) => Math.exp(-((x - 3) ** 2) * 1e4), 0, 10)],
    [Math.sqrt(Math.PI) / 100],
    1e-12,
  );
});

test("an end singularity is reached", () => {
  // x^{-1/2} is not smooth: the error estimate, not the rule, is what is tested.
  expectRelative([integrate((x) => 1 / Math.sqrt(x), 0, 1, 1e-9)], [2], 1e-8);
});

test("orientation, and an empty interval", () => {
  expectRelative([integrate(Math.exp, 1, 0)], [1 - Math.E], 1e-13);
  expect(integrate(Math.exp, 2, 2)).toBe(0);
});

test("an integrand that is not finite is said", () => {
  expect(() => integrate(() => Number.NaN, 0, 1)).toThrow(/not finite/);
});
