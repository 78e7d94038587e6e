import { projectionOf } from "../numerics/variable-projection.js";
import { soundSpeed_m_per_s } from "../physics/phonon.js";
import { GAP_BRACKET_K, landauModel, SCAN_STEPS } from "./landau.js";
import { pointsInWindow, takeRows } from "./points.js";
import type { Separation, SeparationInput } from "./types.js";

export interface Refit {
  /** NaN where the drawn T³ coefficient is not above 0. */
  readonly sound_speed_m_per_s: number;
  /** NaN where χ² has no minimum in the whole bracket. */
  readonly roton_gap_K: number;
}

/**
 * The same separation again and again, for data that differ in Cv (and volume) only, as the draws of a Monte Carlo do:
 * same points, weights and powers, the whole non-linear fit each time, no covariance. About a seventh of the time.
 * @param separation by Landau's form, with both numbers; null is returned otherwise
 * @returns a function of Cv (length of the input) and molar volume
 */
export function refitter(
  input: SeparationInput,
  separation: Separation,
): ((Cv_J_per_mol_K: Float64Array, molarVolume_m3_per_mol: number) => Refit) | null {
  const { sound_speed, roton_gap, curve } = separation;
  if (separation.model !== "landau" || sound_speed === null || roton_gap === null) return null;
  const all = pointsInWindow(input, [0, Number.POSITIVE_INFINITY]);
  // From scatter: the weights that the separation ended with, which are known uncertainties by now.
  const points = { ...takeRows(all, curve.row), u: curve.u_repeat_J_per_mol_K };
  const powers = separation.parameters
    .filter(({ name }) => /^A-?\d+$/.test(name))
    .map(({ name }) => Number(name.slice(1)));
  const { model, whiten } = landauModel(points, powers);
  const projection = projectionOf(model);
  const reach = Math.max(0.05, 8 * roton_gap.standard_uncertainty);
  const near = {
    bracket: [Math.max(GAP_BRACKET_K[0], roton_gap.value - reach), roton_gap.value + reach] as const,
    steps: 8,
  };
  const cubic = powers.indexOf(3);
  return (Cv, volume) => {
    const y = whiten(Float64Array.from(curve.row, (i) => Cv[i]!));
    let found = projection.search(y, near);
    if (found.atBound) found = projection.search(y, { bracket: GAP_BRACKET_K, steps: SCAN_STEPS });
    const A3 = projection.amplitudes(y, found.nonlinear)[cubic]!;
    return {
      sound_speed_m_per_s: A3 > 0 ? soundSpeed_m_per_s(A3, volume) : Number.NaN,
      roton_gap_K: found.atBound ? Number.NaN : found.nonlinear[0]!,
    };
  };
}
