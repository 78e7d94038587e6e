import { z } from "zod";
import { MATERIAL_NAMES } from "../physics/materials.js";
import { quantity } from "../quantities/schema.js";

const runs = z.union([z.string().min(1), z.array(z.string().min(1)).min(1)]).meta({
  description: "Nights with the empty cell: a pattern with *, ? and **, or a list of run files and patterns.",
  shown: ["../nights/thimble-empty/*/run.yaml"],
});

const part = z.strictObject({
  material: z
    .enum(MATERIAL_NAMES)
    .meta({ description: "Material, from the table of specific heats.", shown: ["copper"] }),
  mass: quantity("mass", { description: "Its mass.", sign: "positive", example: "24.1 ± 0.1 g" }),
});

/** What the empty cell adds: measured on empty-cell nights, or summed over its parts. */
export const addendaSchema = z
  .strictObject({
    runs: runs.optional(),
    parts: z
      .array(part)
      .min(1)
      .optional()
      .meta({
        description: "Parts of the cell, with published specific heats.",
        shown: ["[{ material: copper, mass: 24.1 ± 0.1 g }]"],
      }),
    powers: z
      .union([z.literal("auto"), z.array(z.int().min(-3).max(9)).min(1)])
      .default("auto")
      .meta({
        description: "Powers of T fitted to the empty-cell nights; auto ranks the usual ones by AICc.",
        shown: ["[1, 3]"],
      }),
  })
  .check((context) => {
    const { runs: nights, parts } = context.value;
    if ((nights === undefined) !== (parts === undefined)) return;
    context.issues.push({
      code: "custom",
      input: context.value,
      message: "runs or parts",
      params: {
        expected: "either runs or parts",
        wayOut:
          nights === undefined
            ? "add runs: with the empty-cell nights, or parts: with materials and masses"
            : "keep runs: if the empty cell was measured, otherwise parts:",
      },
    });
  })
  .meta({ description: "Heat capacity of the empty cell, to be subtracted." });

export type AddendaConfig = z.output<typeof addendaSchema>;
export type PartConfig = z.output<typeof part>;
/** Powers of T, or the choice left to the fit. */
export type AddendaPowers = AddendaConfig["powers"];
