import type { Command } from "./common.js";

export const publishCommand: Command = {
  usage: "publish <campaign> <dir>",
  summary: "the frozen dataset for a paper",
  options: (yargs) =>
    yargs
      .positional("campaign", { type: "string", demandOption: true, describe: "campaign file (YAML)" })
      .positional("dir", {
        type: "string",
        demandOption: true,
        describe: "folder for the dataset; must be new or empty",
      })
      .option("accept", { type: "string", describe: "reason to publish although a quality gate fails" }),
  async run(options) {
    const { publishCommandLine } = await import("../publish.js");
    return publishCommandLine(options, String(options["campaign"]), String(options["dir"]));
  },
};
