import type { CommonSource } from "../combine/types.js";
import { InputError } from "../errors.js";
import type { SeparationInput } from "./types.js";

/** The points that are fitted. Every column has length n. */
export interface Points {
  /** Index in the input. */
  readonly row: Int32Array;
  readonly T_K: Float64Array;
  readonly C: Float64Array;
  /** Known standard uncertainties, J/(mol K); or weights in proportion to which the scatter is taken to be. */
  readonly u: Float64Array;
  readonly uncertainty: "known" | "from scatter";
  readonly sources: readonly CommonSource[];
}

/**
 * The points inside the window, ends included.
 * @throws InputError for a temperature, heat capacity or uncertainty that no fit can use, wherever it stands
 */
export function pointsInWindow(input: SeparationInput, [from, to]: readonly [number, number]): Points {
  const { T_K, Cv_J_per_mol_K, u_repeat_J_per_mol_K: u } = input;
  for (let i = 0; i < T_K.length; i++) {
    demandPositive("T_K", T_K[i]!, i, "a temperature above 0 K");
    // A point that noise carried below zero is still a point; one that is not a number is not.
    if (!Number.isFinite(Cv_J_per_mol_K[i]!)) {
      throw unusable("Cv_J_per_mol_K", Cv_J_per_mol_K[i]!, i, "a heat capacity");
    }
    if (u !== null) demandPositive("u_Cv_J_per_mol_K", u[i]!, i, "a standard uncertainty above 0");
  }
  const row = Int32Array.from(Array.from(T_K.keys()).filter((i) => T_K[i]! >= from && T_K[i]! <= to));
  return takeRows(
    {
      row: Int32Array.from(T_K.keys()),
      T_K,
      C: Cv_J_per_mol_K,
      // Equal relative scatter: heat capacities span four decades, their precision does not.
      u: u ?? Cv_J_per_mol_K.map((C, i) => Math.max(Math.abs(C), 1e-3 * 0.08 * T_K[i]! ** 3)),
      uncertainty: u === null ? "from scatter" : "known",
      sources: input.sources,
    },
    row,
  );
}

/** Some of the points, in the order asked for. */
export function takeRows(points: Points, rows: Int32Array): Points {
  const take = (column: Float64Array) => Float64Array.from(rows, (i) => column[i]!);
  return {
    row: rows.map((i) => points.row[i]!),
    T_K: take(points.T_K),
    C: take(points.C),
    u: take(points.u),
    uncertainty: points.uncertainty,
    sources: points.sources.map((source) => ({
      ...source,
      s_Cv_J_per_mol_K: take(source.s_Cv_J_per_mol_K),
    })),
  };
}

function demandPositive(column: string, value: number, i: number, expected: string): void {
  if (!(value > 0 && Number.isFinite(value))) throw unusable(column, value, i, expected);
}

function unusable(column: string, value: number, i: number, expected: string): InputError {
  return new InputError({
    column,
    value: String(value),
    expected: `${expected} in point ${i + 1}`,
    wayOut: "correct the point, or leave its row out of the table",
  });
}
