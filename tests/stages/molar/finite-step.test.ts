import { expect, test } from "vitest";
import { finiteStepExcess_J_per_mol_K } from "../../../stages/molar/finite-step.js";
import { rotonShape } from "../../../stages/physics/roton.js";
import { expectRelative } from "../../expect-relative.js";

// Mean of T³ over T ± ΔT/2 is T³ + T·ΔT²/4 exactly; what is subtracted first loses two digits.
test("for T³ the excess is TΔT²/4", () => {
  const T = Float64Array.of(0.5, 1);
  const dT = Float64Array.of(0.05, 0.1);
  expectRelative(
    finiteStepExcess_J_per_mol_K(T, dT, (t) => t ** 3),
    [(0.5 * 0.05 ** 2) / 4, 0.1 ** 2 / 4],
    1e-12,
  );
});

// Lowest order is C″ΔT²/24 (methods.md §2); the next is ΔT⁴C⁗/1920, below 1 % of it for a step of 5 % of T.
test("for rotons it is C″ΔT²/24, about half a per cent for a step of 5 %", () => {
  const C = (t: number) => rotonShape(t, 8.65);
  const h = 1e-3;
  const bend = (C(1 + h) - 2 * C(1) + C(1 - h)) / h ** 2;
  const [excess] = finiteStepExcess_J_per_mol_K(Float64Array.of(1), Float64Array.of(0.05), C);
  expectRelative([excess!], [(bend * 0.05 ** 2) / 24], 1e-2);
  expect(excess! / C(1)).toBeGreaterThan(3e-3);
  expect(excess! / C(1)).toBeLessThan(7e-3);
});
