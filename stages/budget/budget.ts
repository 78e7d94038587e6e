import type { Separation } from "../separate/types.js";
import type { Budget, BudgetLine } from "./types.js";

/**
 * The linear uncertainty budget of u₁ and Δ: one line a source, squares adding up to the separation's own standard
 * uncertainties, since both come from the same gain of the same fit.
 * @returns NaN in the columns of a number that the separation could not have
 * @see methods.md §6; JCGM 100:2008, 5.1 and 5.2
 */
export function budget(separation: Separation): Budget {
  const lines = separation.influences;
  const speed = lines.map((line) => (separation.sound_speed && line.sound_speed_m_per_s) ?? Number.NaN);
  const gap = lines.map((line) => (separation.roton_gap && line.roton_gap_K) ?? Number.NaN);
  const speedShare = shares(speed);
  const gapShare = shares(gap);
  return {
    lines: lines.map(
      (line, i): BudgetLine => ({
        name: line.name,
        title: line.title,
        relative_Cv: line.relative_Cv,
        sound_speed_m_per_s: speed[i]!,
        roton_gap_K: gap[i]!,
        share_sound_speed: speedShare[i]!,
        share_roton_gap: gapShare[i]!,
      }),
    ),
    u_sound_speed_m_per_s: rootSumOfSquares(speed),
    u_roton_gap_K: rootSumOfSquares(gap),
  };
}

/** No line, no uncertainty known: NaN, not 0. */
function rootSumOfSquares(change: readonly number[]): number {
  return change.length === 0 ? Number.NaN : Math.hypot(...change);
}

function shares(change: readonly number[]): readonly number[] {
  const total = rootSumOfSquares(change);
  return change.map((each) => (total === 0 ? 0 : (each / total) ** 2));
}
