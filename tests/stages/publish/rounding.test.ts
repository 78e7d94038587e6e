import { expect, test } from "vitest";
import { roundToUncertainty, significant, withZeros } from "../../../stages/publish/rounding.js";
import { raisedUnits, unitText } from "../../../stages/publish/units.js";

// JCGM 100:2008, 7.2.2: m_S = 100,021 47 g with u_c = 0,35 mg is written 100,021 47(35) g (with a point here).
test("the GUM's own example, in brackets and with ±", () => {
  expect(roundToUncertainty(100.02147, 0.00035, "concise")).toBe("100.02147(35)");
  expect(roundToUncertainty(100.02147, 0.00035)).toBe("100.02147 ± 0.00035");
});

// JCGM 100:2008, 7.2.6: 10.057 62 Ω with u_c = 27 mΩ becomes 10.058 Ω with 27 mΩ.
test("the value is rounded to the place of its uncertainty", () => {
  expect(roundToUncertainty(10.05762, 0.027, "concise")).toBe("10.058(27)");
});

test.each([
  [238.1234, 0.6, "238.12 ± 0.60", "238.12(60)"],
  [238.1234, 1.234, "238.1 ± 1.2", "238.1(1.2)"],
  [238.1234, 12.34, "238 ± 12", "238(12)"],
  // An uncertainty left of the point takes the value with it.
  [12345.6, 123.4, "12350 ± 120", "12350(120)"],
  // 0.0996 to two digits is 0.10: one decimal fewer.
  [8.65432, 0.0996, "8.65 ± 0.10", "8.65(10)"],
  [-0.0123, 0.0045, "-0.0123 ± 0.0045", "-0.0123(45)"],
  [0, 0.02, "0.000 ± 0.020", "0.000(20)"],
  // Very small and very large numbers share a power of ten.
  [2.0e-5, 3e-7, "(2.000 ± 0.030)×10⁻⁵", "2.000(30)×10⁻⁵"],
  [1.25e9, 2e6, "(1.2500 ± 0.0020)×10⁹", "1.2500(20)×10⁹"],
  // The uncertainty may be larger than the value.
  [0.2, 3.1, "0.2 ± 3.1", "0.2(3.1)"],
])("%d with u = %d", (value, u, plusMinus, concise) => {
  expect(roundToUncertainty(value, u)).toBe(plusMinus);
  expect(roundToUncertainty(value, u, "concise")).toBe(concise);
});

test("without an uncertainty the value stands alone; what is no number is a dash", () => {
  expect(roundToUncertainty(1.23456789, 0)).toBe("1.23457");
  expect(roundToUncertainty(1.5, Number.NaN)).toBe("1.5");
  expect(roundToUncertainty(Number.NaN, 0.1)).toBe("–");
});

test("significant digits, with and without zeros at the end", () => {
  expect(significant(0.32, 4)).toBe("0.32");
  expect(withZeros(0.32, 4)).toBe("0.3200");
  expect(significant(0.0000123, 2)).toBe("1.2×10⁻⁵");
  expect(withZeros(Number.POSITIVE_INFINITY, 3)).toBe("–");
});

test("units as a person writes them", () => {
  expect(unitText("J/(mol.K4)")).toBe("J/(mol K⁴)");
  expect(unitText("J/(mol.K1.5)")).toBe("J/(mol K¹·⁵)");
  expect(raisedUnits("27.58 ± 0.03 cm3/mol")).toBe("27.58 ± 0.03 cm³/mol");
});
