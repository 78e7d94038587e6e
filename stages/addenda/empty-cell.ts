import { CholeskyDecomposition, Matrix, SingularValueDecomposition } from "ml-matrix";
import { InputError } from "../errors.js";
import { linearLeastSquares } from "../numerics/linear.js";
import { rangeNotes } from "./range-notes.js";
import type { Addenda, AddendaSensitivity } from "./types.js";

/** Electrons and lattice: what any cell has. {@link chooseAddendaPowers} looks whether the data want more. */
export const DEFAULT_POWERS: readonly number[] = [1, 3];

/** Principal directions this much smaller than the leading one (in standard uncertainty) are left out. */
const NEGLIGIBLE = 1e-3;
/** Points, even in ln T, on which the size of a direction is judged. */
const GRID = 32;

/**
 * Fits C = Σ aᵢT^{pᵢ} to the empty cell, weighted, and keeps the whole covariance.
 *
 * Where the scatter exceeds the stated uncertainties the covariance is multiplied by χ²/ν (Birge, Phys. Rev. 40, 207
 * (1932)); where it falls short they stand.
 * @param T_K, C_J_per_K, u_J_per_K length n
 * @param powers distinct exponents, fewer than n
 * @param dT_K length n: each C is then the mean over its step, and is fitted as one
 * @throws InputError if there are too few points for so many powers, or the powers cannot be told apart
 */
export function fitEmptyCell(
  T_K: Float64Array,
  C_J_per_K: Float64Array,
  u_J_per_K: Float64Array,
  powers: readonly number[],
  dT_K?: Float64Array,
): Addenda {
  const n = T_K.length;
  if (n <= powers.length) throw tooFewPoints(n, powers);
  // In units of the geometric mean temperature every column is near 1: T⁻² and T⁵ side by side lose no digits.
  const unit_K = Math.exp(T_K.reduce((sum, T) => sum + Math.log(T), 0) / n);
  const design = new Matrix(n, powers.length);
  for (let i = 0; i < n; i++) {
    const half = (dT_K?.[i] ?? 0) / 2;
    powers.forEach((power, j) => {
      design.set(i, j, meanPower(power, (T_K[i]! - half) / unit_K, (T_K[i]! + half) / unit_K));
    });
  }
  const fit = linearLeastSquares(design, C_J_per_K, u_J_per_K);
  if (fit.undetermined.length > 0) {
    throw new InputError({
      key: "addenda.powers",
      value: `[${powers.join(", ")}]`,
      expected: "powers that the empty-cell points can tell apart",
      wayOut: `leave out ${fit.undetermined.map((j) => powers[j]).join(", ")}, or add empty-cell nights over a wider range of temperature`,
    });
  }
  const birge = Math.sqrt(Math.max(1, fit.chiSquared / fit.degreesOfFreedom));
  const covariance = fit.covariance.mul(birge ** 2);
  const range_K = [T_K.reduce((a, b) => Math.min(a, b)), T_K.reduce((a, b) => Math.max(a, b))] as const;
  const scale = powers.map((power) => unit_K ** -power);
  const inUnits = (t: number) => powers.reduce((sum, p, j) => sum + fit.value[j]! * t ** p, 0);
  const rangeInUnits = [range_K[0] / unit_K, range_K[1] / unit_K] as const;
  const directions = principalDirections(covariance, powers, rangeInUnits, inUnits);

  return {
    source: "empty-cell",
    powers,
    coefficient: powers.map((_, j) => fit.value[j]! * scale[j]!),
    covariance: powers.map((_, i) => powers.map((__, j) => covariance.get(i, j) * scale[i]! * scale[j]!)),
    range_K,
    chiSquared: fit.chiSquared,
    degreesOfFreedom: fit.degreesOfFreedom,
    notes:
      birge > 1.5
        ? [
            `empty-cell points scatter ${birge.toFixed(1)} times their stated uncertainty; the addenda's is raised to match`,
          ]
        : [],
    heatCapacity_J_per_K: (T) => inUnits(T / unit_K),
    meanOver: (T1, T2) =>
      powers.reduce((sum, p, j) => sum + fit.value[j]! * meanPower(p, T1 / unit_K, T2 / unit_K), 0),
    sensitivities: (at_K) =>
      directions.map((direction, i) => sensitivity(direction, i, powers, unit_K, at_K)),
    rangeNotes: (at_K) => rangeNotes(at_K, range_K, "the empty-cell nights"),
  };
}

/** Exact mean of t^power over a…b. */
export function meanPower(power: number, a: number, b: number): number {
  const middle = (a + b) / 2;
  const w = (b - a) / (2 * middle);
  // Differences of powers lose 1/w digits; below a thousandth the series is exact to a double's last digit.
  if (Math.abs(w) < 1e-3) {
    const bend = (power * (power - 1) * w * w) / 6;
    return middle ** power * (1 + bend * (1 + ((power - 2) * (power - 3) * w * w) / 20));
  }
  if (power === -1) return Math.log(b / a) / (b - a);
  return (b ** (power + 1) - a ** (power + 1)) / ((power + 1) * (b - a));
}

function tooFewPoints(n: number, powers: readonly number[]): InputError {
  return new InputError({
    key: "addenda.runs",
    expected: `more than ${powers.length} usable empty-cell pulses for the powers ${powers.join(", ")}; there are ${n}`,
    wayOut: "add empty-cell nights, give fewer addenda.powers, or list the cell's parts under addenda.parts",
  });
}

/**
 * Uncorrelated directions in the coefficients whose outer products add up to the covariance, largest first.
 *
 * Any rotation of a root of the covariance would do; this one is principal in what the addenda do to the heat capacity,
 * relative to itself and over the measured range. Principal in the coefficients would not serve: where T⁻² and T⁵ trade
 * against each other, the smallest direction there moves the curve as much as the largest.
 */
function principalDirections(
  covariance: Matrix,
  powers: readonly number[],
  range: readonly [number, number],
  heatCapacity: (t: number) => number,
): readonly Float64Array[] {
  const root = new CholeskyDecomposition(covariance).lowerTriangularMatrix;
  const grid = Array.from({ length: GRID }, (_, i) => range[0] * (range[1] / range[0]) ** (i / (GRID - 1)));
  const relative = new Matrix(grid.map((t) => powers.map((p) => t ** p / Math.abs(heatCapacity(t)))));
  const svd = new SingularValueDecomposition(relative.mmul(root));
  const directions = root.mmul(svd.rightSingularVectors);
  return svd.diagonal.flatMap((size, j) => {
    if (size < NEGLIGIBLE * svd.diagonal[0]!) return [];
    const direction = directions.getColumn(j);
    // A singular vector's sign is arbitrary; a fixed one keeps the dataset the same on every machine.
    const sign = direction.reduce((sum, v) => sum + v, 0) < 0 ? -1 : 1;
    return [Float64Array.from(direction, (v) => sign * v)];
  });
}

function sensitivity(
  direction: Float64Array,
  index: number,
  powers: readonly number[],
  unit_K: number,
  T_K: Float64Array,
): AddendaSensitivity {
  return {
    title: `empty-cell fit, direction ${index + 1}`,
    s_C_J_per_K: T_K.map((T) => powers.reduce((sum, p, j) => sum + direction[j]! * (T / unit_K) ** p, 0)),
  };
}
