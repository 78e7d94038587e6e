import { expect, test } from "vitest";
import { binnedCurve } from "../../../stages/combine/binned-curve.js";
import { combineNights, type NightPoints } from "../../../stages/combine/combine.js";
import { correctFiniteStep } from "../../../stages/combine/finite-step.js";
import { smoothCurve } from "../../../stages/combine/smooth-curve.js";
import { rotonShape } from "../../../stages/physics/roton.js";
import { expectRelative } from "../../expect-relative.js";

const GAP_K = 8.65;
const C = (T: number): number => 0.083 * T ** 3 + 61 * rotonShape(T, GAP_K);

function grid(n: number, from: number, to: number): Float64Array {
  return Float64Array.from({ length: n }, (_, i) => from * (to / from) ** (i / (n - 1)));
}

function meanOver(T: number, dT: number): number {
  // Simpson with 64 panels: C is smooth on this scale, what is left is below 1e-10.
  const n = 64;
  let sum = 0;
  for (let i = 0; i <= n; i++) {
    const weight = i === 0 || i === n ? 1 : i % 2 === 1 ? 4 : 2;
    sum += weight * C(T - dT / 2 + (dT * i) / n);
  }
  return sum / (3 * n);
}

test("the smooth curve and its derivatives follow phonons and rotons", () => {
  const T = grid(120, 0.3, 1.3);
  const values = T.map(C);
  const curve = smoothCurve(
    T,
    values,
    values.map((v) => 0.01 * v),
  );
  const inside = [...T.keys()].filter((i) => T[i]! > 0.35 && T[i]! < 1.2);
  const h = 1e-4;
  // A local cubic over a quarter of the points smooths the bend at 0.6 K a little; noise-free, that is all it errs.
  expectRelative(
    inside.map((i) => curve.C[i]!),
    inside.map((i) => values[i]!),
    2e-3,
  );
  expectRelative(
    inside.map((i) => curve.slope[i]!),
    inside.map((i) => (C(T[i]! + h) - C(T[i]! - h)) / (2 * h)),
    0.02,
  );
});

test("a power law comes through the smooth curve exactly", () => {
  const T = grid(30, 0.3, 1);
  const values = T.map((t) => 2 * t ** 3);
  const curve = smoothCurve(T, values, values);
  // A straight line in ln C, ln T: rounding only, and a difference quotient in the curvature.
  expectRelative(curve.C, values, 1e-11);
  expectRelative(
    curve.curvature,
    T.map((t) => 12 * t),
    1e-6,
  );
});

test("finite steps: what a 6 % step adds is taken off to a twentieth", () => {
  const T = grid(90, 0.33, 1.3);
  const dT = T.map((t) => 0.06 * t);
  const measured = T.map((t, i) => meanOver(t, dT[i]!));
  const { C: corrected } = correctFiniteStep(
    T,
    measured,
    measured.map((v) => 1e-3 * v),
    dT,
  );
  const inside = [...T.keys()].filter((i) => T[i]! > 0.4 && T[i]! < 1.2);
  const before = Math.max(...inside.map((i) => Math.abs(measured[i]! / C(T[i]!) - 1)));
  const after = Math.max(...inside.map((i) => Math.abs(corrected[i]! / C(T[i]!) - 1)));
  expect(before).toBeGreaterThan(5e-3);
  // The curvature of the smooth curve is good to 5 % or so; the fourth-order term is 2e-5.
  expect(after).toBeLessThan(before / 20 + 2e-5);
});

function night(run: string, T_K: Float64Array, relative: number): NightPoints {
  const Cv = T_K.map(C);
  return {
    run,
    pulse: Int32Array.from(T_K, (_, i) => i + 1),
    T_K,
    Cv_J_per_mol_K: Cv,
    u_repeat_J_per_mol_K: Cv.map((v) => 0.002 * v),
    dT_K: new Float64Array(T_K.length),
    addenda_share: new Float64Array(T_K.length).fill(0.2),
    calculated_slope_J_per_mol_K2: new Float64Array(T_K.length),
    relativeSources: [
      { name: "amount", title: "amount", relative: new Float64Array(T_K.length).fill(relative) },
    ],
    absoluteSources: [{ name: "addenda_1", title: "addenda", s_Cv_J_per_mol_K: T_K.map((t) => 1e-5 * t) }],
  };
}

test("nights are merged in order of temperature; points keep night and pulse; sources add up", () => {
  const a = night("a", grid(20, 0.4, 1.1), -0.003);
  const b = night("b", grid(15, 0.35, 1.0), -0.003);
  const points = combineNights([a, b], { u_temperature_K: 1e-4 });
  expect(points.T_K.length).toBe(35);
  expect([...points.T_K]).toEqual([...points.T_K].sort((x, y) => x - y));
  expect(points.run.filter((run) => run === "b").length).toBe(15);
  const first = points.run.indexOf("a");
  expect(points.pulse[first]).toBe(1);
  expect(points.sources.map((source) => source.name)).toEqual(["temperature_scale", "amount", "addenda_1"]);
  const i = 10;
  const sum = points.sources.reduce(
    (total, source) => total + source.s_Cv_J_per_mol_K[i]! ** 2,
    points.u_repeat_J_per_mol_K[i]! ** 2,
  );
  expectRelative([points.u_Cv_J_per_mol_K[i]!], [Math.sqrt(sum)], 1e-12);
  // −dC/dT·u: a finite difference of the closed form; the local cubic's slope is good to 2 %.
  const scale = points.sources[0]!.s_Cv_J_per_mol_K[i]!;
  const T = points.T_K[i]!;
  expectRelative([scale], [(-1e-4 * (C(T + 1e-4) - C(T - 1e-4))) / 2e-4], 0.03);
});

test("bins: weighted means with the common part left whole", () => {
  const points = combineNights([night("a", grid(40, 0.4, 1.1), -0.01)], { u_temperature_K: 0 });
  const bins = binnedCurve(points, 20);
  expect(bins.points.reduce((sum, n) => sum + n, 0)).toBe(40);
  for (let i = 0; i < bins.T_K.length; i++) {
    // The mean of C/T³ over a bin of 12 % in T, at the mean ln T: (T²/2)(C/T³)″·(0.12)²/12 is 1.5 % where rotons rise.
    expect(Math.abs(bins.Cv_J_per_mol_K[i]! / C(bins.T_K[i]!) - 1)).toBeLessThan(0.02);
    expect(bins.u_Cv_J_per_mol_K[i]! / bins.Cv_J_per_mol_K[i]!).toBeGreaterThan(0.01);
  }
});
