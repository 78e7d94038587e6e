import { fitPolynomial } from "../numerics/polynomial.js";

/** A smooth curve through C(T) points, model-free. Every column has length n, the points' own. */
export interface SmoothCurve {
  readonly C: Float64Array;
  /** dC/dT. */
  readonly slope: Float64Array;
  /** d²C/dT². */
  readonly curvature: Float64Array;
}

/** Fewest neighbours for a local cubic that still averages. */
const LEAST_NEIGHBOURS = 9;
const SHARE = 0.25;

/**
 * Local regression (Cleveland, J. Am. Stat. Assoc. 74, 829 (1979)) of ln C on ln T: cubic, tricube weights over the
 * nearest quarter of the points. In these variables a power law is a straight line and the activated rise bends
 * slowly, so the local cubic has little to bend for.
 * @param T_K increasing, length n; C > 0 where it is to count. Fewer than 4 usable points give NaN throughout.
 * @param u standard uncertainty of C, length n; weights within a neighbourhood
 */
export function smoothCurve(T_K: Float64Array, C: Float64Array, u: Float64Array): SmoothCurve {
  const usable: number[] = [];
  for (let i = 0; i < T_K.length; i++) if (C[i]! > 0 && T_K[i]! > 0) usable.push(i);
  const m = usable.length;
  const lnT = Float64Array.from(usable, (i) => Math.log(T_K[i]!));
  const lnC = Float64Array.from(usable, (i) => Math.log(C[i]!));
  const relative = Float64Array.from(usable, (i) => C[i]! / u[i]!);
  const typical = relative.slice().sort()[m >>> 1] ?? 1;
  // A point far better than its fellows must not bend the curve alone, nor one far worse be ignored.
  const trust = relative.map((value) => Math.min(3, Math.max(1 / 3, value / typical)) ** 2);
  const neighbours = Math.min(m, Math.max(LEAST_NEIGHBOURS, Math.ceil(SHARE * m)));
  const degree = Math.min(3, neighbours - 1);
  const out = {
    C: new Float64Array(T_K.length).fill(Number.NaN),
    slope: new Float64Array(T_K.length).fill(Number.NaN),
    curvature: new Float64Array(T_K.length).fill(Number.NaN),
  };
  if (m < 4) return out;
  const weight = new Float64Array(neighbours);
  let from = 0;
  for (let i = 0; i < T_K.length; i++) {
    const x = Math.log(T_K[i]!);
    while (from + neighbours < m && lnT[from + neighbours]! - x < x - lnT[from]!) from++;
    const reach = 1.0001 * Math.max(x - lnT[from]!, lnT[from + neighbours - 1]! - x);
    const h = distinct(lnT, from, neighbours) > degree ? reach : Number.POSITIVE_INFINITY;
    for (let j = 0; j < neighbours; j++) {
      const d = Math.abs(lnT[from + j]! - x) / h;
      weight[j] = trust[from + j]! * (1 - d ** 3) ** 3;
    }
    const xs = lnT.subarray(from, from + neighbours);
    const fit = fitPolynomial(xs, lnC.subarray(from, from + neighbours), weight, degree);
    const step = 1e-3 * Math.max(reach, 1e-6);
    const y = fit.value(x);
    const y1 = fit.slope(x);
    const y2 = (fit.slope(x + step) - fit.slope(x - step)) / (2 * step);
    const T = T_K[i]!;
    const value = Math.exp(y);
    out.C[i] = value;
    out.slope[i] = (value * y1) / T;
    out.curvature[i] = (value * (y1 * y1 + y2 - y1)) / (T * T);
  }
  return out;
}

function distinct(x: Float64Array, from: number, count: number): number {
  let n = 1;
  for (let j = 1; j < count; j++) if (x[from + j]! > x[from + j - 1]!) n++;
  return n;
}
