import { Matrix, QrDecomposition, SingularValueDecomposition } from "ml-matrix";

/** A design matrix factored once, to be solved for many right-hand sides. */
export interface ScaledQr {
  readonly rank: number;
  /** Columns whose coefficient the rows do not determine; empty at full rank. */
  readonly undetermined: readonly number[];
  /**
   * Least-squares coefficients, length p; NaN where undetermined. One step of iterative refinement (Golub and
   * Wilkinson, Numer. Math. 9, 139 (1966)) wins back digits where the fit is close.
   */
  solve(right: Float64Array): Float64Array;
  /** What no combination of the columns can carry of `right`, length n; unique at any rank. */
  residual(right: Float64Array): Float64Array;
  /** (AᵀA)⁻¹, p × p; rows and columns of undetermined coefficients are NaN. */
  inverseGram(): Matrix;
}

/** A direction in which the scaled columns shorten by more than this is rounding. */
const ROUNDING = 1e-14;
/** A coefficient with a larger share than this in such a direction is undetermined. */
const SHARE_OF_NOTHING = 1e-6;

/**
 * Householder QR (ml-matrix) with the columns scaled to length one, which keeps T³ and T⁻² in one design. Where the
 * scaled columns are linearly dependent the singular vectors of R say which coefficients that touches: those are NaN,
 * the others stay as good as they are.
 * @param design n × p, n ≥ 1, finite
 * @param negligible relative length at which a direction counts as lost; more where the design itself is less exact
 */
export function scaledQr(design: Matrix, negligible = ROUNDING): ScaledQr {
  const p = design.columns;
  const scale = new Float64Array(p);
  const scaled = design.clone();
  for (let j = 0; j < p; j++) {
    let sum = 0;
    for (let i = 0; i < design.rows; i++) sum = Math.hypot(sum, design.get(i, j));
    scale[j] = sum > 0 ? sum : 1;
    for (let i = 0; i < design.rows; i++) scaled.set(i, j, design.get(i, j) / scale[j]!);
  }
  const qr = design.rows >= p ? new QrDecomposition(scaled) : null;
  const svd = new SingularValueDecomposition(qr === null ? scaled : qr.upperTriangularMatrix, {
    autoTranspose: true,
  });
  const longest = Math.max(...svd.diagonal);
  // Fewer rows than columns: the missing directions have no singular value at all.
  const length = (k: number) => (k < Math.min(design.rows, p) ? svd.diagonal[k]! : 0);
  const lost = Array.from({ length: p }, (_, k) => k).filter((k) => !(length(k) > negligible * longest));
  const rank = p - lost.length;
  const V = svd.rightSingularVectors;
  const less = (right: Float64Array, coefficient: Float64Array): Float64Array =>
    right.map((y, i) => {
      let rest = y;
      for (let j = 0; j < p; j++) rest -= design.get(i, j) * coefficient[j]!;
      return rest;
    });
  if (qr !== null && rank === p) {
    const once = (right: Float64Array): Float64Array => {
      const inScaled = qr.solve(Matrix.columnVector(right));
      return scale.map((s, j) => inScaled.get(j, 0) / s);
    };
    const solve = (right: Float64Array): Float64Array => {
      const first = once(right);
      const correction = once(less(right, first));
      return first.map((value, j) => value + correction[j]!);
    };
    return {
      rank,
      undetermined: [],
      solve,
      residual: (right) => less(right, solve(right)),
      inverseGram() {
        const inverse = inverseOfTriangle(qr.upperTriangularMatrix);
        const gram = Matrix.zeros(p, p);
        for (let i = 0; i < p; i++) {
          for (let j = 0; j <= i; j++) {
            let sum = 0;
            for (let k = i; k < p; k++) sum += inverse.get(i, k) * inverse.get(j, k);
            gram.set(i, j, sum / (scale[i]! * scale[j]!));
            gram.set(j, i, sum / (scale[i]! * scale[j]!));
          }
        }
        return gram;
      },
    };
  }
  const kept = Array.from({ length: p }, (_, k) => k).filter((k) => length(k) > negligible * longest);
  // What the kept directions leave of each coordinate axis lies in the lost ones.
  const undetermined = Array.from({ length: p }, (_, j) => j).filter(
    (j) => 1 - kept.reduce((sum, k) => sum + V.get(j, k) ** 2, 0) > SHARE_OF_NOTHING ** 2,
  );
  const isLost = new Set(undetermined);
  const shortest = (right: Float64Array): Float64Array => {
    const along = kept.map((k) => {
      let sum = 0;
      for (let i = 0; i < design.rows; i++) {
        let row = 0;
        for (let j = 0; j < p; j++) row += scaled.get(i, j) * V.get(j, k);
        sum += row * right[i]!;
      }
      return sum / length(k) ** 2;
    });
    return scale.map((s, j) => kept.reduce((sum, k, m) => sum + V.get(j, k) * along[m]!, 0) / s);
  };
  return {
    rank,
    undetermined,
    solve: (right) => shortest(right).map((value, j) => (isLost.has(j) ? Number.NaN : value)),
    residual: (right) => less(right, shortest(right)),
    inverseGram() {
      const gram = Matrix.zeros(p, p);
      for (let i = 0; i < p; i++) {
        for (let j = 0; j < p; j++) {
          const sum = kept.reduce((s, k) => s + (V.get(i, k) * V.get(j, k)) / length(k) ** 2, 0);
          gram.set(i, j, isLost.has(i) || isLost.has(j) ? Number.NaN : sum / (scale[i]! * scale[j]!));
        }
      }
      return gram;
    },
  };
}

function inverseOfTriangle(R: Matrix): Matrix {
  const p = R.columns;
  const inverse = Matrix.zeros(p, p);
  for (let j = 0; j < p; j++) {
    inverse.set(j, j, 1 / R.get(j, j));
    for (let i = j - 1; i >= 0; i--) {
      let sum = 0;
      for (let k = i + 1; k <= j; k++) sum += R.get(i, k) * inverse.get(k, j);
      inverse.set(i, j, -sum / R.get(i, i));
    }
  }
  return inverse;
}
