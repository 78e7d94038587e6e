/** A polynomial by weighted least squares, in an orthogonal basis on the abscissa t = (x − centre)/halfWidth. */
export interface PolynomialFit {
  readonly degree: number;
  /** Coefficients of the orthogonal (monic) polynomials, length degree + 1; uncorrelated with each other. */
  readonly coefficient: Float64Array;
  /** Σ w (y − value)². */
  readonly sumOfSquares: number;
  /** Samples of positive weight, less degree + 1. */
  readonly effectiveDegreesOfFreedom: number;
  value(x: number): number;
  /** Variance of value(x) where a sample of weight 1 has variance 1; Infinity where the samples cannot carry the degree. */
  variance(x: number): number;
  slope(x: number): number;
}

/** Below this share of the zeroth norm an orthogonal polynomial is rounding only: too few distinct abscissae. */
const NOTHING_LEFT = 1e-28;

/**
 * Weighted polynomial least squares by orthogonal polynomials (Forsythe, J. Soc. Indust. Appl. Math. 5, 74 (1957)):
 * no matrix, no normal equations, no column of working storage. Each coefficient is taken from the residual that the
 * lower ones left, which keeps what cancellation would lose. A degree that the abscissae cannot carry gets the
 * coefficient 0 and an infinite variance.
 * @param x, y length n, finite; views are fine
 * @param w length n, ≥ 0, or null for ones; 0 leaves a sample out
 */
export function fitPolynomial(
  x: Float64Array,
  y: Float64Array,
  w: Float64Array | null,
  degree: number,
): PolynomialFit {
  const n = x.length;
  let lowest = Number.POSITIVE_INFINITY;
  let highest = Number.NEGATIVE_INFINITY;
  let counted = 0;
  for (let i = 0; i < n; i++) {
    if (w !== null && w[i]! <= 0) continue;
    counted++;
    if (x[i]! < lowest) lowest = x[i]!;
    if (x[i]! > highest) highest = x[i]!;
  }
  const centre = counted > 0 ? lowest + (highest - lowest) / 2 : 0;
  const halfWidth = highest > lowest ? (highest - lowest) / 2 : 1;

  // p_{j+1} = (t − α_j) p_j − β_j p_{j−1}; γ_j = Σ w p_j².
  const alpha = new Float64Array(degree + 1);
  const beta = new Float64Array(degree + 1);
  const gamma = new Float64Array(degree + 1);
  const coefficient = new Float64Array(degree + 1);
  for (let j = 0; j <= degree; j++) {
    let norm = 0;
    let first = 0;
    let product = 0;
    for (let i = 0; i < n; i++) {
      const weight = w === null ? 1 : w[i]!;
      if (weight <= 0) continue;
      const t = (x[i]! - centre) / halfWidth;
      let residual = y[i]!;
      let before = 0;
      let p = 1;
      for (let m = 0; m < j; m++) {
        residual -= coefficient[m]! * p;
        const next = (t - alpha[m]!) * p - beta[m]! * before;
        before = p;
        p = next;
      }
      const wp = weight * p;
      norm += wp * p;
      first += wp * p * t;
      product += wp * residual;
    }
    const carried = norm > NOTHING_LEFT * (j === 0 ? 0 : gamma[0]!);
    gamma[j] = carried ? norm : 0;
    if (!carried) break;
    alpha[j] = first / norm;
    beta[j] = j === 0 ? 0 : norm / gamma[j - 1]!;
    coefficient[j] = product / norm;
  }

  const value = (at: number): number => {
    const t = (at - centre) / halfWidth;
    let before = 0;
    let p = 1;
    let sum = 0;
    for (let j = 0; j <= degree; j++) {
      sum += coefficient[j]! * p;
      const next = (t - alpha[j]!) * p - beta[j]! * before;
      before = p;
      p = next;
    }
    return sum;
  };
  let sumOfSquares = 0;
  for (let i = 0; i < n; i++) {
    const weight = w === null ? 1 : w[i]!;
    if (weight <= 0) continue;
    const residual = y[i]! - value(x[i]!);
    sumOfSquares += weight * residual * residual;
  }
  return {
    degree,
    coefficient,
    sumOfSquares,
    effectiveDegreesOfFreedom: counted - degree - 1,
    value,
    variance(at) {
      const t = (at - centre) / halfWidth;
      let before = 0;
      let p = 1;
      let sum = 0;
      for (let j = 0; j <= degree; j++) {
        if (gamma[j] === 0) return Number.POSITIVE_INFINITY;
        sum += (p * p) / gamma[j]!;
        const next = (t - alpha[j]!) * p - beta[j]! * before;
        before = p;
        p = next;
      }
      return sum;
    },
    slope(at) {
      const t = (at - centre) / halfWidth;
      let before = 0;
      let p = 1;
      let slopeBefore = 0;
      let slope = 0;
      let sum = 0;
      for (let j = 0; j <= degree; j++) {
        sum += coefficient[j]! * slope;
        const nextSlope = p + (t - alpha[j]!) * slope - beta[j]! * slopeBefore;
        const next = (t - alpha[j]!) * p - beta[j]! * before;
        slopeBefore = slope;
        slope = nextSlope;
        before = p;
        p = next;
      }
      return sum / halfWidth;
    },
  };
}
