import { CholeskyDecomposition, Matrix } from "ml-matrix";
import { expect, test } from "vitest";
import { separate } from "../../../stages/separate/separate.js";
import { expectRelative } from "../../expect-relative.js";
import { commonSources, derivatives, heat, LANDAU, logGrid, simulated, TRUTH } from "./helium.js";

const T = logGrid(60, 0.35, 1.15);

test("without noise the truth comes back", () => {
  const exact = { ...simulated(T, 0.005, [], 1), Cv_J_per_mol_K: T.map(heat) };
  const found = separate(exact, LANDAU);
  const truth = [TRUTH.A3, TRUTH.A5, TRUTH.A7, TRUTH.B, TRUTH.gap];
  // The scaled design has a condition near 3·10³: rounding leaves 1e-12.
  expectRelative(
    found.parameters.map((p) => p.value),
    truth,
    1e-10,
  );
  expectRelative([found.sound_speed!.value], [TRUTH.u1], 1e-10);
  expect(found.parameters.map((p) => p.name)).toEqual(["A3", "A5", "A7", "B", "gap"]);
  expect(found.degrees_of_freedom).toBe(55);
  expect(found.missing).toEqual([]);
});

test("the covariance is that of generalised least squares, by the textbook formula", () => {
  const sources = commonSources(T);
  const exact = { ...simulated(T, 0.005, sources, 1), Cv_J_per_mol_K: T.map(heat) };
  const found = separate(exact, LANDAU);
  // In units of C, so that the dense covariance is well conditioned: V = diag + Σ g gᵀ, Cov = (Jᵀ V⁻¹ J)⁻¹.
  const V = Matrix.zeros(60, 60);
  T.forEach((a, i) => {
    T.forEach((b, j) => {
      const shared = sources.reduce(
        (sum, s) => sum + (s.s_Cv_J_per_mol_K[i]! / heat(a)) * (s.s_Cv_J_per_mol_K[j]! / heat(b)),
        0,
      );
      V.set(i, j, shared + (i === j ? 0.005 ** 2 : 0));
    });
  });
  const J = new Matrix(Array.from(T, (t) => derivatives(t).map((d) => d / heat(t))));
  const product = J.transpose().mmul(new CholeskyDecomposition(V).solve(J));
  const normalMatrix = Matrix.add(product, product.transpose()).mul(0.5); // symmetric to the last digit
  const scale = normalMatrix.diagonal().map((d) => 1 / Math.sqrt(d));
  const scaled = Matrix.zeros(5, 5);
  for (let i = 0; i < 5; i++) {
    for (let j = 0; j < 5; j++) scaled.set(i, j, normalMatrix.get(i, j) * (scale[i]! * scale[j]!));
  }
  const inverse = new CholeskyDecomposition(scaled).solve(Matrix.eye(5));
  const expected = scale.map((s, i) => s * Math.sqrt(inverse.get(i, i)));
  // Normal equations lose the square of the condition, 1e7: nine digits are left.
  expectRelative(
    found.parameters.map((p) => p.standard_uncertainty),
    expected,
    1e-7,
  );
  expectRelative(
    [found.correlation.matrix[0]![4]!],
    [inverse.get(0, 4) / Math.sqrt(inverse.get(0, 0) * inverse.get(4, 4))],
    1e-6,
  );
});

test("a common source drawn as stated is found within the stated uncertainty, and no narrower", () => {
  const sources = commonSources(T);
  const draws = 400;
  const pull = { u1: [] as number[], gap: [] as number[] };
  let chiSquared = 0;
  for (let k = 0; k < draws; k++) {
    const found = separate(simulated(T, 0.005, sources, 1000 + k), LANDAU);
    // The volume is as stated here: its share is taken out of the uncertainty that the draws can show.
    const volume = found.influences.find((line) => line.name === "molar_volume")!.sound_speed_m_per_s!;
    const u = Math.sqrt(found.sound_speed!.standard_uncertainty ** 2 - volume ** 2);
    pull.u1.push((found.sound_speed!.value - TRUTH.u1) / u);
    pull.gap.push((found.roton_gap!.value - TRUTH.gap) / found.roton_gap!.standard_uncertainty);
    chiSquared += found.chi_squared / draws;
  }
  for (const pulls of [pull.u1, pull.gap]) {
    const mean = pulls.reduce((a, b) => a + b) / draws;
    const sd = Math.sqrt(pulls.reduce((sum, z) => sum + (z - mean) ** 2, 0) / (draws - 1));
    const covered = pulls.filter((z) => Math.abs(z) < 1).length / draws;
    // Over 400 draws: the mean is known to 0.05, the spread to 0.035, the coverage of ±u (68.27 %) to 0.023.
    // Four of each; a bias above a fifth of u would show.
    expect(Math.abs(mean)).toBeLessThan(0.2);
    expect(Math.abs(sd - 1)).toBeLessThan(0.14);
    expect(Math.abs(covered - 0.6827)).toBeLessThan(0.093);
  }
  // χ² has 55 degrees of freedom, the draws' mean a standard deviation of √(110/400) = 0.52.
  expect(Math.abs(chiSquared - 55)).toBeLessThan(2.1);
});

test("uncertainties unknown: the scatter sets them", () => {
  const draws = 100;
  const n = 60;
  let stated = 0;
  let known = 0;
  for (let k = 0; k < draws; k++) {
    const input = simulated(T, 0.01, [], 7000 + k);
    const free = separate({ ...input, u_repeat_J_per_mol_K: null }, LANDAU);
    stated += free.roton_gap!.standard_uncertainty / draws;
    known += separate(input, LANDAU).roton_gap!.standard_uncertainty / draws;
    expectRelative([free.chi_squared], [n - 5], 1e-10); // by construction
  }
  // Each scatter is known to 1/√110 = 9.5 %, the mean of 100 to 1 %; E[s] is 0.5 % below σ.
  expect(Math.abs(stated / known - 1)).toBeLessThan(0.045);
});

test("a constant beside, as ³He brings it", () => {
  const input = simulated(T, 0.005, [], 5);
  const found = separate(
    { ...input, Cv_J_per_mol_K: T.map((t) => heat(t) + 2e-3) },
    { ...LANDAU, other_powers: [0] },
  );
  const constant = found.parameters.find((p) => p.name === "A0")!;
  expectRelative([constant.value, found.roton_gap!.value], [2e-3, TRUTH.gap], 1e-9); // six columns, less well parted
  expect(constant.unit).toBe("J/(mol.K)");
});
