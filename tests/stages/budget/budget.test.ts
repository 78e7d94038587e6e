import { expect, test } from "vitest";
import { budget } from "../../../stages/budget/budget.js";
import { separate } from "../../../stages/separate/separate.js";
import { expectRelative } from "../../expect-relative.js";
import { commonSources, LANDAU, logGrid, simulated, TRUTH } from "../separate/helium.js";

const T = logGrid(60, 0.35, 1.15);
const sources = commonSources(T);
const input = simulated(T, 0.005, sources, 21);

test.each([
  ["landau", input],
  ["landau", { ...input, u_repeat_J_per_mol_K: null }],
  ["whole-curve", input],
] as const)("lines add up to the fit's own uncertainty: %s", (model, of) => {
  const found = separate(of, { ...LANDAU, model });
  const total = budget(found);
  expectRelative(
    [total.u_sound_speed_m_per_s, total.u_roton_gap_K],
    [found.sound_speed!.standard_uncertainty, found.roton_gap!.standard_uncertainty],
    1e-12, // the same sum
  );
  // From the other side: the covariance of the fit, and for u₁ the volume's third.
  const gap = found.parameters.find((p) => p.name === "gap")!;
  expectRelative(
    [total.u_roton_gap_K],
    [Math.hypot(gap.standard_uncertainty, volumeLine(total)?.roton_gap_K ?? 0)],
    1e-9,
  );
  if (model === "landau") {
    const A3 = found.phonon_coefficient!;
    expectRelative(
      [total.u_sound_speed_m_per_s / found.sound_speed!.value],
      [Math.hypot(A3.standard_uncertainty / A3.value, 0.001) / 3],
      1e-9,
    );
  }
  for (const column of ["share_sound_speed", "share_roton_gap"] as const) {
    expectRelative([total.lines.reduce((sum, line) => sum + line[column], 0)], [1], 1e-12);
  }
  expect(total.lines.map((line) => line.name)).toEqual([
    "repeatability",
    "amount",
    "scale",
    "addenda",
    "molar_volume",
  ]);
});

function volumeLine(total: ReturnType<typeof budget>) {
  return total.lines.find((line) => line.name === "molar_volume");
}

test("a line is what happens to the result when its source moves the data", () => {
  const found = separate(input, LANDAU);
  const lines = budget(found).lines;
  sources.forEach((source, s) => {
    const shift = 0.01; // of one standard uncertainty: second order is 1e-4 of the change
    const moved = separate(
      {
        ...input,
        Cv_J_per_mol_K: input.Cv_J_per_mol_K.map((c, i) => c + shift * source.s_Cv_J_per_mol_K[i]!),
      },
      LANDAU,
    );
    // The gain is the Gauss–Newton one; the term it leaves out is of the size of the residuals, 0.5 %, times how
    // Δ bends the model, and the difference of two fits has a little rounding.
    expectRelative(
      [lines[1 + s]!.sound_speed_m_per_s, lines[1 + s]!.roton_gap_K],
      [
        (moved.sound_speed!.value - found.sound_speed!.value) / shift,
        (moved.roton_gap!.value - found.roton_gap!.value) / shift,
      ],
      0.03,
    );
  });
});

test("the amount alone: a pure scale error moves u₁ by a third and Δ not at all", () => {
  const scale = sources.slice(0, 1);
  // Uncorrelated noise far above keeps the weights from knowing about the scale.
  const found = separate({ ...simulated(T, 0.005, scale, 22) }, LANDAU);
  const line = budget(found).lines.find((each) => each.name === "amount")!;
  // C → C(1 − 0.004): A₃ down by 0.4 %, u₁ up by 0.4/3 %; the measured curve is the truth within 0.5 %/√60.
  expectRelative([line.sound_speed_m_per_s], [(0.004 / 3) * TRUTH.u1], 0.02);
  expect(Math.abs(line.roton_gap_K)).toBeLessThan(1e-3);
  expectRelative([line.relative_Cv!], [0.004], 0.01);
});

test("a number that is missing has no budget", () => {
  const cold = simulated(logGrid(20, 0.1, 0.4), 0.005, [], 23);
  const total = budget(separate(cold, { ...LANDAU, window_K: [0.05, 2] }));
  expect(total.u_roton_gap_K).toBeNaN();
  expect(total.u_sound_speed_m_per_s).toBeGreaterThan(0);
});
