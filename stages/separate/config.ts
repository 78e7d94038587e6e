import { z } from "zod";
import { oneOf, quantity } from "../quantities/schema.js";
import type { SeparationConfig } from "./types.js";

const window = z
  .tuple([
    quantity("temperature", {
      description: "Lowest temperature fitted.",
      sign: "positive",
      example: "0.35 K",
    }),
    quantity("temperature", {
      description: "Highest temperature fitted.",
      sign: "positive",
      example: "1.15 K",
    }),
  ])
  .check((context) => {
    const [from, to] = context.value;
    if (from.value < to.value) return;
    context.issues.push({
      code: "custom",
      input: context.value,
      message: "window upside down",
      params: {
        expected: "the lower temperature first",
        wayOut: `write ["${to.text}", "${from.text}"], if the two differ`,
      },
    });
  })
  .prefault(["0.35 K", "1.15 K"])
  .meta({ description: "Temperatures fitted." });

export const separateSchema = z
  .strictObject({
    window,
    phonon_powers: z
      .union([z.literal("auto"), z.array(z.int().min(3).max(15)).min(1)])
      .default("auto")
      .meta({
        description: "Powers of T in the phonon series; auto ranks [3], [3, 5] and [3, 5, 7] by AICc.",
        shown: ["[3, 5, 7]"],
      }),
    other_powers: z
      .array(z.int().min(-3).max(2))
      .default([])
      .meta({
        description: "Further powers of T, such as 0 for a ³He impurity.",
        shown: ["[0]"],
      }),
    model: oneOf(
      ["auto", "landau", "whole-curve"],
      "Form of the excitations: Landau's two pieces, or the whole curve.",
    ),
  })
  .prefault({})
  .meta({ description: "From the curve to sound speed and roton gap." });

export type SeparateConfig = z.output<typeof separateSchema>;

/** The same, as the stage takes it: plain numbers in K. */
export function separationConfig(config: SeparateConfig): SeparationConfig {
  return {
    window_K: [config.window[0].value, config.window[1].value],
    phonon_powers: config.phonon_powers,
    other_powers: config.other_powers,
    model: config.model,
  };
}
