import { expect, test } from "vitest";
import {
  density_kg_per_m3,
  molarVolume_m3_per_mol,
  thermalExpansion_per_K,
} from "../../../stages/physics/density.js";
import { expectRelative } from "../../expect-relative.js";
import { column, published } from "./published.js";

const rows = published("helium-4-density.csv");
const T = column(rows, "T_K");

// Seven printed digits: 0.5e-7/0.106 = 4.7e-7 at worst.
test("the density equation gives the published table", () => {
  const want = column(rows, "rho_g_per_cm3").map((rho) => rho * 1e3);
  expectRelative(T.map(density_kg_per_m3), want, 5e-7);
});

// V(0) = 27.5776 cm³/mol with M = 4.002602 g/mol, same source.
test("the molar volume at zero temperature", () => {
  expectRelative([molarVolume_m3_per_mol(0)], [27.5776e-6], 2e-6);
});

// Three printed digits (0.5 %), and below the lambda point the source calculated its values from another model.
test("the expansion is the published one", () => {
  const want = column(rows, "expansion_1e-3_per_K");
  T.forEach((T_K, i) => {
    const error = Math.abs(thermalExpansion_per_K(T_K) - want[i]! * 1e-3);
    expect(error, `${T_K} K`).toBeLessThanOrEqual(T_K <= 2.15 ? 3e-5 : 5e-3 * Math.abs(want[i]! * 1e-3));
  });
});

// Central difference over 1e-4 K: truncation h²ρ‴/6 and rounding 1e-16/h stay below 1e-6 away from the lambda point.
test("the slope belongs to the equation", () => {
  for (const at of [0.7, 1.2, 1.4, 1.9, 2.5, 4]) {
    const central = -Math.log(density_kg_per_m3(at + 1e-4) / density_kg_per_m3(at - 1e-4)) / 2e-4;
    expect(Math.abs(thermalExpansion_per_K(at) - central)).toBeLessThan(
      1e-6 * Math.max(Math.abs(central), 1e-4) + 1e-10,
    );
  }
});

test("the two equations below the lambda point meet, and nothing is given outside", () => {
  // 1e-6: the printed coefficients' own mismatch at 1.334 K.
  expectRelative([density_kg_per_m3(1.334 - 1e-9)], [density_kg_per_m3(1.334)], 1e-6);
  expect(() => density_kg_per_m3(4.91)).toThrow(/0 to 4.9 K/);
  expect(() => density_kg_per_m3(-0.1)).toThrow(/0 to 4.9 K/);
  expect(() => density_kg_per_m3(Number.NaN)).toThrow(/0 to 4.9 K/);
});
