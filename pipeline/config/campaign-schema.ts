import { z } from "zod";
import { addendaSchema } from "../../stages/addenda/config.js";
import { combineSchema } from "../../stages/combine/config.js";
import { publicationSchema } from "../../stages/publish/config.js";
import { pulsesSchema } from "../../stages/pulses/config.js";
import { name, text } from "../../stages/quantities/schema.js";
import { separateSchema } from "../../stages/separate/config.js";

export const reductionSchema = z
  .strictObject({
    pulses: pulsesSchema,
    combine: combineSchema,
    separate: separateSchema,
  })
  .prefault({})
  .meta({ description: "How the stages work; every key has a default." });

/** Settings of every stage, complete. */
export type Reduction = z.output<typeof reductionSchema>;

export const campaignSchema = z.strictObject({
  version: z.literal(1).default(1).meta({ description: "Version of this file's form." }),
  campaign: name({
    description: "Name of the campaign; its dataset is a file of this name.",
    example: "fjord-7",
  }),
  cell: text({ description: "File of the cell.", example: "../cells/thimble.yaml" }),
  sample: text({ description: "File of the sample.", example: "../samples/fill-7.yaml" }),
  runs: z.union([z.string().min(1), z.array(z.string().min(1)).min(1)]).meta({
    description: "The nights: a pattern with *, ? and **, or a list of run files and patterns.",
    shown: ["../nights/fjord-7/*/run.yaml"],
  }),
  addenda: addendaSchema.optional(),
  reduction: reductionSchema,
  publication: publicationSchema,
  output: text({
    description: "Folder of the results; by default out/<campaign> beside this file.",
    example: "../out/fjord-7",
  }).optional(),
});

export type CampaignConfig = z.output<typeof campaignSchema>;

/** The reduction of a night that belongs to no campaign. */
export function defaultReduction(): Reduction {
  return reductionSchema.parse({});
}
