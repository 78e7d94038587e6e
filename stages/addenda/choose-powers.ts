import { DEFAULT_POWERS, fitEmptyCell } from "./empty-cell.js";
import type { Addenda } from "./types.js";

/** Electrons and lattice; then the lattice's next term; then a nuclear or magnetic tail; then both. */
export const CANDIDATE_POWERS: readonly (readonly number[])[] = [
  DEFAULT_POWERS,
  [1, 3, 5],
  [-2, 1, 3],
  [-2, 1, 3, 5],
];

/** A larger model must be this much better before it replaces a smaller one. */
const CLEAR_EVIDENCE = 2;

/** AICc of a fit whose scale of scatter is itself estimated, so wrongly stated uncertainties do not decide. */
function aicc(fit: Addenda): number {
  const n = fit.degreesOfFreedom + fit.powers.length;
  const k = fit.powers.length + 1;
  if (n - k - 1 <= 0) return Number.POSITIVE_INFINITY;
  return n * Math.log(fit.chiSquared / n) + 2 * k + (2 * k * (k + 1)) / (n - k - 1);
}

/**
 * The set of powers that the empty-cell points bear, by AICc (Hurvich and Tsai, Biometrika 76, 297 (1989)) among
 * {@link CANDIDATE_POWERS}; the smallest set that no other beats by more than 2.
 * @param T_K, C_J_per_K, u_J_per_K, dT_K length n
 * @throws InputError if there are too few points even for the smallest set
 */
export function chooseAddendaPowers(
  T_K: Float64Array,
  C_J_per_K: Float64Array,
  u_J_per_K: Float64Array,
  dT_K?: Float64Array,
): readonly number[] {
  let best = { powers: DEFAULT_POWERS, score: Number.POSITIVE_INFINITY };
  for (const powers of CANDIDATE_POWERS) {
    if (powers !== DEFAULT_POWERS && T_K.length <= powers.length + 2) continue;
    const score = aicc(fitEmptyCell(T_K, C_J_per_K, u_J_per_K, powers, dT_K));
    if (score < best.score - CLEAR_EVIDENCE) best = { powers, score };
  }
  return best.powers;
}
