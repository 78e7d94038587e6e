import { expect, test } from "vitest";
import { DomainError } from "../../../stages/errors.js";
import { tabulateHeat } from "../../../stages/simulate/heat-table.js";
import { expectRelative } from "../../expect-relative.js";

const T = [0.111, 0.3, 0.5001, 0.77, 1.2345, 2.9];

test.each([0, 1, 3, 8])("C = T^%i: value, slope and enthalpy", (power) => {
  const table = tabulateHeat((T_K) => T_K.map((t) => t ** power), 0.1, 3, 2000);
  // Hermite cubics leave (h·power)⁴/384 with h = ln(30)/2000 = 0.0017; at power 8 that is 1e-10. The slope loses one order,
  // 1/h; the enthalpy from 0.1 K also carries the digits of its sum.
  expectRelative(
    T.map(table.at),
    T.map((t) => t ** power),
    2e-10,
  );
  if (power > 0)
    expectRelative(
      T.map(table.slope),
      T.map((t) => power * t ** (power - 1)),
      2e-7,
    );
  else for (const t of T) expect(Math.abs(table.slope(t))).toBeLessThan(1e-10);
  const enthalpy = (t: number) => (t ** (power + 1) - 0.1 ** (power + 1)) / (power + 1);
  expectRelative(T.map(table.enthalpy), T.map(enthalpy), 1e-9);
});

test("an activated heat capacity, as steep as helium's", () => {
  const C = (t: number) => Math.exp(-8.6 / t) * (8.6 / t) ** 2;
  const table = tabulateHeat((T_K) => T_K.map(C), 0.1, 3, 2000);
  // d ln C/d ln T is 29 at 0.3 K: (29·0.0017)⁴/384 = 1.6e-8 there; helium's own phonons hide it. From 0.7 K on: 12, 5e-10.
  expectRelative([0.3, 0.35].map(table.at), [0.3, 0.35].map(C), 3e-8);
  expectRelative([0.7, 1, 1.3].map(table.at), [0.7, 1, 1.3].map(C), 1e-9);
});

test("outside the table there is no heat capacity", () => {
  const table = tabulateHeat((T_K) => T_K, 0.2, 1, 100);
  expect(() => table.at(1.01)).toThrow(DomainError);
  expect(() => table.enthalpy(0.19)).toThrow("went to 0.1900 K, outside 0.200 K to 1.00 K");
});
