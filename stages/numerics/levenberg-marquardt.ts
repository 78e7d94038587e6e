import { Matrix, QrDecomposition } from "ml-matrix";
import { Defect } from "../errors.js";
import { scaledQr } from "./scaled-qr.js";

/** m residuals of p parameters, each already divided by its standard uncertainty. */
export interface LeastSquaresProblem {
  /** m. */
  readonly residuals: number;
  /** Writes the residuals, length m; the sign does not matter. */
  residual(parameter: Float64Array, out: Float64Array): void;
  /** Writes ∂residual/∂parameter, m × p; without it, central differences. */
  jacobian?(parameter: Float64Array, out: Matrix): void;
}

export interface LevenbergMarquardtOptions {
  /** Length p; ±Infinity where free. */
  readonly lower?: ArrayLike<number>;
  readonly upper?: ArrayLike<number>;
  /** "absolute" takes the residuals' unit for their true standard deviation; "scatter" scales by what is left. */
  readonly covariance?: "absolute" | "scatter";
  /** Default 500. */
  readonly mostIterations?: number;
  /** Relative to each parameter: a smaller step ends the search. Default 1e-13. */
  readonly smallestStep?: number;
}

export interface NonlinearFit {
  /** Length p. */
  readonly value: Float64Array;
  /** p × p, from the full Jacobian; NaN for parameters the residuals do not determine or that sit at a bound. */
  readonly covariance: Matrix;
  readonly standardDeviation: Float64Array;
  /** At the solution, m × p. */
  readonly jacobian: Matrix;
  readonly residual: Float64Array;
  readonly chiSquared: number;
  readonly degreesOfFreedom: number;
  readonly residualStandardDeviation: number;
  readonly iterations: number;
  /** False: stopped by the number of iterations. */
  readonly converged: boolean;
  /** Parameters that end on a bound. */
  readonly atBound: readonly number[];
  readonly undetermined: readonly number[];
}

const SMALLEST_STEP = 1e-13;
const SMALLEST_COSINE = 1e-13;

/**
 * Levenberg–Marquardt with column scaling (Moré 1978) and Nielsen's damping (IMM-REP-1999-05); each step by QR of the
 * Jacobian stacked on the damping, never by normal equations. Bounds by projection: a parameter on its bound with the
 * descent pointing out stays there for the step.
 * @param start length p, inside the bounds
 */
export function levenbergMarquardt(
  problem: LeastSquaresProblem,
  start: ArrayLike<number>,
  options: LevenbergMarquardtOptions = {},
): NonlinearFit {
  const m = problem.residuals;
  const p = start.length;
  const lower = Float64Array.from(options.lower ?? new Float64Array(p).fill(Number.NEGATIVE_INFINITY));
  const upper = Float64Array.from(options.upper ?? new Float64Array(p).fill(Number.POSITIVE_INFINITY));
  const clamp = (value: number, j: number) => Math.min(upper[j]!, Math.max(lower[j]!, value));
  let value = Float64Array.from(start, clamp);
  let residual = new Float64Array(m);
  problem.residual(value, residual);
  let cost = half(residual);
  if (!Number.isFinite(cost)) throw new Defect("the residuals at the start are not finite");
  const typical = value.map((v) => Math.abs(v));
  const J = Matrix.zeros(m, p);
  const scale = new Float64Array(p);
  let damping = 1e-3;
  let growth = 2;
  let converged = false;
  let iterations = 0;
  const most = options.mostIterations ?? 500;
  const smallestStep = options.smallestStep ?? SMALLEST_STEP;

  differentiate(problem, value, typical, lower, upper, J);
  while (!converged && iterations < most) {
    iterations++;
    const gradient = new Float64Array(p);
    const norm = new Float64Array(p);
    for (let j = 0; j < p; j++) {
      for (let i = 0; i < m; i++) {
        gradient[j]! += J.get(i, j) * residual[i]!;
        norm[j]! += J.get(i, j) ** 2;
      }
      scale[j] = Math.max(scale[j]!, Math.sqrt(norm[j]!));
    }
    const held = Array.from({ length: p }, (_, j) => j).filter(
      (j) =>
        norm[j] === 0 ||
        (value[j]! <= lower[j]! && gradient[j]! > 0) ||
        (value[j]! >= upper[j]! && gradient[j]! < 0),
    );
    const free = Array.from({ length: p }, (_, j) => j).filter((j) => !held.includes(j));
    const length = Math.sqrt(2 * cost);
    // The angle between the residual and every column: at a right angle nothing is left to gain.
    const cosine = Math.max(0, ...free.map((j) => Math.abs(gradient[j]!) / (Math.sqrt(norm[j]!) * length)));
    if (free.length === 0 || length === 0 || cosine <= SMALLEST_COSINE) {
      converged = true;
      break;
    }
    const reduced = reduce(J, residual, free);
    for (;;) {
      const step = dampedStep(reduced, free, scale, damping, p);
      const trial = value.map((v, j) => clamp(v + step[j]!, j));
      const moved = trial.map((v, j) => v - value[j]!);
      const size = Math.max(
        ...free.map((j) => Math.abs(moved[j]!) / Math.max(Math.abs(value[j]!), 1e-3 * typical[j]!, 1e-300)),
      );
      const trialResidual = new Float64Array(m);
      problem.residual(trial, trialResidual);
      const trialCost = half(trialResidual);
      const predicted = cost - costOfLinearModel(J, residual, moved);
      const gain = (cost - trialCost) / Math.max(predicted, Number.MIN_VALUE);
      if (Number.isFinite(trialCost) && trialCost < cost) {
        value = trial;
        residual = trialResidual;
        cost = trialCost;
        damping *= Math.max(1 / 3, 1 - (2 * gain - 1) ** 3);
        growth = 2;
        differentiate(problem, value, typical, lower, upper, J);
        if (size <= smallestStep) converged = true;
        break;
      }
      if (size <= smallestStep || predicted <= 4 * Number.EPSILON * Number.EPSILON * cost) {
        converged = true;
        break;
      }
      damping *= growth;
      growth *= 2;
      if (damping > 1e40) {
        converged = true;
        break;
      }
    }
  }

  const atBound = Array.from({ length: p }, (_, j) => j).filter(
    (j) => value[j]! <= lower[j]! || value[j]! >= upper[j]!,
  );
  const inside = Array.from({ length: p }, (_, j) => j).filter((j) => !atBound.includes(j));
  const degreesOfFreedom = m - inside.length;
  const chiSquared = 2 * cost;
  const variance = degreesOfFreedom > 0 ? chiSquared / degreesOfFreedom : Number.NaN;
  const covariance = Matrix.zeros(p, p).fill(Number.NaN);
  let undetermined: number[] = [];
  if (inside.length > 0) {
    const qr = scaledQr(J.subMatrixColumn(inside), problem.jacobian === undefined ? 1e-9 : undefined);
    undetermined = qr.undetermined.map((j) => inside[j]!);
    const gram = qr.inverseGram();
    const unit = options.covariance === "absolute" ? 1 : variance;
    inside.forEach((row, a) => {
      inside.forEach((column, b) => {
        covariance.set(row, column, gram.get(a, b) * unit);
      });
    });
  }
  return {
    value,
    covariance,
    standardDeviation: value.map((_, j) => Math.sqrt(covariance.get(j, j))),
    jacobian: J,
    residual,
    chiSquared,
    degreesOfFreedom,
    residualStandardDeviation: Math.sqrt(variance),
    iterations,
    converged,
    atBound,
    undetermined,
  };
}

function half(residual: Float64Array): number {
  let sum = 0;
  for (let i = 0; i < residual.length; i++) sum += residual[i]! * residual[i]!;
  return sum / 2;
}

/** R of the free columns' QR, and Qᵀ·residual as its last column: all that a damped step needs of m rows. */
function reduce(J: Matrix, residual: Float64Array, free: readonly number[]): Matrix {
  const k = free.length;
  const wide = Matrix.zeros(Math.max(J.rows, k + 1), k + 1);
  for (let i = 0; i < J.rows; i++) {
    for (let j = 0; j < k; j++) wide.set(i, j, J.get(i, free[j]!));
    wide.set(i, k, residual[i]!);
  }
  return new QrDecomposition(wide).upperTriangularMatrix;
}

/** Length p; 0 for the parameters that are held. */
function dampedStep(
  reduced: Matrix,
  free: readonly number[],
  scale: Float64Array,
  damping: number,
  p: number,
): Float64Array {
  const k = free.length;
  const stacked = Matrix.zeros(2 * k, k);
  const right = new Float64Array(2 * k);
  for (let i = 0; i < k; i++) {
    for (let j = i; j < k; j++) stacked.set(i, j, reduced.get(i, j));
    right[i] = -reduced.get(i, k);
    stacked.set(k + i, i, Math.sqrt(damping) * scale[free[i]!]!);
  }
  const solution = scaledQr(stacked).solve(right);
  const step = new Float64Array(p);
  free.forEach((j, i) => {
    step[j] = Number.isNaN(solution[i]!) ? 0 : solution[i]!;
  });
  return step;
}

function costOfLinearModel(J: Matrix, residual: Float64Array, step: Float64Array): number {
  let sum = 0;
  for (let i = 0; i < J.rows; i++) {
    let r = residual[i]!;
    for (let j = 0; j < step.length; j++) r += J.get(i, j) * step[j]!;
    sum += r * r;
  }
  return sum / 2;
}

/** The problem's own Jacobian, or central differences (one-sided at a bound); their error is about 1e-10 relative. */
function differentiate(
  problem: LeastSquaresProblem,
  value: Float64Array,
  typical: Float64Array,
  lower: Float64Array,
  upper: Float64Array,
  J: Matrix,
): void {
  if (problem.jacobian !== undefined) {
    problem.jacobian(value, J);
    return;
  }
  const above = new Float64Array(J.rows);
  const below = new Float64Array(J.rows);
  const at = value.slice();
  for (let j = 0; j < value.length; j++) {
    const size = Math.max(Math.abs(value[j]!), 1e-3 * typical[j]!) || 1;
    const step = Math.cbrt(Number.EPSILON) * size;
    const high = Math.min(upper[j]!, value[j]! + step);
    const low = Math.max(lower[j]!, value[j]! - step);
    at[j] = high;
    problem.residual(at, above);
    at[j] = low;
    problem.residual(at, below);
    at[j] = value[j]!;
    for (let i = 0; i < J.rows; i++) J.set(i, j, (above[i]! - below[i]!) / (high - low));
  }
}
