import { type SmoothCurve, smoothCurve } from "./smooth-curve.js";

/**
 * A pulse of height ΔT measures the mean of C over ΔT, which differs from C at the middle by C″ΔT²/24. The curve
 * that C″ is taken from is itself made of corrected points, so the correction is repeated until it stands still.
 * @param T_K increasing; all columns of length n
 * @returns the corrected column and the smooth curve through it
 */
export function correctFiniteStep(
  T_K: Float64Array,
  C: Float64Array,
  u: Float64Array,
  dT_K: Float64Array,
): { C: Float64Array; curve: SmoothCurve } {
  let corrected = C.slice();
  let curve = smoothCurve(T_K, corrected, u);
  // Each round reduces the error of the correction by the size of the correction, a per cent at most.
  for (let round = 0; round < 4; round++) {
    corrected = C.map((value, i) => {
      const correction = (curve.curvature[i]! * dT_K[i]! ** 2) / 24;
      return Number.isFinite(correction) ? value - correction : value;
    });
    curve = smoothCurve(T_K, corrected, u);
  }
  return { C: corrected, curve };
}
