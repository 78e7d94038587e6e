import { z } from "zod";

/** Monte Carlo beside the linear budget. */
export const budgetSchema = z
  .strictObject({
    draws: z.int().min(100).max(1_000_000).default(10_000).meta({
      description:
        "Most draws of the Monte Carlo; it stops earlier where the results are stable (JCGM 101, 7.9).",
    }),
    seed: z.int().min(0).max(0xffffffff).default(1).meta({
      description: "Seed of the draws: the same seed gives the same result. It is published with it.",
    }),
  })
  .prefault({})
  .meta({ description: "Uncertainty budget and its Monte Carlo check." });

export type BudgetConfig = z.output<typeof budgetSchema>;
