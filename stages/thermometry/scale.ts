import type { Calibration } from "./types.js";

/** Scales in force, and where they are defined. */
const SCALES = [
  // H. Preston-Thomas, Metrologia 27, 3 (1990)
  {
    name: "ITS-90",
    lowest_K: 0.65,
    highest_K: Number.POSITIVE_INFINITY,
    beyond: "PLTS-2000 is defined below 1 K",
  },
  // R. L. Rusby et al., J. Low Temp. Phys. 126, 633 (2002)
  { name: "PLTS-2000", lowest_K: 0.9e-3, highest_K: 1, beyond: "ITS-90 is defined above 0.65 K" },
] as const;

/** What a person should know of a calibration's temperature scale; empty for a scale that covers its range. */
export function scaleNotes({
  scale,
  temperatureRange_K,
}: Pick<Calibration, "scale" | "temperatureRange_K">): string[] {
  const known = SCALES.find(({ name }) => name === scale);
  if (known === undefined)
    return [
      `temperature scale ${JSON.stringify(scale)} is neither ITS-90 nor PLTS-2000; its name is kept as given`,
    ];
  const [from, to] = temperatureRange_K;
  if (from >= known.lowest_K && to <= known.highest_K) return [];
  const span =
    known.highest_K === Number.POSITIVE_INFINITY
      ? `from ${known.lowest_K} K up`
      : `up to ${known.highest_K} K`;
  return [
    `${scale} is defined ${span}; the calibration, from ${from.toPrecision(4)} K to ${to.toPrecision(4)} K, extends it (${known.beyond})`,
  ];
}
