import type { BinnedCurve, HeatCapacity } from "./types.js";

/**
 * Weighted means in bins of equal width in ln T. Within a bin C is averaged as C/T³, which changes far less than C.
 * @param binsPerDecade at least 1
 */
export function binnedCurve(points: HeatCapacity, binsPerDecade: number): BinnedCurve {
  const width = Math.LN10 / binsPerDecade;
  const bins = new Map<number, number[]>();
  points.T_K.forEach((T, i) => {
    const key = Math.floor(Math.log(T) / width);
    const bin = bins.get(key);
    if (bin === undefined) bins.set(key, [i]);
    else bin.push(i);
  });
  const rows = [...bins].sort(([a], [b]) => a - b).map(([, members]) => meanOf(points, members));
  return {
    T_K: Float64Array.from(rows, (row) => row.T),
    Cv_J_per_mol_K: Float64Array.from(rows, (row) => row.C),
    u_Cv_J_per_mol_K: Float64Array.from(rows, (row) => row.u),
    points: Int32Array.from(rows, (row) => row.count),
  };
}

function meanOf(points: HeatCapacity, members: readonly number[]) {
  const relative = (i: number) => points.u_repeat_J_per_mol_K[i]! / points.Cv_J_per_mol_K[i]!;
  const weight = members.map((i) => 1 / relative(i) ** 2);
  const total = weight.reduce((sum, w) => sum + w, 0);
  const mean = (value: (i: number) => number) =>
    members.reduce((sum, i, j) => sum + weight[j]! * value(i), 0) / total;
  const T = Math.exp(mean((i) => Math.log(points.T_K[i]!)));
  const C = mean((i) => points.Cv_J_per_mol_K[i]! / points.T_K[i]! ** 3) * T ** 3;
  // Repeatability averages down; what is common to all points does not.
  const common = points.sources.map((source) =>
    mean((i) => source.s_Cv_J_per_mol_K[i]! / points.Cv_J_per_mol_K[i]!),
  );
  return { T, C, u: Math.abs(C) * Math.hypot(1 / Math.sqrt(total), ...common), count: members.length };
}
