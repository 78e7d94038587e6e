import type { Command } from "./common.js";

export const checkCommand: Command = {
  usage: "check <files..>",
  summary: "reads configurations and logs, computes nothing: what is there, and what is wrong",
  options: (yargs) =>
    yargs.positional("files", {
      type: "string",
      array: true,
      demandOption: true,
      describe: "configuration files",
    }),
  async run(options) {
    const { checkCommandLine } = await import("../check.js");
    return checkCommandLine(options, options["files"] as string[]);
  },
};
