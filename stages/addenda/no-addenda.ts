import type { Addenda } from "./types.js";

/** For a campaign whose sample is the whole body, or whose total heat capacity is what is wanted. */
export function noAddenda(): Addenda {
  return {
    source: "none",
    powers: [],
    coefficient: [],
    covariance: [],
    range_K: [0, Number.POSITIVE_INFINITY],
    chiSquared: 0,
    degreesOfFreedom: 0,
    notes: ["no addenda were given: the total heat capacity is taken as the sample's"],
    heatCapacity_J_per_K: () => 0,
    meanOver: () => 0,
    sensitivities: () => [],
    rangeNotes: () => [],
  };
}
