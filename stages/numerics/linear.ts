import type { Matrix } from "ml-matrix";
import { scaledQr } from "./scaled-qr.js";

/** A linear model by weighted least squares. p coefficients, n data. */
export interface LinearFit {
  /** Length p; NaN where the data do not determine the coefficient. */
  readonly value: Float64Array;
  /** p × p. */
  readonly covariance: Matrix;
  readonly standardDeviation: Float64Array;
  /** y − model, in the unit of y, length n. */
  readonly residual: Float64Array;
  /** Σ (residual/u)²; with u null the plain sum of squares. */
  readonly chiSquared: number;
  readonly degreesOfFreedom: number;
  /** √(chiSquared/degreesOfFreedom); NaN without degrees of freedom. */
  readonly residualStandardDeviation: number;
  readonly rank: number;
  /** Columns whose coefficient is undetermined; empty at full rank. */
  readonly undetermined: readonly number[];
}

/**
 * Weighted linear least squares by column-scaled QR. With u the covariance is absolute; without, it is scaled by the
 * residual variance (NaN where no degree of freedom is left).
 * @param design n × p
 * @param u standard uncertainty of y, length n, > 0; or null: equal and unknown
 */
export function linearLeastSquares(design: Matrix, y: Float64Array, u: Float64Array | null): LinearFit {
  const n = design.rows;
  const p = design.columns;
  const weighted = design.clone();
  const right = y.slice();
  if (u !== null) {
    for (let i = 0; i < n; i++) {
      weighted.mulRow(i, 1 / u[i]!);
      right[i]! /= u[i]!;
    }
  }
  const qr = scaledQr(weighted);
  const value = qr.solve(right);
  const rest = qr.residual(right);
  const chiSquared = rest.reduce((sum, r) => sum + r * r, 0);
  const degreesOfFreedom = n - qr.rank;
  const residualVariance = degreesOfFreedom > 0 ? chiSquared / degreesOfFreedom : Number.NaN;
  const covariance = u === null ? qr.inverseGram().mul(residualVariance) : qr.inverseGram();
  return {
    value,
    covariance,
    standardDeviation: Float64Array.from({ length: p }, (_, j) => Math.sqrt(covariance.get(j, j))),
    residual: u === null ? rest : rest.map((r, i) => r * u[i]!),
    chiSquared,
    degreesOfFreedom,
    residualStandardDeviation: Math.sqrt(residualVariance),
    rank: qr.rank,
    undetermined: qr.undetermined,
  };
}
