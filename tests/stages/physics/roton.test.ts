import { expect, test } from "vitest";
import { BOLTZMANN, HELIUM4_ATOMIC_MASS, PLANCK_REDUCED } from "../../../stages/physics/constants.js";
import {
  rotonHeatCapacity_J_per_mol_K,
  rotonHeatCapacityIntegral_J_per_mol_K,
  rotonNumberDensity_per_m3,
  rotonShape,
  rotonShapeGapDerivative,
} from "../../../stages/physics/roton.js";
import { expectRelative } from "../../expect-relative.js";

const minimum = {
  gap_K: 8.65,
  momentum_per_m: 1.92e10,
  mass_kg: 0.16 * HELIUM4_ATOMIC_MASS.value,
  molarVolume_m3_per_mol: 27.58e-6,
};
const landau = { phaseSpace: "k0-squared", statistics: "boltzmann" } as const;
const temperatures = [0.4, 0.7, 1, 1.5, 2];

// Gaussian moments are exact, so only the quadrature's target is left.
test("Landau's closed form is the integral it was made from", () => {
  for (const T of temperatures) {
    expectRelative(
      [rotonHeatCapacity_J_per_mol_K(T, minimum)],
      [rotonHeatCapacityIntegral_J_per_mol_K(T, minimum, landau)],
      1e-10,
    );
  }
});

// With k² = k₀² + 2k₀q + q² the moments ⟨z²(y + z²/2)²⟩ = y² + 3y + 15/4 of a unit Gaussian add a term; exact again.
test("keeping k² adds what its Gaussian moment says", () => {
  for (const T of temperatures) {
    const y = minimum.gap_K / T;
    const spread =
      (minimum.mass_kg * BOLTZMANN.value * T) / (PLANCK_REDUCED.value * minimum.momentum_per_m) ** 2;
    const factor = 1 + (spread * (y * y + 3 * y + 15 / 4)) / (y * y + y + 3 / 4);
    const full = rotonHeatCapacityIntegral_J_per_mol_K(T, minimum, { ...landau, phaseSpace: "k-squared" });
    expectRelative([full], [rotonHeatCapacity_J_per_mol_K(T, minimum) * factor], 1e-10);
  }
});

// e^{−x} for eˣ/(eˣ−1)² leaves out 2e^{−2x} + …; each order is a roton term of a gap and mass of its own,
// 2e^{−2y}/√2·(…): at 2 K 1.3 %, at 1 K 2e-4. Bounds on what the closed form costs, not on an error of ours.
test("Bose statistics matter little below 1 K", () => {
  const bose = (T: number) =>
    rotonHeatCapacityIntegral_J_per_mol_K(T, minimum, { ...landau, statistics: "bose" }) /
    rotonHeatCapacity_J_per_mol_K(T, minimum);
  // Leading order: n = 2 of Σ n e^{−nx}, ∫2x²e^{−2x} over the same Gaussian of width 1/√2.
  const leading = (T: number) => {
    const y = minimum.gap_K / T;
    return 1 + (Math.SQRT2 * Math.exp(-y) * (y * y + y / 2 + 3 / 16)) / (y * y + y + 3 / 4);
  };
  expectRelative([bose(0.7), bose(1)], [leading(0.7), leading(1)], 1e-6);
});

test("the derivative in the gap is the derivative", () => {
  for (const T of temperatures) {
    const h = 1e-4;
    const central = (rotonShape(T, 8.65 + h) - rotonShape(T, 8.65 - h)) / (2 * h);
    // Truncation h²f‴/6f′ ≈ 1e-8, rounding 1e-12/h·T.
    expectRelative([rotonShapeGapDerivative(T, 8.65)], [central], 1e-7);
  }
});

// C/V = k n_r (3/4 + y + y²).
test("number density and heat capacity belong together", () => {
  const T = 1;
  const y = minimum.gap_K / T;
  const perMole = rotonNumberDensity_per_m3(T, minimum) * BOLTZMANN.value * (0.75 + y + y * y) * 27.58e-6;
  expectRelative([rotonHeatCapacity_J_per_mol_K(T, minimum)], [perMole], 1e-14);
});

// J. S. Brooks and R. J. Donnelly 1977 put C at 1 K near 0.4 J/(mol K) in all; the roton part is most of it.
test("the size is that of helium", () => {
  const C = rotonHeatCapacity_J_per_mol_K(1, minimum);
  expect(C).toBeGreaterThan(0.25);
  expect(C).toBeLessThan(0.4);
});
