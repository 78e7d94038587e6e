import type { HeatCapacity } from "../combine/types.js";
import { COVARIANCE_RULE, datasetColumns, datasetTitle } from "./dataset.js";
import type { CampaignFacts } from "./types.js";

/**
 * What stands beside the dataset: a table description after the W3C's "Metadata Vocabulary for Tabular Data"
 * (2015), units by schema.org's unitText, provenance among its notes.
 * @param fileName the dataset's own file name, beside this one
 * @returns JSON, two spaces deep, with keys in a fixed order
 */
export function datasetMetadata(dataset: HeatCapacity, facts: CampaignFacts, fileName: string): string {
  const { provenance, publication } = facts;
  const description = {
    "@context": ["http://www.w3.org/ns/csvw", { "@language": "en" }],
    url: fileName,
    "dc:title": datasetTitle(facts),
    "dc:creator": publication.authors,
    ...(publication.licence === undefined ? {} : { "dc:license": publication.licence }),
    dialect: { commentPrefix: "#", header: true, delimiter: ",", encoding: "utf-8" },
    tableSchema: {
      columns: datasetColumns(dataset).map(({ name, unit, datatype, meaning }) => ({
        name,
        titles: name,
        "dc:description": meaning,
        datatype,
        ...(unit === "" ? {} : { "schema:unitText": unit }),
      })),
      primaryKey: ["run", "pulse"],
    },
    notes: [
      {
        about: "measurement",
        campaign: facts.campaign,
        cell: facts.cell,
        sample: facts.sample,
        substance: facts.substance,
        condition: facts.condition,
        amount: facts.amount,
        molar_volume: facts.molar_volume,
        temperature_scale: facts.temperature_scale,
        points: dataset.T_K.length,
      },
      { about: "uncertainty", coverage_factor: 1, covariance: COVARIANCE_RULE },
      {
        about: "provenance",
        program: "rotonwell",
        version: provenance.version,
        constants: provenance.constants,
        seed: provenance.seed,
        inputs: provenance.inputs.map(({ file, sha256 }) => ({ file, sha256 })),
        effective_configuration: facts.configuration,
      },
    ],
  };
  return `${JSON.stringify(description, null, 2)}\n`;
}
