import type { CommonSource } from "../../../stages/combine/types.js";
import { normal, pcg32 } from "../../../stages/numerics/random.js";
import { phononCoefficient_J_per_mol_K4 } from "../../../stages/physics/phonon.js";
import { rotonShape, rotonShapeGapDerivative } from "../../../stages/physics/roton.js";
import type { SeparationConfig, SeparationInput } from "../../../stages/separate/types.js";

/** An invented liquid that is Landau's form exactly, near helium. */
export const TRUTH = {
  u1: 238.3,
  gap: 8.7,
  B: 21.7,
  A3: phononCoefficient_J_per_mol_K4(238.3, 27.58e-6),
  A5: -0.029,
  A7: 0.008,
  volume: 27.58e-6,
};

export function heat(T: number): number {
  return TRUTH.A3 * T ** 3 + TRUTH.A5 * T ** 5 + TRUTH.A7 * T ** 7 + TRUTH.B * rotonShape(T, TRUTH.gap);
}

function slope(T: number): number {
  const step = 1e-5 * T;
  return (heat(T + step) - heat(T - step)) / (2 * step);
}

export function logGrid(n: number, from: number, to: number): Float64Array {
  return Float64Array.from({ length: n }, (_, i) => from * (to / from) ** (i / (n - 1)));
}

/** Gain, thermometer scale and addenda: smooth columns, as the pipeline makes them. */
export function commonSources(T: Float64Array): readonly CommonSource[] {
  return [
    { name: "amount", title: "amount of helium", s_Cv_J_per_mol_K: T.map((t) => -0.004 * heat(t)) },
    { name: "scale", title: "temperature scale", s_Cv_J_per_mol_K: T.map((t) => -4e-4 * slope(t)) },
    { name: "addenda", title: "empty cell", s_Cv_J_per_mol_K: T.map((t) => 2e-5 * t + 1e-5 * t ** 3) },
  ];
}

/** Points with noise of a relative size, each common source drawn once. */
export function simulated(
  T: Float64Array,
  relative: number,
  sources: readonly CommonSource[],
  seed: number,
): SeparationInput {
  const z = normal(pcg32(seed));
  const shared = sources.map(() => z());
  const u = T.map((t) => relative * heat(t));
  const C = T.map((t, i) =>
    sources.reduce((sum, source, s) => sum + shared[s]! * source.s_Cv_J_per_mol_K[i]!, heat(t) + u[i]! * z()),
  );
  return {
    T_K: T,
    Cv_J_per_mol_K: C,
    u_repeat_J_per_mol_K: u,
    sources,
    molar_volume_m3_per_mol: { value: TRUTH.volume, u: 0.001 * TRUTH.volume },
  };
}

export const LANDAU: SeparationConfig = {
  window_K: [0.35, 1.15],
  phonon_powers: [3, 5, 7],
  other_powers: [],
  model: "landau",
};

/** dC/d(A₃, A₅, A₇, B, Δ), written here once more by hand. */
export function derivatives(T: number): readonly number[] {
  return [T ** 3, T ** 5, T ** 7, rotonShape(T, TRUTH.gap), TRUTH.B * rotonShapeGapDerivative(T, TRUTH.gap)];
}
