import { readFileSync } from "node:fs";
import { Matrix } from "ml-matrix";
import { expect, test } from "vitest";
import { linearLeastSquares } from "../../../stages/numerics/linear.js";
import { expectRelative } from "../../expect-relative.js";
import { parameters, referenceSet } from "./nist-strd.js";

function powers(x: Float64Array, exponents: readonly number[]): Matrix {
  return new Matrix(Array.from(x, (at) => exponents.map((e) => at ** e)));
}

// Certified to 15 digits. QR in double precision keeps about 16 − log₁₀(condition of the scaled design): the fifth
// degree on 0…20 costs seven digits in the coefficients of Wampler1 and 2, where nothing is left of the residual.
test.each([
  ["Norris", [0, 1], 1e-9, 1e-9],
  ["Pontius", [0, 1, 2], 1e-9, 1e-9],
  ["NoInt1", [1], 1e-9, 1e-9],
  ["NoInt2", [1], 1e-9, 1e-9],
  ["Wampler1", [0, 1, 2, 3, 4, 5], 1e-9, null],
  ["Wampler2", [0, 1, 2, 3, 4, 5], 1e-9, null],
  ["Wampler3", [0, 1, 2, 3, 4, 5], 1e-9, 1e-9],
] as const)("NIST StRD %s", (name, exponents, coefficientTolerance, deviationTolerance) => {
  const set = referenceSet(name);
  const fit = linearLeastSquares(powers(set.data.get("x")!, exponents), set.data.get("y")!, null);
  const certified = parameters(set);
  expectRelative(
    fit.value,
    certified.map((row) => row[0]!),
    coefficientTolerance,
  );
  const deviation = certified.map((row) => row[1]!);
  const scatter = set.certified.get("residual_standard_deviation")!;
  if (deviationTolerance === null) {
    // Certified as exactly 0: what is left is rounding of y, up to 4·10⁶ in Wampler1.
    expect(fit.residualStandardDeviation).toBeLessThan(1e-8);
  } else {
    expectRelative(fit.standardDeviation, deviation, deviationTolerance);
    expectRelative([fit.residualStandardDeviation], scatter, deviationTolerance);
  }
  expect(fit.degreesOfFreedom).toBe(set.data.get("y")!.length - exponents.length);
  expect(fit.undetermined).toEqual([]);
});

// A constant by least squares is a mean. NumAcc2 and Mavro have data that a double cannot hold exactly (1e-16),
// which their standard deviations see divided by themselves.
test.each([
  ["NumAcc1", 1e-15, 1e-9],
  ["NumAcc2", 1e-14, 1e-9],
  ["Mavro", 1e-14, 1e-9],
  ["Michelso", 1e-14, 1e-9],
] as const)("NIST StRD %s", (name, meanTolerance, deviationTolerance) => {
  const { certified, data } = referenceSet(name);
  const fit = linearLeastSquares(powers(data.get("y")!, [0]), data.get("y")!, null);
  expectRelative(fit.value, certified.get("mean")!, meanTolerance);
  expectRelative([fit.residualStandardDeviation], certified.get("standard_deviation")!, deviationTolerance);
});

test("GUM H.3: calibration of a thermometer", () => {
  const text = readFileSync(
    new URL("../../../fixtures/published/gum-h3-thermometer.csv", import.meta.url),
    "utf8",
  );
  const rows = text
    .trimEnd()
    .split("\n")
    .filter((line) => /^[\d]/.test(line))
    .map((line) => line.split(",").map(Number));
  const t = Float64Array.from(rows, (row) => row[0]! - 20);
  const b = Float64Array.from(rows, (row) => row[1]!);
  const fit = linearLeastSquares(powers(t, [0, 1]), b, null);
  const r = fit.covariance.get(0, 1) / (fit.standardDeviation[0]! * fit.standardDeviation[1]!);
  const at30 = fit.value[0]! + 10 * fit.value[1]!;
  const u30 = Math.sqrt(
    fit.covariance.get(0, 0) + 20 * fit.covariance.get(0, 1) + 100 * fit.covariance.get(1, 1),
  );
  // The GUM prints −0.1712(29), 0.002 18(67), −0.930, 0.0035, −0.1494(41): half a unit of the last digit each.
  const printed: readonly (readonly [number, number, number])[] = [
    [fit.value[0]!, -0.1712, 5e-5],
    [fit.standardDeviation[0]!, 0.0029, 5e-5],
    [fit.value[1]!, 0.00218, 5e-6],
    [fit.standardDeviation[1]!, 0.00067, 5e-6],
    [r, -0.93, 5e-4],
    [fit.residualStandardDeviation, 0.0035, 5e-5],
    [at30, -0.1494, 5e-5],
    [u30, 0.0041, 5e-5],
  ];
  for (const [actual, expected, half] of printed)
    expect(Math.abs(actual - expected)).toBeLessThanOrEqual(half);
  // Recomputed from the printed data by an independent program, digits as kept in the fixture.
  expectRelative(
    [...fit.value, ...fit.standardDeviation, r, fit.residualStandardDeviation, at30, u30],
    [-0.17120379, 0.0021827, 0.0028776, 0.00066794, -0.93043, 0.00349756, -0.14937681, 0.0041386],
    1e-5, // five digits of 0.00066794
  );
});

test("with u the covariance is absolute: a weighted mean", () => {
  const y = Float64Array.of(1, 4, 2);
  const u = Float64Array.of(0.5, 2, 1);
  const fit = linearLeastSquares(powers(y, [0]), y, u);
  const weight = 4 + 1 / 4 + 1;
  expectRelative(
    [fit.value[0]!, fit.standardDeviation[0]!, fit.chiSquared],
    [
      (4 + 1 + 2) / weight,
      1 / Math.sqrt(weight),
      4 * (1 - 4 / 3) ** 2 + (4 - 4 / 3) ** 2 / 4 + (2 - 4 / 3) ** 2,
    ],
    1e-14,
  );
  expectRelative(fit.residual, [1 - 4 / 3, 4 - 4 / 3, 2 - 4 / 3], 1e-14);
});

test("columns that cannot be told apart are said; the others stand", () => {
  const x = Float64Array.of(1, 2, 3, 4, 5);
  const y = x.map((at) => 3 + 2 * at);
  const design = new Matrix(Array.from(x, (at) => [1, at, 7 * at]));
  const fit = linearLeastSquares(design, y, null);
  expect(fit.rank).toBe(2);
  expect(fit.undetermined).toEqual([1, 2]);
  expect(fit.value[1]).toBeNaN();
  expect(fit.covariance.get(2, 2)).toBeNaN();
  expectRelative([fit.value[0]!], [3], 1e-13);
  expect(fit.chiSquared).toBeLessThan(1e-26);
});

test("fewer data than coefficients", () => {
  const fit = linearLeastSquares(new Matrix([[1, 2]]), Float64Array.of(3), null);
  expect(fit.undetermined).toEqual([0, 1]);
  expect(fit.chiSquared).toBeLessThan(1e-28);
  expect(fit.residualStandardDeviation).toBeNaN();
});

test("columns of very different size do not disturb each other", () => {
  const T = Float64Array.of(0.3, 0.4, 0.5, 0.7, 0.9, 1.1);
  const y = T.map((at) => 1e-9 * at ** -2 + 0.08 * at ** 3);
  const fit = linearLeastSquares(powers(T, [-2, 3]), y, null);
  // 1e-9/0.09 beside 1e-1: the small term keeps what rounding of y leaves of it.
  expectRelative(fit.value, [1e-9, 0.08], 1e-8);
});
