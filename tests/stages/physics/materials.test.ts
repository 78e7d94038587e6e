import { expect, test } from "vitest";
import {
  extrapolatedSpecificHeat_J_per_kg_K,
  MATERIAL_NAMES,
  MATERIALS,
  type MaterialName,
  specificHeat_J_per_kg_K,
} from "../../../stages/physics/materials.js";
import { expectRelative } from "../../expect-relative.js";
import { column, published } from "./published.js";

const perMole_mJ = (material: MaterialName, T: number) =>
  specificHeat_J_per_kg_K(material, T).value * MATERIALS[material].molarMass_kg_per_mol * 1e3;

// Six printed digits, 5e-6 at worst.
test("copper is the reference equation", () => {
  const rows = published("copper-reference.csv");
  const ours = column(rows, "T_K").map((T) => perMole_mJ("copper", T));
  expectRelative(ours, column(rows, "C_mJ_per_mol_K"), 1e-5);
});

// β as published with θ_D (4 or 5 digits), and γ: D. L. Martin 1973; N. E. Phillips 1959; Keesom and Seidel 1959;
// O'Neal and Phillips 1965. Sums at 1 K, mJ/(mol K), 1e-4 being the digits of β.
test("metals and semiconductors have the published γ and β", () => {
  const want: readonly (readonly [MaterialName, number, number])[] = [
    ["silver", 1, 0.64 + 0.16706],
    ["gold", 1, 0.689 + 0.45889],
    ["aluminium-normal", 1, 1.35 + 0.02484],
    ["silicon", 2, 8 * 0.00756],
    ["germanium", 2, 8 * 0.04064],
    ["indium-normal", 0.5, 4 * 0.00101 + 0.5 * 1.69 + 0.125 * 1.42],
    ["indium-superconducting", 0.3, 0.027 * 1.22],
    ["tin-superconducting", 0.4, 0.064 * 0.246],
    ["sapphire", 1, 0.00864],
    ["quartz", 1, 0.0341],
  ];
  for (const [material, T, C_mJ] of want) {
    // Three printed digits for silicon, sapphire, quartz: 7e-4, 6e-4, 1.5e-3.
    const digits = ["silicon", "sapphire", "quartz"].includes(material) ? 1.5e-3 : 1e-4;
    expectRelative([perMole_mJ(material, T)], [C_mJ], digits);
  }
});

// Copper of Martin 1973, γ = 0.691 and θ = 344.3 K: two laboratories, apart by 0.5 % (the older scale, our stated u).
test("the copper reference agrees with later copper within its uncertainty", () => {
  for (const T of [0.5, 1, 2])
    expectRelative([perMole_mJ("copper", T)], [0.691 * T + 0.04762 * T ** 3], 6e-3);
});

// C at 1, 2 and 4.2 K printed to 4 digits beside the coefficients of the compilation; 1e-3 at most.
test("grease", () => {
  expectRelative(
    [1, 2, 4.2].map((T) => specificHeat_J_per_kg_K("apiezon-n", T).value),
    [0.024, 0.2118, 2.365],
    5e-4,
  );
});

// M. Barucci et al. 2006, per gram, from its coefficients.
test("plastic", () => {
  expectRelative(
    [specificHeat_J_per_kg_K("torlon", 0.5).value],
    [1e3 * (5.41e-6 * 0.5 ** 1.28 + 2.82e-5 / 8)],
    1e-12,
  );
  expectRelative([specificHeat_J_per_kg_K("torlon-above-1K", 2).value], [1e3 * 2.68e-5 * 2 ** 3.32], 1e-12);
});

// N. E. Phillips 1959: C_es/γT_c = 7.1 e^{−1.34 T_c/T}.
test("superconducting aluminium", () => {
  const electrons = 1.35 * 1.163 * 7.1 * Math.exp((-1.34 * 1.163) / 0.5);
  expectRelative([perMole_mJ("aluminium-superconducting", 0.5)], [electrons + 0.02484 * 0.125], 1e-4);
});

test("every material has a range, outside it nothing, and an uncertainty", () => {
  for (const name of MATERIAL_NAMES) {
    const [low, high] = MATERIALS[name].range_K;
    const { value, u } = specificHeat_J_per_kg_K(name, (low + high) / 2);
    expect(value).toBeGreaterThan(0);
    expectRelative([u / value], [MATERIALS[name].relativeU], 1e-14);
    expect(() => specificHeat_J_per_kg_K(name, low * 0.99)).toThrow(name);
    expect(() => specificHeat_J_per_kg_K(name, high * 1.01)).toThrow(name);
    expect(extrapolatedSpecificHeat_J_per_kg_K(name, high * 1.01).value).toBeGreaterThan(0);
  }
});
