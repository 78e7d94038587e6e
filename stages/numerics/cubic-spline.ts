import { DomainError } from "../errors.js";

/** What holds at the two ends: no curvature, or one cubic over the first (last) two intervals. */
export type SplineEnds = "natural" | "not-a-knot";

/** NaN outside the knots: a spline is never an extrapolation. */
export interface SplineEvaluator {
  value(x: number): number;
  slope(x: number): number;
  curvature(x: number): number;
}

export interface CubicSpline extends SplineEvaluator {
  /** First and last knot. */
  readonly range: readonly [number, number];
  /** An evaluator of its own that remembers its last interval: fast where the abscissae move slowly. */
  cursor(): SplineEvaluator;
}

/**
 * Interpolating cubic spline.
 * @param x length n ≥ 2, strictly increasing
 * @param y length n, finite
 * @throws DomainError with the index of the first knot that does not increase
 * @see de Boor, A Practical Guide to Splines (1978), ch. IV
 */
export function cubicSpline(x: Float64Array, y: Float64Array, ends: SplineEnds): CubicSpline {
  const n = x.length;
  if (n < 2) throw new DomainError(`a spline needs two knots at least; there are ${n}`);
  for (let i = 1; i < n; i++) {
    if (!(x[i]! > x[i - 1]!)) throw new DomainError(`knot ${x[i]} does not lie above ${x[i - 1]}`, i);
  }
  const knot = x.slice();
  const height = y.slice();
  const bend = secondDerivatives(knot, height, ends);
  const last = n - 2;

  const find = (at: number): number => {
    let low = 0;
    let high = n - 1;
    while (high - low > 1) {
      const middle = (low + high) >>> 1;
      if (knot[middle]! <= at) low = middle;
      else high = middle;
    }
    return low;
  };
  const outside = (at: number) => !(at >= knot[0]! && at <= knot[n - 1]!);

  const evaluator = (locate: (at: number) => number): SplineEvaluator => ({
    value(at) {
      if (outside(at)) return Number.NaN;
      const i = locate(at);
      const h = knot[i + 1]! - knot[i]!;
      const b = (at - knot[i]!) / h;
      const a = 1 - b;
      const cubic = (a * a * a - a) * bend[i]! + (b * b * b - b) * bend[i + 1]!;
      return a * height[i]! + b * height[i + 1]! + (cubic * h * h) / 6;
    },
    slope(at) {
      if (outside(at)) return Number.NaN;
      const i = locate(at);
      const h = knot[i + 1]! - knot[i]!;
      const b = (at - knot[i]!) / h;
      const a = 1 - b;
      const cubic = (3 * b * b - 1) * bend[i + 1]! - (3 * a * a - 1) * bend[i]!;
      return (height[i + 1]! - height[i]!) / h + (cubic * h) / 6;
    },
    curvature(at) {
      if (outside(at)) return Number.NaN;
      const i = locate(at);
      const b = (at - knot[i]!) / (knot[i + 1]! - knot[i]!);
      return (1 - b) * bend[i]! + b * bend[i + 1]!;
    },
  });

  return {
    range: [knot[0]!, knot[n - 1]!],
    ...evaluator(find),
    cursor() {
      let here = 0;
      return evaluator((at) => {
        if (at >= knot[here]! && at <= knot[here + 1]!) return here;
        // A slow drift steps to the neighbour; anything else is searched for.
        if (here < last && at > knot[here + 1]! && at <= knot[here + 2]!) here += 1;
        else if (here > 0 && at < knot[here]! && at >= knot[here - 1]!) here -= 1;
        else here = find(at);
        return here;
      });
    },
  };
}

function secondDerivatives(x: Float64Array, y: Float64Array, ends: SplineEnds): Float64Array {
  const n = x.length;
  const bend = new Float64Array(n);
  if (n === 2) return bend;
  const h = (i: number) => x[i + 1]! - x[i]!;
  const chord = (i: number) => (y[i + 1]! - y[i]!) / h(i);
  if (n === 3 && ends === "not-a-knot") {
    return bend.fill((2 * (chord(1) - chord(0))) / (h(0) + h(1)));
  }
  // Continuity of slope at knot i: h₋ M₋ + 2 (h₋ + h₊) M + h₊ M₊ = 6 (chord₊ − chord₋), a tridiagonal system.
  const diagonal = new Float64Array(n);
  const above = new Float64Array(n);
  const right = new Float64Array(n);
  const below = new Float64Array(n);
  for (let i = 1; i < n - 1; i++) {
    below[i] = h(i - 1);
    diagonal[i] = 2 * (h(i - 1) + h(i));
    above[i] = h(i);
    right[i] = 6 * (chord(i) - chord(i - 1));
  }
  if (ends === "not-a-knot") {
    // M₀ = M₁ (1 + h₀/h₁) − M₂ h₀/h₁ put into the first equation, and its mirror image into the last.
    diagonal[1]! += h(0) * (1 + h(0) / h(1));
    above[1]! -= (h(0) * h(0)) / h(1);
    const m = n - 2;
    diagonal[m]! += h(m) * (1 + h(m) / h(m - 1));
    below[m]! -= (h(m) * h(m)) / h(m - 1);
  }
  for (let i = 2; i < n - 1; i++) {
    const factor = below[i]! / diagonal[i - 1]!;
    diagonal[i]! -= factor * above[i - 1]!;
    right[i]! -= factor * right[i - 1]!;
  }
  for (let i = n - 2; i >= 1; i--) {
    bend[i] = (right[i]! - (i === n - 2 ? 0 : above[i]! * bend[i + 1]!)) / diagonal[i]!;
  }
  if (ends === "not-a-knot") {
    bend[0] = bend[1]! + (bend[1]! - bend[2]!) * (h(0) / h(1));
    bend[n - 1] = bend[n - 2]! + (bend[n - 2]! - bend[n - 3]!) * (h(n - 2) / h(n - 3));
  }
  return bend;
}
