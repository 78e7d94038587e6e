import type { Command } from "./common.js";

export const nightlyCommand: Command = {
  usage: "nightly <campaign>",
  summary: "all nights of a campaign, then its curve, separation, budget and report",
  options: (yargs) =>
    yargs.positional("campaign", { type: "string", demandOption: true, describe: "campaign file (YAML)" }),
  async run(options) {
    const { nightlyRecord, nightlyText, runNightly } = await import("../nightly/nightly.js");
    const { consoleTeller } = await import("../progress.js");
    const teller = consoleTeller(options);
    const result = await runNightly(String(options["campaign"]), teller);
    teller.say(nightlyText(result));
    teller.json(nightlyRecord(result));
    return result.sound ? 0 : 1;
  },
};
