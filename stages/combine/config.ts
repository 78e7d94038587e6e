import { z } from "zod";

/** From the points of many nights to one curve. */
export const combineSchema = z
  .strictObject({
    bins_per_decade: z.int().min(1).max(200).default(20).meta({
      description:
        "Bins of the mean curve in a decade of temperature, equal in ln T. Fits use the points, not the bins.",
    }),
  })
  .prefault({})
  .meta({ description: "From the points of many nights to one curve." });

export type CombineConfig = z.output<typeof combineSchema>;
