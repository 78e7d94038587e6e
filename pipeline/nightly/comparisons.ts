import type { Comparison } from "../../stages/publish/types.js";
import type { Estimate } from "../../stages/separate/types.js";
import type { CampaignResult } from "../chain.js";

/** Published values for liquid helium-4 at its vapour pressure, T → 0. */
const PUBLISHED = [
  {
    quantity: "sound speed",
    value: 238.3,
    u: 0.13,
    unit: "m/s",
    source: "ultrasound, Whitney and Chase, Phys. Rev. 158, 200 (1967)",
  },
  {
    quantity: "roton gap",
    value: 8.608,
    u: 0.012,
    unit: "K",
    source: "neutrons below 0.1 K, Godfrin et al., Phys. Rev. B 103, 104516 (2021)",
  },
] as const;

/** Of the liquid at vapour pressure (density equation of Donnelly and Barenghi 1998); u₁ and Δ change with pressure. */
const AT_VAPOUR_PRESSURE_M3_PER_MOL = 27.58e-6;
/** A hundredth in volume changes u₁ by 3 %, ten times what is to be seen. */
const SAME_DENSITY = 2e-3;

export function comparisons(result: CampaignResult): Comparison[] {
  if (Math.abs(result.molarVolume.value / AT_VAPOUR_PRESSURE_M3_PER_MOL - 1) > SAME_DENSITY) return [];
  const { sound_speed, roton_gap } = result.separation;
  const ours: readonly (Estimate | null)[] = [sound_speed, roton_gap];
  return PUBLISHED.flatMap((published, i) => {
    const estimate = ours[i];
    if (estimate === null || estimate === undefined) return [];
    const difference = estimate.value - published.value;
    const u = Math.hypot(estimate.standard_uncertainty, published.u);
    return [{ ...published, difference, normalisedDifference: difference / u }];
  });
}
