import { expect, test } from "vitest";
import {
  phononCoefficient_J_per_mol_K4,
  phononHeatCapacity_J_per_mol_K,
  phononHeatCapacityIntegral_J_per_mol_K,
  phononSeries_J_per_mol,
  soundSpeed_m_per_s,
} from "../../../stages/physics/phonon.js";
import { expectRelative } from "../../expect-relative.js";
import { column, published } from "./published.js";

const series = new Map(
  published("helium-4-phonon-series.csv").map((row) => [row["quantity"], Number(row["value"])]),
);
const helium = {
  soundSpeed_m_per_s: series.get("c")!,
  molarVolume_m3_per_mol: series.get("V")! * 1e-6,
  a2_m2: series.get("alpha2")! * 1e-20,
  a3_m3: series.get("alpha3")! * 1e-30,
  a4_m4: series.get("alpha4")! * 1e-40,
};

// Three or four printed digits: half a unit of the last one is 6e-4 of 0.0831 and 6e-5 of 0.08341 and 0.08309.
test("the T³ coefficient is the published one", () => {
  const rows = published("helium-4-phonon-coefficient.csv");
  rows.forEach((row) => {
    const A = phononCoefficient_J_per_mol_K4(
      Number(row["sound_speed_m_per_s"]),
      Number(row["molar_volume_cm3_per_mol"]) * 1e-6,
    );
    expectRelative([A], [Number(row["A_J_per_mol_K4"])], row["digits"] === "4" ? 1e-4 : 6e-4);
  });
});

test("sound speed and T³ coefficient are each other's inverse", () => {
  // Cube and cube root: a few roundings.
  expectRelative(
    [soundSpeed_m_per_s(phononCoefficient_J_per_mol_K4(238.3, 27.58e-6), 27.58e-6)],
    [238.3],
    1e-14,
  );
});

// Published to three digits, and 0.2 % is what the source's own rounding of α₂…α₄ leaves in the higher terms;
// K is the one that needs 0.4 %: three digits of 0.262.
test("Lagrange inversion gives the published series from c, V and α₂…α₄", () => {
  const names = ["A", "B", "C", "D", "E", "K", "L"];
  const want = names.map((name) => series.get(name)!);
  expectRelative(phononSeries_J_per_mol(helium), want, 4e-3);
});

// The terms left out begin with θ⁵ (none here: a₃ = 0) and θ⁶; at 0.1 K θ = 0.0055 1/Å and they are below 1e-9·a few.
test("the series is the integral where it converges", () => {
  const even = { ...helium, a3_m3: 0 };
  for (const [T_K, tolerance] of [
    [0.02, 1e-10],
    [0.05, 1e-7],
    [0.1, 1e-5],
  ] as const) {
    expectRelative(
      [phononHeatCapacity_J_per_mol_K(T_K, even)],
      [phononHeatCapacityIntegral_J_per_mol_K(T_K, even, 1e10)],
      tolerance,
    );
  }
});

// The same with the odd term, by the whole series to T⁹. Next is T¹⁰, not summed.
test("the series with the odd term is the integral too", () => {
  const coefficients = phononSeries_J_per_mol(helium);
  const sum = (T_K: number) => coefficients.reduce((total, c, i) => total + c * T_K ** (i + 3), 0);
  expectRelative([sum(0.1)], [phononHeatCapacityIntegral_J_per_mol_K(0.1, helium, 1e10)], 1e-5);
  expectRelative([sum(0.05)], [phononHeatCapacityIntegral_J_per_mol_K(0.05, helium, 1e10)], 1e-7);
});

// Published table, 4 digits; 0.1 % up to 0.3 K, where the source's own note says its series holds to 0.05 %.
test("the series reproduces the published phonon heat capacity up to 0.3 K", () => {
  const rows = published("helium-4-curve-heat-capacity.csv").filter((row) => Number(row["T_K"]) <= 0.3);
  const T = column(rows, "T_K");
  const coefficients = phononSeries_J_per_mol(helium);
  const ours = T.map((T_K) => coefficients.reduce((total, c, i) => total + c * T_K ** (i + 3), 0));
  expectRelative(ours, column(rows, "Cv_phonon_J_per_mol_K"), 1e-3);
});

test("a branch that bends below zero is refused, not integrated", () => {
  const bent = { ...helium, a3_m3: 0, a4_m4: -100e-40 };
  expect(() => phononHeatCapacityIntegral_J_per_mol_K(1, bent, 1e10)).toThrow(/below zero energy/);
});
