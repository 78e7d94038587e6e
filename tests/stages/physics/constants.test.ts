import { expect, test } from "vitest";
import {
  BOLTZMANN,
  ELEMENTARY_CHARGE,
  GAS_CONSTANT,
  HELIUM4_ATOMIC_MASS,
  HELIUM4_MOLAR_MASS,
  KELVIN_PER_MEV,
  PLANCK_REDUCED,
} from "../../../stages/physics/constants.js";
import { expectRelative } from "../../expect-relative.js";

// SI 2019 (exact by definition) and CODATA 2022, printed to 16 digits: a double's rounding is all that is left.
test("derived constants are those of the SI", () => {
  expectRelative(
    [PLANCK_REDUCED.value, GAS_CONSTANT.value, KELVIN_PER_MEV.value],
    [1.054571817646156e-34, 8.31446261815324, 11.60451812155008],
    5e-16,
  );
  expectRelative([KELVIN_PER_MEV.value], [(1e-3 * ELEMENTARY_CHARGE.value) / BOLTZMANN.value], 2e-16);
});

// The alpha particle, 4.001506179129 u (CODATA 2022), two electrons of 5.485799090441e-4 u (CODATA 2022, from
// memory) and their binding of 79.005 eV (from memory, one u is 931.494 MeV) make the atom; 1e-10 is the binding's digits.
test("the helium atom is an alpha particle and two electrons", () => {
  const atom_u = 4.001506179129 + 2 * 5.485799090441e-4 - 79.005e-6 / 931.494;
  expectRelative([HELIUM4_ATOMIC_MASS.value], [atom_u * 1.66053906892e-27], 1e-10);
  expect(HELIUM4_ATOMIC_MASS.u / HELIUM4_ATOMIC_MASS.value).toBeLessThan(1e-9);
});

// The standard atomic weight includes 1.34 ppm of ³He (common practice, no source): 1.3e-6 · 0.25 below the atom's mass.
test("molar mass and atomic mass agree as closely as natural helium is pure", () => {
  expectRelative([HELIUM4_ATOMIC_MASS.value * 6.02214076e23], [HELIUM4_MOLAR_MASS.value], 5e-7);
});
