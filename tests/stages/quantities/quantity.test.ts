import { expect, test } from "vitest";
import { parseQuantity } from "../../../stages/quantities/quantity.js";
import type { Dimension } from "../../../stages/quantities/units.js";
import { expectRelative } from "../../expect-relative.js";

// Two products of doubles at most: a few units of 2^-53.
const ROUNDING = 5e-16;

test.each<readonly [string, Dimension, number, number]>([
  ["3.015 ± 0.006 cm3", "volume", 3.015e-6, 6e-9],
  ["3.015 +/- 0.006 cm3", "volume", 3.015e-6, 6e-9],
  ["(3.015 ± 0.006) cm3", "volume", 3.015e-6, 6e-9],
  ["3.015±0.006cm3", "volume", 3.015e-6, 6e-9],
  ["24.1 g ± 100 mg", "mass", 0.0241, 1e-4],
  ["0.5 ± 2 % mol", "amount", 0.5, 0.01],
  ["0.5 mol ± 2 %", "amount", 0.5, 0.01],
  ["-2 ± 10 % s", "time", -2, 0.2],
  ["8 h", "time", 28800, 0],
  ["2.4\u00a0± 0.2 Ohm", "resistance", 2.4, 0.2],
  ["\u22120.4 s", "time", -0.4, 0],
  ["1.5e-3 A", "current", 1.5e-3, 0],
  ["1.2E+3 ± 1e1 Pa", "pressure", 1200, 10],
  [".5 K", "temperature", 0.5, 0],
  ["1.92 1/angstrom", "wavenumber", 1.92e10, 0],
  ["27.58 ± 0.03 cm3/mol", "molar volume", 27.58e-6, 3e-8],
  ["0.5 ± 0.1", "dimensionless", 0.5, 0.1],
  ["0.02 %", "dimensionless", 2e-4, 0],
  ["(50 ± 10) %", "dimensionless", 0.5, 0.1],
  ["50 % ± 10 %", "dimensionless", 0.5, 0.1],
  ["0.5 ± 10 % 1", "dimensionless", 0.5, 0.05],
  ["0", "dimensionless", 0, 0],
])("%s", (written, dimension, value, u) => {
  const read = parseQuantity(written, dimension);
  expectRelative([read.value], [value], ROUNDING);
  expectRelative([read.u], [u], ROUNDING);
  expect(read.text).toBe(written.trim());
});

test.each<readonly [string, Dimension, string]>([
  ["3.015", "volume", "add the unit, such as cm3"],
  ["", "volume", 'write a number, then its unit, such as "3.015 cm3"'],
  ["big cm3", "volume", 'write a number, then its unit, such as "3.015 cm3"'],
  ["3,015 ± 0,006 cm3", "volume", 'write a decimal point and no thousands separator: "3.015 ± 0.006 cm3"'],
  ["3 ± 1 ± 1 cm3", "volume", "write ± once"],
  ["3 ± -1 cm3", "volume", "an uncertainty is not negative; drop its sign"],
  ["3 ± cm3", "volume", 'write a number, then its unit, such as "3.015 cm3"'],
  ["3 cm3 ± 1", "volume", "add the unit, such as cm3"],
  ["3 cm3 ± 1 % cm3", "volume", "write the unit once, at the end"],
  ["3 cm3 ± 1 K", "volume", 'K is the unit of a temperature; give a volume, such as "3.015 cm3"'],
  ["1e999 K", "temperature", "the number is beyond what a computer holds; check the exponent"],
  ["22 °C", "temperature", "convert to kelvin: T/K = t/°C + 273.15"],
  ["5 k", "temperature", "k is not a unit known here; did you mean K?"],
  [
    "0.5 ± 10 %",
    "dimensionless",
    'say of what the percentage is: "0.5 ± 0.05" if of the value, "(0.5 ± 10) %" if both are percentages',
  ],
])("%s is refused", (written, dimension, wayOut) => {
  expect(refusal(written, dimension)).toMatchObject({ value: written, wayOut });
});

function refusal(written: string, dimension: Dimension): unknown {
  try {
    return parseQuantity(written, dimension);
  } catch (error) {
    return (error as { fault: unknown }).fault;
  }
}

test("the fault carries the dimension wanted", () => {
  expect(() => parseQuantity("3 K", "pressure")).toThrow(
    'found "3 K"; expected a pressure in Pa, hPa, mbar or bar.\n  Way out: K is the unit of a temperature; give a pressure, such as "20 bar"',
  );
});
