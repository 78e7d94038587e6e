import { Matrix } from "ml-matrix";
import { Defect } from "../errors.js";
import { brentRoot } from "./brent.js";
import { levenbergMarquardt } from "./levenberg-marquardt.js";
import { dot, type OrthonormalBasis, orthonormalBasis } from "./orthonormal.js";
import { type ScaledQr, scaledQr } from "./scaled-qr.js";

/** A sum of columns with free amplitudes; some columns move with a few non-linear parameters. n rows, in units of u. */
export interface SeparableModel {
  /** Columns that never move, each of length n. */
  readonly fixed: readonly Float64Array[];
  moving(nonlinear: ArrayLike<number>): readonly Float64Array[];
  /** ∂moving/∂nonlinear: one list of columns for each non-linear parameter. */
  derivative(nonlinear: ArrayLike<number>): readonly (readonly Float64Array[])[];
}

/** Where to look: one parameter over a whole bracket, or any number of them from a start. */
export type Search =
  | { readonly bracket: readonly [number, number]; readonly steps: number }
  | { readonly start: readonly number[] };

export interface SeparableFit {
  /** Amplitudes of the fixed columns, then of the moving ones. */
  readonly linear: Float64Array;
  readonly nonlinear: Float64Array;
  /** From the full Jacobian for rows of standard deviation 1; order: linear, nonlinear. NaN where undetermined. */
  readonly covariance: Matrix;
  /** n × (linear, nonlinear). */
  readonly jacobian: Matrix;
  /** y − model, length n. */
  readonly residual: Float64Array;
  readonly chiSquared: number;
  readonly rank: number;
  readonly undetermined: readonly number[];
  /** True where the best value lies at an end of the bracket: the minimum is not in it. */
  readonly atBound: boolean;
}

/**
 * Variable projection (Golub and Pereyra, SIAM J. Numer. Anal. 10, 413 (1973)): for given non-linear parameters the
 * amplitudes follow by linear least squares, so only the non-linear ones are searched. The fixed columns are taken
 * out of everything once; a trial then costs one projection.
 *
 * One parameter: the bracket is scanned, and from the lowest point the zero of the exact slope of χ² is found, which
 * is good to the last digit where the minimum itself would be good to half of them. Several: Levenberg–Marquardt
 * on the projected residual with Kaufman's Jacobian (BIT 15, 49 (1975)).
 * @param y length n
 */
export function variableProjection(model: SeparableModel, y: Float64Array, search: Search): SeparableFit {
  const { nonlinear, atBound } = projectionOf(model).search(y, search);
  return { ...separableFitAt(model, y, nonlinear), atBound };
}

/** A model made ready for many data, as a Monte Carlo has them: the fixed columns are orthogonalised once. */
export interface Projection {
  search(y: Float64Array, search: Search): { readonly nonlinear: Float64Array; readonly atBound: boolean };
  /** Of the fixed columns, then of the moving ones. */
  amplitudes(y: Float64Array, nonlinear: ArrayLike<number>): Float64Array;
}

export function projectionOf(model: SeparableModel): Projection {
  const still = orthonormalBasis();
  for (const column of model.fixed) still.add(column);
  return {
    search(y, search) {
      const rest = y.slice();
      still.project(rest);
      const reduced = { model, still, rest };
      return "bracket" in search
        ? scan(reduced, search.bracket, search.steps)
        : descend(reduced, search.start);
    },
    amplitudes: (y, nonlinear) => designAt(model, nonlinear).solve(y),
  };
}

function designAt(model: SeparableModel, nonlinear: ArrayLike<number>): ScaledQr {
  return scaledQr(new Matrix([...model.fixed, ...model.moving(nonlinear)]).transpose());
}

interface Reduced {
  readonly model: SeparableModel;
  readonly still: OrthonormalBasis;
  /** y without what the fixed columns hold. */
  readonly rest: Float64Array;
}

interface Trial {
  readonly basis: OrthonormalBasis;
  readonly residual: Float64Array;
}

function tryAt({ model, still, rest }: Reduced, nonlinear: ArrayLike<number>): Trial {
  const basis = still.extend();
  for (const column of model.moving(nonlinear)) basis.add(column);
  const residual = rest.slice();
  basis.project(residual);
  return { basis, residual };
}

/** Amplitudes of the moving columns alone, the fixed ones taken out. */
function movingAmplitudes({ model, still, rest }: Reduced, nonlinear: ArrayLike<number>): Float64Array {
  const columns = model.moving(nonlinear).map((column) => {
    const out = column.slice();
    still.project(out);
    return out;
  });
  if (columns.length === 1) {
    const only = columns[0]!;
    return Float64Array.of(dot(only, rest) / dot(only, only));
  }
  return scaledQr(new Matrix(columns).transpose()).solve(rest);
}

/** ∂model/∂nonlinear at the best amplitudes, one column for each parameter. */
function movedColumns(reduced: Reduced, nonlinear: ArrayLike<number>): Float64Array[] {
  const amplitude = movingAmplitudes(reduced, nonlinear);
  return combine(reduced.model.derivative(nonlinear), amplitude, reduced.rest.length);
}

function combine(
  derivative: readonly (readonly Float64Array[])[],
  amplitude: Float64Array,
  n: number,
): Float64Array[] {
  return derivative.map((columns) => {
    const sum = new Float64Array(n);
    columns.forEach((column, j) => {
      for (let i = 0; i < n; i++) sum[i]! += amplitude[j]! * column[i]!;
    });
    return sum;
  });
}

function scan(
  reduced: Reduced,
  [from, to]: readonly [number, number],
  steps: number,
): { nonlinear: Float64Array; atBound: boolean } {
  const at = (k: number) => from + ((to - from) * k) / steps;
  let best = 0;
  let lowest = Number.POSITIVE_INFINITY;
  for (let k = 0; k <= steps; k++) {
    const { residual } = tryAt(reduced, [at(k)]);
    const chiSquared = dot(residual, residual);
    if (chiSquared < lowest) {
      lowest = chiSquared;
      best = k;
    }
  }
  // ∂χ²/∂α = −2 r·(∂model/∂α): exact, since the residual is at right angles to every column.
  const slope = (alpha: number) => {
    const { residual } = tryAt(reduced, [alpha]);
    return -dot(residual, movedColumns(reduced, [alpha])[0]!);
  };
  const low = at(Math.max(0, best - 1));
  const high = at(Math.min(steps, best + 1));
  const slopeLow = slope(low);
  const slopeHigh = slope(high);
  if (!(slopeLow < 0 && slopeHigh > 0)) return { nonlinear: Float64Array.of(at(best)), atBound: true };
  return { nonlinear: Float64Array.of(brentRoot(slope, low, high, slopeLow, slopeHigh)), atBound: false };
}

function descend(reduced: Reduced, start: readonly number[]): { nonlinear: Float64Array; atBound: boolean } {
  const fit = levenbergMarquardt(
    {
      residuals: reduced.rest.length,
      residual(alpha, out) {
        out.set(tryAt(reduced, alpha).residual);
      },
      jacobian(alpha, out) {
        const { basis } = tryAt(reduced, alpha);
        movedColumns(reduced, alpha).forEach((column, j) => {
          basis.project(column);
          for (let i = 0; i < column.length; i++) out.set(i, j, -column[i]!);
        });
      },
    },
    start,
  );
  if (!fit.converged) throw new Defect("variable projection does not settle from its start");
  return { nonlinear: fit.value, atBound: false };
}

/** The linear fit at given non-linear parameters (none, for a model without), and the Jacobian of all of them there. */
export function separableFitAt(
  model: SeparableModel,
  y: Float64Array,
  nonlinear: Float64Array,
): Omit<SeparableFit, "atBound"> {
  const columns = [...model.fixed, ...model.moving(nonlinear)];
  const qr = designAt(model, nonlinear);
  const linear = qr.solve(y);
  const residual = qr.residual(y);
  const amplitude = linear.slice(model.fixed.length).map((a) => (Number.isNaN(a) ? 0 : a));
  const moved = combine(model.derivative(nonlinear), amplitude, y.length);
  const jacobian = new Matrix([...columns, ...moved]).transpose();
  const full = scaledQr(jacobian);
  return {
    linear,
    nonlinear,
    covariance: full.inverseGram(),
    jacobian,
    residual,
    chiSquared: dot(residual, residual),
    rank: full.rank,
    undetermined: full.undetermined,
  };
}
