import type { Command } from "./common.js";

export const reduceCommand: Command = {
  usage: "reduce [run]",
  summary: "one night to heat capacity points",
  options: (yargs) =>
    yargs
      .positional("run", { type: "string", describe: "run file (YAML)" })
      .option("cell", { type: "string", describe: "cell file" })
      .option("sample", { type: "string", describe: "sample file" })
      .option("campaign", { type: "string", describe: "campaign file, instead of run, cell and sample" })
      .option("run-id", { type: "string", alias: "id", describe: "name of the night in the campaign" })
      .option("out", { type: "string", describe: "file for the points; stdout if left out" }),
  async run(options) {
    const { reduceCommandLine } = await import("../reduce.js");
    return reduceCommandLine(options);
  },
};
