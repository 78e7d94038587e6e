/** Kinds of configuration file; each has a key of its own name at its top: `campaign: fjord-7`. */
export const KINDS = ["campaign", "cell", "sample", "thermometer", "run", "scenario"] as const;
export type Kind = (typeof KINDS)[number];

/** How a message speaks of a file of each kind. */
export const FILE_OF: Readonly<Record<Kind, string>> = {
  campaign: "a campaign file",
  cell: "a cell file",
  sample: "a sample file",
  thermometer: "a thermometer file",
  run: "a run file",
  scenario: "a scenario file",
};
