#!/usr/bin/env node
import { readFileSync } from "node:fs";
import yargs from "yargs";
import { hideBin } from "yargs/helpers";
import { checkCommand } from "./check.js";
import type { Command, CommonOptions } from "./common.js";
import { nightlyCommand } from "./nightly.js";
import { publishCommand } from "./publish.js";
import { reduceCommand } from "./reduce.js";
import { schemaCommand } from "./schema.js";
import { separateCommand } from "./separate.js";
import { simulateCommand } from "./simulate.js";

// In the order in which a user meets them. The files are light: each loads its own work only when it runs.
const COMMANDS: readonly Command[] = [
  checkCommand,
  reduceCommand,
  nightlyCommand,
  separateCommand,
  publishCommand,
  simulateCommand,
  schemaCommand,
];

const USAGE_ERROR = 2;
const DEFECT = 3;
const BUSY = 75;

class UsageError extends Error {}

function version(): string {
  const manifest = readFileSync(new URL("../../../package.json", import.meta.url), "utf8");
  return (JSON.parse(manifest) as { version: string }).version;
}

async function main(): Promise<number> {
  let code = 0;
  let parser = yargs(hideBin(process.argv))
    .scriptName("rotonwell")
    .usage("$0 <command>\n\nHeat pulses near absolute zero: raw logs to Cv(T), sound speed and roton gap.")
    .version(version())
    // One language, whatever the machine's: output does not depend on the locale.
    .locale("en")
    .option("json", {
      type: "boolean",
      default: false,
      describe: "result as JSON on stdout; words for people on stderr",
    })
    .option("quiet", { type: "boolean", default: false, describe: "no words for people" })
    .strict()
    .demandCommand(1, "Name a command.")
    .wrap(100)
    .exitProcess(false)
    .fail((message, error) => {
      throw error ?? new UsageError(message);
    });
  for (const command of COMMANDS) {
    parser = parser.command(
      command.usage,
      command.summary,
      (builder) => command.options(builder),
      async (options) => {
        code = await command.run(options as unknown as CommonOptions & Record<string, unknown>);
      },
    );
  }
  await parser.parseAsync();
  return code;
}

/** A reader that has seen enough (`| head`) is no defect. */
process.stdout.on("error", (error: NodeJS.ErrnoException) => {
  if (error.code === "EPIPE") process.exit(0);
  throw error;
});

try {
  process.exitCode = await main();
} catch (error) {
  process.exitCode = report(error);
}

function report(error: unknown): number {
  const name = error instanceof Error ? error.name : "";
  const message = error instanceof Error ? error.message : String(error);
  if (error instanceof UsageError) {
    process.stderr.write(
      `rotonwell: ${message}\n  Way out: rotonwell --help lists commands; rotonwell <command> --help its options\n`,
    );
    return USAGE_ERROR;
  }
  if (name === "InputError") {
    process.stderr.write(`${message}\n`);
    return USAGE_ERROR;
  }
  if (name === "Busy") {
    process.stderr.write(`${message}\n`);
    return BUSY;
  }
  const stack = error instanceof Error ? error.stack : message;
  process.stderr.write(
    `rotonwell ${version()} met a defect of its own; your files are as they were.\n${stack}\n`,
  );
  return DEFECT;
}
