import type { Command } from "./common.js";

export const simulateCommand: Command = {
  usage: "simulate <scenario> <dir>",
  summary: "raw logs of an invented cell, with known truth",
  options: (yargs) =>
    yargs
      .positional("scenario", { type: "string", demandOption: true, describe: "scenario file (YAML)" })
      .positional("dir", {
        type: "string",
        demandOption: true,
        describe: "folder that the nights are written into",
      }),
  async run(options) {
    const { simulateInto } = await import("../simulate.js");
    const { consoleTeller } = await import("../progress.js");
    const teller = consoleTeller(options);
    const files = simulateInto(String(options["scenario"]), String(options["dir"]));
    teller.say(`${files.length} files written into ${options["dir"]}`);
    teller.json({ files });
    return 0;
  },
};
