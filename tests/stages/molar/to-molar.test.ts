import { expect, test } from "vitest";
import { fitEmptyCell } from "../../../stages/addenda/empty-cell.js";
import { noAddenda } from "../../../stages/addenda/no-addenda.js";
import { addendaFromParts } from "../../../stages/addenda/parts.js";
import { toMolar } from "../../../stages/molar/to-molar.js";
import type { HeliumSample } from "../../../stages/molar/types.js";
import { vapourAmount_mol } from "../../../stages/molar/vapour-space.js";
import { integrate } from "../../../stages/numerics/quadrature.js";
import { latentHeat_J_per_mol } from "../../../stages/physics/latent-heat.js";
import { phononHeatCapacity_J_per_mol_K } from "../../../stages/physics/phonon.js";
import { rotonHeatCapacity_J_per_mol_K } from "../../../stages/physics/roton.js";
import { expectRelative } from "../../expect-relative.js";
import { column, published } from "../physics/published.js";

const molarVolume_m3_per_mol = 27.58e-6;
const Cv = (T: number) =>
  phononHeatCapacity_J_per_mol_K(T, {
    soundSpeed_m_per_s: 238.3,
    molarVolume_m3_per_mol,
    a2_m2: 0,
    a4_m4: 0,
  }) +
  rotonHeatCapacity_J_per_mol_K(T, {
    gap_K: 8.65,
    momentum_per_m: 1.926e10,
    mass_kg: 0.161 * 6.6465e-27,
    molarVolume_m3_per_mol,
  });
const empty = (T: number) => 2.6e-4 * T + 1.9e-5 * T ** 3;

const T_K = Float64Array.from({ length: 40 }, (_, i) => 0.35 + i * 0.02);
const dT_K = T_K.map((T) => 0.06 * T);
const mean = (f: (T: number) => number, i: number) =>
  integrate(f, T_K[i]! - dT_K[i]! / 2, T_K[i]! + dT_K[i]! / 2, 1e-13) / dT_K[i]!;
const amount = { value: 0.1093, u: 4e-4, text: "0.1093 ± 0.0004 mol" };
const sample: HeliumSample = { amount, condition: "constant-volume" };
const C_total_J_per_K = T_K.map((_, i) => mean((T) => amount.value * Cv(T) + empty(T), i));
const points = { T_K, dT_K, C_total_J_per_K, u_C_total_J_per_K: C_total_J_per_K.map((C) => C * 1e-3) };
const emptyC = T_K.map(empty);
const addenda = fitEmptyCell(
  T_K,
  emptyC,
  emptyC.map((C) => 5e-3 * C),
  [1, 3],
);

// Cells mean over each step in, mean of the helium over each step out: no part of the step is left in the difference.
// The addenda are up to 40 times the helium here, so rounding of the fit grows by that: 1e-14 → 1e-12.
test("a closed cell gives back the helium that was put in", () => {
  const molar = toMolar(points, addenda, sample);
  expectRelative(
    molar.Cv_J_per_mol_K,
    T_K.map((_, i) => mean(Cv, i)),
    1e-10,
  );
  expectRelative(
    molar.u_repeat_J_per_mol_K,
    points.u_C_total_J_per_K.map((u) => u / 0.1093),
    1e-14,
  );
  expectRelative(
    molar.addenda_share,
    T_K.map((_, i) => mean(empty, i) / C_total_J_per_K[i]!),
    1e-10,
  );
  expect(molar.vapour_share.every((share) => share === 0)).toBe(true);
  expect(molar.notes).toEqual([]);
});

test("the sources are named in order, with the signs of their effect", () => {
  const molar = toMolar(points, addenda, sample);
  expect(molar.sources.map(({ name }) => name)).toEqual(["amount", "addenda_1", "addenda_2"]);
  // One standard uncertainty more of helium, by recomputing; second order in u(n)/n = 0.4 % is what is left.
  const more = toMolar(points, addenda, { ...sample, amount: { ...amount, value: amount.value + amount.u } });
  expectRelative(
    molar.sources[0]!.s_Cv_J_per_mol_K,
    more.Cv_J_per_mol_K.map((C, i) => C - molar.Cv_J_per_mol_K[i]!),
    5e-3,
  );
  // Addenda larger by a sensitivity make the helium smaller by it.
  const [first] = addenda.sensitivities(T_K);
  expectRelative(
    molar.sources[1]!.s_Cv_J_per_mol_K,
    first!.s_C_J_per_K.map((s) => -s / amount.value),
    1e-14,
  );
});

// Peelle's puzzle: from scattered points the scale uncertainty is not the scale's.
test("with a smooth curve the amount's sensitivity does not follow the scatter", () => {
  const scattered = {
    ...points,
    C_total_J_per_K: C_total_J_per_K.map((C, i) => C * (i % 2 === 0 ? 1.01 : 0.99)),
  };
  const smooth = T_K.map(Cv);
  const molar = toMolar(scattered, addenda, sample, smooth);
  expectRelative(
    molar.sources[0]!.s_Cv_J_per_mol_K,
    smooth.map((C) => (-C * amount.u) / amount.value),
    1e-14,
  );
});

test("parts and no addenda go the same way, and notes come along", () => {
  const copper = addendaFromParts([
    { material: "copper", mass: { value: 0.02, u: 1e-4, text: "20 ± 0.1 g" } },
  ]);
  const cold = { ...points, T_K: T_K.map((T) => T - 0.2) };
  const molar = toMolar(cold, copper, sample);
  expect(molar.sources.map(({ name }) => name)).toEqual(["amount", "addenda_1"]);
  expect(molar.notes).toEqual([expect.stringMatching(/^addenda extrapolated below 0\.3000 K/)]);
  expect(toMolar(points, noAddenda(), sample).notes).toEqual([
    expect.stringMatching(/no addenda were given/),
  ]);
});

// Published C_sat (1998 spline) and, as vapour, T·d(n_v L/T)/dT with the published latent heat: what a cell with
// 0.4 cm³ of vapour measures. Back out comes C_sat less C_sat − C_v, to 2 % of the vapour's share (the latent heat is
// 0.3 to 0.5 % low, vapour-space.test.ts).
test("a cell under saturated vapour gives back the published liquid", () => {
  const rows = published("helium-4-saturated-heat-capacity.csv").filter(({ T_K: T }) => Number(T) >= 0.7);
  const at = column(rows, "T_K").slice(0, 24);
  const C_sat = column(rows, "C_sat_J_per_mol_K").slice(0, 24);
  const filling = { amount_mol: amount.value, vapourSpace_m3: 0.4e-6 };
  const entropy = (T: number) => (vapourAmount_mol(T, filling) * latentHeat_J_per_mol(T)) / T;
  const h = 5e-3;
  const vapour = at.map((T) => (T * (entropy(T + h) - entropy(T - h))) / (2 * h));
  const total = C_sat.map((C, i) => amount.value * C + vapour[i]!);
  const narrow = new Float64Array(at.length).fill(1e-3);
  const molar = toMolar(
    { T_K: at, dT_K: narrow, C_total_J_per_K: total, u_C_total_J_per_K: total.map((C) => C * 1e-3) },
    noAddenda(),
    {
      amount,
      condition: "saturated-vapour",
      vapour_space: { value: 0.4e-6, u: 0.05e-6, text: "0.40 ± 0.05 cm3" },
    },
  );
  at.forEach((T, i) => {
    const limit = 2e-2 * (vapour[i]! / total[i]!) + (T <= 1.5 ? 1e-3 : 1e-2);
    expectRelative([molar.Cv_J_per_mol_K[i]!], [C_sat[i]!], limit);
    expectRelative([molar.vapour_share[i]!], [vapour[i]! / total[i]!], 2e-2);
  });
  expect(molar.sources.map(({ name }) => name)).toEqual(["amount", "vapour_space"]);
});

// One standard uncertainty more of vapour space, by recomputing. The vapour part is linear in it; C_sat → C_v is not
// quite proportional, 0.1 % of the answer.
test("the vapour space's sensitivity is its effect", () => {
  const space = { value: 0.4e-6, u: 0.05e-6, text: "0.40 ± 0.05 cm3" };
  const wet = { amount, condition: "saturated-vapour", vapour_space: space } as const;
  const molar = toMolar(points, addenda, wet);
  const more = toMolar(points, addenda, { ...wet, vapour_space: { ...space, value: space.value + space.u } });
  expectRelative(
    molar.sources.find(({ name }) => name === "vapour_space")!.s_Cv_J_per_mol_K,
    more.Cv_J_per_mol_K.map((C, i) => C - molar.Cv_J_per_mol_K[i]!),
    1e-3,
  );
});

// The vapour part rises like e^{−L/RT}; over a step of 6 % its mean is 0.6 % above its middle, and is taken as a mean.
test("the vapour is averaged over the step as well", () => {
  const wet = {
    amount,
    condition: "saturated-vapour",
    vapour_space: { value: 1e-6, u: 0, text: "1 cm3" },
  } as const;
  const wide = toMolar(points, noAddenda(), wet).vapour_share;
  const middle = toMolar({ ...points, dT_K: dT_K.map(() => 1e-6) }, noAddenda(), wet).vapour_share;
  const last = T_K.length - 1;
  expect(wide[last]! / middle[last]! - 1).toBeGreaterThan(3e-3);
  expect(wide[last]! / middle[last]! - 1).toBeLessThan(1.5e-2);
});

test("a saturated sample must say its vapour space", () => {
  expect(() => toMolar(points, addenda, { amount, condition: "saturated-vapour" })).toThrow(
    /vapour_space is missing; expected the volume above the liquid/,
  );
});
