import type { Comparison } from "../../stages/publish/types.js";
import type { Estimate } from "../../stages/separate/types.js";
import type { CampaignResult } from "../chain.js";

/**
 * Published values for liquid helium-4 at its vapour pressure, T → 0, and how they change with density:
 * d ln u₁/d ln ρ = 2.84 and |d ln Δ/d ln ρ| ≈ 0.8, both from memory, used only to widen the comparison.
 */
const PUBLISHED = [
  {
    quantity: "sound speed",
    value: 238.3,
    u: 0.13,
    unit: "m/s",
    source: "ultrasound, Whitney and Chase, Phys. Rev. 158, 200 (1967)",
    byDensity: 2.84,
  },
  {
    quantity: "roton gap",
    value: 8.608,
    u: 0.012,
    unit: "K",
    source: "neutrons below 0.1 K, Godfrin et al., Phys. Rev. B 103, 104516 (2021)",
    byDensity: 0.8,
  },
] as const;

/** Of the liquid at vapour pressure (density equation of Donnelly and Barenghi 1998); u₁ and Δ change with pressure. */
const AT_VAPOUR_PRESSURE_M3_PER_MOL = 27.58e-6;
/** A hundredth in volume changes u₁ by 3 %, ten times what is to be seen. */
const SAME_DENSITY = 2e-3;

export function comparisons(result: CampaignResult): Comparison[] {
  if (Math.abs(result.molarVolume.value / AT_VAPOUR_PRESSURE_M3_PER_MOL - 1) > SAME_DENSITY) return [];
  const { separation, molarVolume } = result;
  // A whole curve that does not fit these points says nothing about the form that does.
  const perFreedom = (of: { chi_squared: number; degrees_of_freedom: number }): number =>
    of.chi_squared / Math.max(1, of.degrees_of_freedom);
  const whole = separation.alternatives.find(
    (other) => other.model === "whole-curve" && perFreedom(other) < 4 * Math.max(1, perFreedom(separation)),
  );
  const numbers = (of: { sound_speed: Estimate | null; roton_gap: Estimate | null } | undefined) => [
    of?.sound_speed,
    of?.roton_gap,
  ];
  return PUBLISHED.flatMap(({ byDensity, ...published }, i) => {
    const estimate = numbers(separation)[i];
    if (estimate === null || estimate === undefined) return [];
    const other = numbers(whole)[i];
    // What the form itself may be wrong by: its distance from the whole curve, on the same points. No scatter shows it.
    const shape = other === null || other === undefined ? 0 : Math.abs(estimate.value - other.value);
    const density = byDensity * published.value * (molarVolume.u / molarVolume.value);
    const difference = estimate.value - published.value;
    const u = Math.hypot(estimate.standard_uncertainty, published.u, density, shape);
    return [{ ...published, difference, normalisedDifference: difference / u }];
  });
}
