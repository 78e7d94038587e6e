import { z } from "zod";
import { text } from "../quantities/schema.js";

/** What a published dataset says of itself. */
export const publicationSchema = z
  .strictObject({
    title: text({
      description: "Title of the dataset.",
      example: "Heat capacity of helium-4, fill 7",
    }).optional(),
    authors: z
      .array(text({ description: "Name of an author.", example: "A. Name" }))
      .prefault([])
      .meta({ description: "Authors, in order." }),
    licence: text({
      description: "Licence of the dataset, by its SPDX identifier.",
      example: "CC-BY-4.0",
    }).optional(),
  })
  .prefault({})
  .meta({ description: "What the published dataset says of itself." });

export type PublicationConfig = z.output<typeof publicationSchema>;
