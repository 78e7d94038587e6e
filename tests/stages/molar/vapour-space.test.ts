import { expect, test } from "vitest";
import {
  constantVolumeFromSaturated_J_per_mol_K,
  vapourAmount_mol,
  vapourPart_J_per_K,
} from "../../../stages/molar/vapour-space.js";
import { latentHeat_J_per_mol } from "../../../stages/physics/latent-heat.js";
import { expectRelative } from "../../expect-relative.js";
import { column, published } from "../physics/published.js";

const R = 8.31446261815324;
const filling = { amount_mol: 0.1, vapourSpace_m3: 0.4e-6 };

// Ideal vapour over a liquid of no entropy (methods.md §4), L and p from the published tables: p to four digits, L
// 0.1 %, and at 1 K and above the vapour's B and the liquid's entropy, −0.4 % in λ each way, so 2 % in λ².
test("the vapour part is n_v R(5/2 − 2λ + λ²)", () => {
  const rows = published("helium-4-vapour-pressure.csv").filter((row) => Number(row["T_K"]) <= 1.3);
  const p = column(rows, "p_Pa");
  column(rows, "T_K").forEach((T, i) => {
    const lambda = latentHeat_J_per_mol(T) / (R * T);
    const n_v = (p[i]! * filling.vapourSpace_m3) / (R * T);
    const want = n_v * R * (2.5 - 2 * lambda + lambda ** 2);
    expectRelative([vapourPart_J_per_K(T, filling)], [want], T < 1 ? 8e-3 : 2e-2);
  });
});

// The other way to the same thing: S = n s_l + n_v L/T with the published latent heat and the vapour's own volume.
// The latent heat lies 0.3 to 0.5 % below Clapeyron's (saturation.test.ts); the change of that bias adds as much again.
test("it is T·d(n_v L/T)/dT, with the latent heat measured", () => {
  const entropy = (T: number) => (vapourAmount_mol(T, filling) * latentHeat_J_per_mol(T)) / T;
  for (const T of [0.7, 0.9, 1.1, 1.4, 1.6, 1.8, 2]) {
    const h = 5e-3;
    const want = (T * (entropy(T + h) - entropy(T - h))) / (2 * h);
    expectRelative([vapourPart_J_per_K(T, filling)], [want], 1.5e-2);
  }
});

test("it is linear in the vapour space", () => {
  const part = (space: number) => vapourPart_J_per_K(1.2, { amount_mol: 0.1, vapourSpace_m3: space });
  expectRelative([part(1e-6) - part(0.6e-6)], [part(0.4e-6) - part(0)], 1e-12);
});

// At 1.5 K by hand from the published α = −2.36e-3/K along saturation, u₁ = 235.549 m/s, V = 27.5729 cm³/mol,
// ρ = 145.1646 kg/m³ and dp/dT = (597.062 − 367.326) Pa/0.1 K. α_p = α + κ dp/dT is 12 % smaller than α:
// C_p − C_sat = −1.97e-4 and C_p − C_v = 1.434e-3 J/(mol K). α has three digits, which count twice.
test("from saturation to constant volume at 1.5 K", () => {
  const C_sat = 4.4679;
  const slope = (597.062 - 367.326) / 0.1;
  const TV = 1.5 * 27.5729e-6;
  const stiffness = 145.1646 * 235.549 ** 2;
  const expansion = -2.36e-3 + slope / stiffness;
  const difference = TV * expansion * slope - TV * expansion ** 2 * stiffness;
  expectRelative([constantVolumeFromSaturated_J_per_mol_K(1.5, C_sat) - C_sat], [difference], 1e-2);
});

// methods.md §4 calls it tiny below 1.5 K.
test("the step to constant volume is below 0.1 % up to 1.5 K and grows above", () => {
  const rows = published("helium-4-saturated-heat-capacity.csv");
  const C = column(rows, "C_sat_J_per_mol_K");
  column(rows, "T_K").forEach((T, i) => {
    const share = Math.abs(constantVolumeFromSaturated_J_per_mol_K(T, C[i]!) / C[i]! - 1);
    expect(share, `${T} K`).toBeLessThan(T <= 1.5 ? 1e-3 : 1.5e-2);
  });
});

test("nothing is given above 3.3 K", () => {
  expect(() => vapourPart_J_per_K(3.4, filling)).toThrow(/saturation/);
});
