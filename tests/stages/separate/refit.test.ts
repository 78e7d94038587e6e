import { expect, test } from "vitest";
import { refitter } from "../../../stages/separate/refit.js";
import { separate } from "../../../stages/separate/separate.js";
import { expectRelative } from "../../expect-relative.js";
import { commonSources, LANDAU, logGrid, simulated } from "./helium.js";

const T = logGrid(80, 0.3, 1.2); // some outside the window
const sources = commonSources(T);

test("a refit of other data is the separation of those data", () => {
  const first = simulated(T, 0.005, sources, 31);
  const refit = refitter(first, separate(first, LANDAU))!;
  for (const seed of [32, 33, 34]) {
    const other = simulated(T, 0.005, sources, seed);
    const found = separate(other, LANDAU);
    const again = refit(other.Cv_J_per_mol_K, other.molar_volume_m3_per_mol.value);
    // The same equations from another bracket: Brent ends on the last digit, the amplitudes lose three to the condition.
    expectRelative(
      [again.sound_speed_m_per_s, again.roton_gap_K],
      [found.sound_speed!.value, found.roton_gap!.value],
      1e-10,
    );
  }
});

test("data far from the first are still found, by the whole bracket", () => {
  const first = simulated(T, 0.001, [], 41);
  const refit = refitter(first, separate(first, LANDAU))!;
  const other = { ...first, Cv_J_per_mol_K: first.Cv_J_per_mol_K.map((c, i) => c * T[i]! ** 0.8) };
  const found = separate(other, LANDAU);
  expectRelative(
    [refit(other.Cv_J_per_mol_K, 27.58e-6).roton_gap_K],
    [found.parameters.find((p) => p.name === "gap")!.value],
    1e-9,
  );
});

test("nothing to repeat where there is no Landau result", () => {
  const cold = simulated(logGrid(20, 0.1, 0.4), 0.005, [], 51);
  expect(refitter(cold, separate(cold, { ...LANDAU, window_K: [0.05, 2] }))).toBeNull();
});
