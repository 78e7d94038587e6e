import { expect, test } from "vitest";
import { calibrationOf } from "../../../stages/thermometry/calibration.js";
import { chebyshev } from "../../../stages/thermometry/chebyshev.js";
import {
  type ChebyshevConfig,
  type LogPolynomialConfig,
  thermometerSchema,
} from "../../../stages/thermometry/config.js";
import { logPolynomial } from "../../../stages/thermometry/log-polynomial.js";
import { expectRelative } from "../../expect-relative.js";

const ohm = (value: number) => ({ value, u: 0, text: `${value} Ohm` });
const standard_uncertainty = { value: 2e-4, u: 0, text: "0.2 mK" };
const slope_standard_uncertainty = { value: 5e-4, u: 0, text: "0.05 %" };
const resistances = Array.from({ length: 301 }, (_, i) => 100 * 1000 ** (i / 300));

const polynomial = (coefficients: number[]): LogPolynomialConfig => ({
  form: "log-polynomial",
  coefficients,
  resistance_range: [ohm(100), ohm(100_000)],
  standard_uncertainty,
  slope_standard_uncertainty,
});

const series = (change: Partial<ChebyshevConfig>): ChebyshevConfig => ({
  form: "chebyshev",
  coefficients: [1, -0.5],
  variable: "log10 R",
  variable_range: [2, 5],
  quantity: "T",
  resistance_range: [ohm(100), ohm(100_000)],
  standard_uncertainty,
  slope_standard_uncertainty,
  ...change,
});

// A power law is the closed form of a polynomial of degree one; exp and ln round to about 1e-15 each.
test("ln T = a + b ln R is a power law", () => {
  const { temperature_K } = logPolynomial(polynomial([Math.log(300), -0.75]));
  expectRelative(
    resistances.map(temperature_K),
    resistances.map((R) => 300 * R ** -0.75),
    1e-13,
  );
});

// The definition T_i(x) = cos(i arccos x) is evaluated directly; Clenshaw's rounding is some 1e-15 of Σ|aᵢ| = 5,
// and T is 0.3 at the least.
test("a Chebyshev series is the sum of cosines that defines it", () => {
  const coefficients = [2.5, -2, 0.3, -0.05, 0.02];
  const { temperature_K } = chebyshev(series({ coefficients }));
  const direct = (R: number) => {
    const x = Math.max(-1, Math.min(1, (2 * Math.log10(R) - 7) / 3));
    return coefficients.reduce((sum, a, i) => sum + a * Math.cos(i * Math.acos(x)), 0);
  };
  expectRelative(resistances.map(temperature_K), resistances.map(direct), 1e-13);
});

test("ln T and log10 T, ln R and log10 R say the same in other numbers", () => {
  const inLog10 = chebyshev(series({ quantity: "log10 T" }));
  const inLn = chebyshev(
    series({
      quantity: "ln T",
      coefficients: [1, -0.5].map((a) => a * Math.LN10),
      variable: "ln R",
      variable_range: [Math.log(100), Math.log(100_000)],
    }),
  );
  // log10 T = 1 − x/2 and x = (2 log10 R − 7)/3: T = 10^(13/6) R^(−1/3). Rounding of exp and ln only.
  const closed = resistances.map((R) => 10 ** (13 / 6) * R ** (-1 / 3));
  expectRelative(resistances.map(inLog10.temperature_K), closed, 1e-13);
  expectRelative(resistances.map(inLn.temperature_K), closed, 1e-13);
  expectRelative(inLn.temperatureRange_K, [10 ** 0.5, 10 ** 1.5], 1e-13);
});

test("beyond its range a series gives no temperature", () => {
  const calibration = calibrationOf({ calibration: series({}), scale: "ITS-90", lag: "auto" }, null);
  expect(calibration.temperature_K(99.9)).toBeNaN();
  expect(calibration.temperature_K(100_001)).toBeNaN();
});

test("scale and uncertainties go with a calibration of any form", () => {
  const known = {
    scale: "PLTS-2000",
    u_temperature_K: 2e-4,
    u_slope: 5e-4,
    lag_s: null,
    u_lag_s: 0,
    selfHeating: null,
  };
  for (const calibration of [series({}), polynomial([6, -0.75])]) {
    expect(calibrationOf({ calibration, scale: "PLTS-2000", lag: "auto" }, null)).toMatchObject(known);
  }
  const rows = Float64Array.of(10, 20, 40, 80);
  const table = { file: "t.csv", line: new Int32Array(4), resistance_Ohm: rows, temperature_K: rows };
  const config = thermometerSchema.parse({
    thermometer: "ge-31",
    scale: "PLTS-2000",
    calibration: {
      form: "table",
      file: "t.csv",
      temperature: { column: "T", unit: "K" },
      resistance: { column: "R", unit: "Ohm" },
      standard_uncertainty: "0.2 mK",
      slope_standard_uncertainty: "0.05 %",
    },
  });
  expect(calibrationOf(config, table)).toMatchObject({ ...known, form: "table" });
  const late = { ...config, lag: { value: 2, u: 0.5, text: "2 ± 0.5 s" } };
  expect(calibrationOf(late, table)).toMatchObject({ lag_s: 2, u_lag_s: 0.5 });
});

test.each([
  [
    "a series that turns back",
    () => chebyshev(series({ coefficients: [2, 0, 1] })),
    /^calibration\.coefficients is ".*"; expected a curve that only rises or only falls over the range; here it turns back\./,
  ],
  [
    "a series that goes below zero",
    () => chebyshev(series({ coefficients: [0.41, -0.5] })),
    /^calibration\.coefficients is "at 5\.\d+e\+4 Ohm it gives -.*"; expected a temperature above zero over the whole range\./,
  ],
  ["a polynomial that turns back", () => logPolynomial(polynomial([0, 2, -0.13])), /here it turns back/],
  [
    "a range beyond the variable's",
    () => chebyshev(series({ resistance_range: [ohm(90), ohm(1000)] })),
    /^calibration\.resistance_range\[0\] is "90 Ohm"; expected a resistance whose log10 R is within variable_range, 2 to 5\./,
  ],
])("refused: %s", (_, build, message) => {
  expect(build).toThrow(message);
});
