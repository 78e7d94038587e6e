import { expect, test } from "vitest";
import { amountFromGas } from "../../../stages/molar/amount.js";
import { expectRelative } from "../../expect-relative.js";

const quantity = (value: number, u: number) => ({ value, u, text: `${value} ± ${u}` });

// Handbook density of helium at 0 °C and 101325 Pa, 0.1785 kg/m³ (from memory, four digits); M = 4.002602 g/mol.
test("a cubic metre at standard conditions holds the handbook's density", () => {
  const { value } = amountFromGas({
    pressure: quantity(101325, 0),
    volume: quantity(1, 0),
    temperature: quantity(273.15, 0),
  });
  expect(Math.abs(value * 4.002602e-3 - 0.1785)).toBeLessThan(5e-5);
});

// CODATA molar volume of the ideal gas, 22.41396954 l/mol (exact), plus B = 11.9273 cm³/mol of the published potential:
// at this order in p the molar volume is RT/p + B, to the ten digits given.
test("one mole fills RT/p + B", () => {
  const { value } = amountFromGas({
    pressure: quantity(101325, 0),
    volume: quantity(22.41396954e-3 + 11.9273e-6, 0),
    temperature: quantity(273.15, 0),
  });
  expectRelative([value], [1], 1e-9);
});

// GUM 5.1.3: each standard uncertainty by a finite difference (curvature below 1e-4 of it), added in quadrature.
test("the uncertainty is that of pressure, volume and temperature", () => {
  const gas = {
    pressure: quantity(9.3e4, 60),
    volume: quantity(2.9e-3, 2e-6),
    temperature: quantity(294.1, 0.15),
  };
  const { value, u } = amountFromGas(gas);
  const moved = (["pressure", "volume", "temperature"] as const).map((key) => {
    const plus = { ...gas, [key]: quantity(gas[key].value + gas[key].u, 0) };
    return amountFromGas(plus).value - value;
  });
  // B's own 0.01 cm³/mol adds 4e-7 of n, below a thousandth of the rest.
  expectRelative([u], [Math.hypot(...moved)], 1e-3);
});

test("gas at a temperature without a virial coefficient is refused", () => {
  const at77 = { pressure: quantity(1e5, 0), volume: quantity(1e-3, 0), temperature: quantity(77, 0.1) };
  expect(() => amountFromGas(at77)).toThrow(/no second virial coefficient of helium at 77 K/);
});
