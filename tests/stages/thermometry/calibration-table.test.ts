import { expect, test } from "vitest";
import { type CalibrationTable, calibrationTable } from "../../../stages/thermometry/calibration-table.js";
import { expectRelative } from "../../expect-relative.js";

function tableOf(
  resistance: readonly number[],
  temperature: (R: number, i: number) => number,
): CalibrationTable {
  return {
    file: "ge-31.csv",
    line: Int32Array.from(resistance, (_, i) => i + 2),
    resistance_Ohm: Float64Array.from(resistance),
    temperature_K: Float64Array.from(resistance, temperature),
  };
}
const spread = (n: number, low: number, high: number) =>
  Array.from({ length: n }, (_, i) => low * (high / low) ** (i / (n - 1)));
const between = spread(997, 200, 50_000);

// ln T is a cubic in ln R here, which a not-a-knot spline gives back exactly: only rounding is left, about 1e-15
// in ln T times the condition of four close knots.
test("a curve that is cubic in ln R comes back to 12 digits", () => {
  const curve = (R: number) =>
    Math.exp(4 - 0.6 * Math.log(R) - 0.004 * Math.log(R) ** 2 + 0.001 * Math.log(R) ** 3);
  const { temperature_K } = calibrationTable(tableOf(spread(12, 200, 50_000), curve));
  expectRelative(between.map(temperature_K), between.map(curve), 1e-12);
});

// Variable-range hopping, R = R₀ exp((T₀/T)^¼), the law of doped germanium (Mott, Phil. Mag. 19, 835 (1969)):
// T = T₀/ln(R/R₀)⁴. With n knots the spline's error in ln T is (5/384) h⁴ |d⁴ ln T/dx⁴|, x = ln R; the fourth
// derivative of −4 ln(x − x₀) is 24/(x − x₀)⁴, at most 24/3⁴ here, and h = 5.52/60: 2.8e-7; the ends do worse by some
// ten times. 1e-5 is the five digits asked of a table.
test("a hopping law through 61 points is good to 5 digits between them, in either order of rows", () => {
  const curve = (R: number) => 50 / Math.log(R / 10) ** 4;
  const points = spread(61, 200, 50_000);
  for (const resistance of [points, points.toReversed()]) {
    const { temperature_K } = calibrationTable(tableOf(resistance, curve));
    expectRelative(between.map(temperature_K), between.map(curve), 1e-5);
  }
});

test("a thermometer whose resistance rises with temperature is served too", () => {
  const { temperature_K, temperatureRange_K } = calibrationTable(tableOf([10, 20, 40, 80], (R) => R / 10));
  // ln T = ln R − ln 10 is a straight line: rounding only.
  expectRelative([temperature_K(30)], [3], 1e-14);
  expectRelative(temperatureRange_K, [1, 8], 0);
});

test("outside the table there is no temperature; on its ends there is", () => {
  const calibration = calibrationTable(tableOf([10, 20, 40, 80], (R) => 80 / R));
  expect(calibration.resistanceRange_Ohm).toEqual([10, 80]);
  expect(calibration.temperature_K(9.999999)).toBeNaN();
  expect(calibration.temperature_K(80.000001)).toBeNaN();
  // exp(ln T) rounds in the last digit.
  expectRelative([calibration.temperature_K(10), calibration.temperature_K(80)], [8, 1], 1e-15);
  expect(calibration.form).toBe("table");
});

test.each<[string, number[], number[], string]>([
  [
    "too few rows",
    [10, 20, 40],
    [4, 2, 1],
    'ge-31.csv: found "3 rows"; expected a calibration table of at least 4 rows.\n  Way out: add calibration points, or use form: log-polynomial or form: chebyshev',
  ],
  [
    "a resistance twice",
    [10, 20, 20, 40],
    [4, 2, 2.1, 1],
    'ge-31.csv:4: resistance is "20"; expected each resistance once; line 3 has it too.\n  Way out: leave one of the two rows out, or put their mean in their place',
  ],
  [
    "a temperature out of order",
    [10, 20, 40, 80],
    [4, 2, 2.5, 1],
    'ge-31.csv:4: temperature is "2.5"; expected temperatures that fall as the resistance rises, as in the rest of the table.\n  Way out: check this row against the calibration certificate and the rows beside it',
  ],
  [
    "a temperature below zero",
    [10, 20, 40, 80],
    [4, 2, -1, 0.5],
    'ge-31.csv:4: temperature is "-1"; expected a temperature above zero.\n  Way out: mend or leave out this row',
  ],
  [
    "points through which a spline swings back",
    [10, 20, 21, 40, 80],
    [4, 3.9, 1.3, 1.2, 1.1],
    'ge-31.csv:3: resistance is "10 to 20 Ohm"; expected a smooth calibration; between these two points the curve through the table turns back.\n  Way out: check both rows for a slip, or add calibration points between them',
  ],
])("refused: %s", (_, resistance, temperature, message) => {
  const table = tableOf(resistance, (_R, i) => temperature[i]!);
  expect(() => calibrationTable(table)).toThrow(message);
});
