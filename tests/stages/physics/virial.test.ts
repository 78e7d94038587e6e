import { expect, test } from "vitest";
import { secondVirial_m3_per_mol, secondVirialSlope_m3_per_mol_K } from "../../../stages/physics/virial.js";
import { published } from "./published.js";

const rows = published("helium-4-second-virial.csv");
const B_cm3 = (T_K: number) => secondVirial_m3_per_mol(T_K).value * 1e6;

// 0.1 cm³/mol cold and 0.01 warm: the numerical error of the values computed from the potential.
test("the values from the pair potential", () => {
  for (const row of rows) {
    const T = Number(row["T_K"]);
    expect(Math.abs(B_cm3(T) - Number(row["from_potential"])), `${T} K`).toBeLessThan(T < 100 ? 0.1 : 0.01);
  }
});

// An independent fit to gas thermometry, Gaiser and Fellmuth 2009: B = 18.5604 − 2.2217 T^−3/2 − 412.863/T − 0.03094 T.
// Between our knots too, from 4 to 10 K; the two sources agree to 0.1 cm³/mol at the knots there.
test("gas thermometry agrees, between the knots as well", () => {
  for (let T = 4; T <= 10; T += 0.1) {
    const fit = 18.5604 - 2.2217 * T ** -1.5 - 412.863 / T - 0.03094 * T;
    expect(Math.abs(B_cm3(T) - fit), `${T} K`).toBeLessThan(0.12);
  }
});

test("the slope is that of the values", () => {
  for (const T of [1.1, 1.8, 3.3, 8, 290]) {
    const central =
      (secondVirial_m3_per_mol(T + 1e-4).value - secondVirial_m3_per_mol(T - 1e-4).value) / 2e-4;
    // Rounding: 1e-16·5e-4/1e-4 of values near 5e-4.
    expect(Math.abs(secondVirialSlope_m3_per_mol_K(T) / central - 1)).toBeLessThan(1e-6);
  }
});

test("between the two ranges there is none", () => {
  for (const T of [0.99, 10.1, 77, 267, 314]) {
    expect(() => secondVirial_m3_per_mol(T)).toThrow(/from 1 to 10 K and from 268 to 313 K/);
    expect(() => secondVirialSlope_m3_per_mol_K(T)).toThrow(/no second virial coefficient/);
  }
});
