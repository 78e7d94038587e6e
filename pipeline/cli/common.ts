import type { Argv } from "yargs";

/** Options that every command takes. */
export interface CommonOptions {
  readonly json: boolean;
  readonly quiet: boolean;
}

/** 0 done; 1 done, but a quality gate failed. Everything else is thrown. */
export type ExitCode = 0 | 1;

export interface Command {
  /** As yargs wants it: name and positionals. */
  readonly usage: string;
  readonly summary: string;
  options(yargs: Argv): Argv;
  run(options: CommonOptions & Readonly<Record<string, unknown>>): Promise<ExitCode>;
}
