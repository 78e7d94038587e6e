import { expect, test } from "vitest";
import { InputError } from "../../../stages/errors.js";
import { parseQuantity } from "../../../stages/quantities/quantity.js";
import {
  DIMENSIONS,
  type Dimension,
  findUnit,
  nearestUnit,
  parseUnit,
  UNITS,
} from "../../../stages/quantities/units.js";
import { expectRelative } from "../../expect-relative.js";

// SI Brochure, 9th edition (BIPM 2019): prefixes (table 7), minute, hour, day and litre (table 8), ångström 0.1 nm;
// bar, atm, Torr and mmHg: NIST SP 811 (2008), appendix B.8.
const PUBLISHED: readonly (readonly [string, Dimension, number])[] = [
  ["mK", "temperature", 1e-3],
  ["µK", "temperature", 1e-6],
  ["min", "time", 60],
  ["h", "time", 3600],
  ["d", "time", 86400],
  ["kΩ", "resistance", 1e3],
  ["mOhm", "resistance", 1e-3],
  ["MOhm", "resistance", 1e6],
  ["nA", "current", 1e-9],
  ["uV", "voltage", 1e-6],
  ["nW", "power", 1e-9],
  ["pW", "power", 1e-12],
  ["fW", "power", 1e-15],
  ["pA", "current", 1e-12],
  ["µJ", "energy", 1e-6],
  ["hPa", "pressure", 100],
  ["mbar", "pressure", 100],
  ["MPa", "pressure", 1e6],
  ["atm", "pressure", 101325],
  ["mm3", "volume", 1e-9],
  ["L", "volume", 1e-3],
  ["mg", "mass", 1e-6],
  ["mmol", "amount", 1e-3],
  ["cm3/mol", "molar volume", 1e-6],
  ["m/s", "speed", 1],
  ["1/angstrom", "wavenumber", 1e10],
  ["µK/s", "temperature rate", 1e-6],
  ["W/K", "thermal conductance", 1],
  ["J/K", "heat capacity", 1],
  ["K/W", "thermal resistance", 1],
  ["mK/W", "thermal resistance", 1e-3],
  ["kK/W", "thermal resistance", 1e3],
  ["MK/W", "thermal resistance", 1e6],
  ["K/mW", "thermal resistance", 1e3],
  ["K/µW", "thermal resistance", 1e6],
  ["J/(mol K)", "molar heat capacity", 1],
  ["Hz", "frequency", 1],
  ["%", "dimensionless", 1e-2],
];

test.each(PUBLISHED)("%s is %s, %d of its SI unit", (symbol, dimension, factor) => {
  expect(findUnit(symbol)).toEqual({ symbol, dimension, factor });
});

test("Torr and mmHg as published, to the digits given: 133.3224 Pa", () => {
  // Seven digits are published; the half of the last is 4e-7 of the value.
  expectRelative([findUnit("Torr")!.factor, findUnit("mmHg")!.factor], [133.3224, 133.3224], 4e-7);
});

test("micro sign, Greek mu and u are one prefix; both omegas one unit; cm³ and cm^3 one volume", () => {
  expect(["\u00b5A", "\u03bcA", "uA"].map((symbol) => findUnit(symbol)!.factor)).toEqual([1e-6, 1e-6, 1e-6]);
  expect(["k\u03a9", "k\u2126", "kOhm"].map((symbol) => findUnit(symbol)!.factor)).toEqual([1e3, 1e3, 1e3]);
  expect(["cm³", "cm^3", "cm3 / mol"].map((symbol) => findUnit(symbol)?.symbol)).toEqual([
    "cm3",
    "cm3",
    "cm3/mol",
  ]);
});

test("case is never forgiven: nine decades lie between mOhm and MOhm", () => {
  expect(findUnit("mohm")).toBeUndefined();
  expect(findUnit("MOHM")).toBeUndefined();
  expect(findUnit("k")).toBeUndefined();
});

test.each([
  ["k", "temperature", "K"],
  ["mk", "temperature", "mK"],
  ["kelvin", "temperature", "K"],
  ["sec", "time", "s"],
  ["S", "time", "s"],
  ["ohm", "resistance", "Ohm"],
  ["mohm", "resistance", "mOhm"],
  ["MOHM", "resistance", "MOhm"],
  ["ma", "current", "mA"],
  ["pa", "pressure", "Pa"],
  ["torr", "pressure", "Torr"],
  ["cc", "volume", "cm3"],
  ["cm3/mole", "molar volume", "cm3/mol"],
  ["1/Angstrom", "wavenumber", "1/angstrom"],
] as const)("%s for %s: did you mean %s?", (written, dimension, meant) => {
  expect(nearestUnit(written, dimension)).toBe(meant);
});

test("a unit of another dimension is refused by name", () => {
  expect(() => parseUnit("mV", "current")).toThrow(InputError);
  expect(() => parseUnit("mV", "current")).toThrow(
    'expected a current in A, mA, uA or nA.\n  Way out: mV is the unit of a voltage; give a current, such as "1.5 mA"',
  );
});

test("a unit far from all is answered with the list", () => {
  expect(() => parseUnit("furlong", "speed")).toThrow(
    "furlong is not a unit known here; known are m/s, cm/s, km/s",
  );
});

test("every dimension's example is of that dimension, and its SI unit has factor 1", () => {
  for (const [dimension, { example, si }] of Object.entries(DIMENSIONS) as [
    Dimension,
    { example: string; si: string },
  ][]) {
    expect(parseQuantity(example, dimension).text).toBe(example);
    expect(UNITS.get(si)).toMatchObject({ dimension, factor: 1 });
  }
});
