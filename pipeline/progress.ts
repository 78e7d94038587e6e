/** Where a command tells people what happens. Under --json everything for people goes to stderr. */
export interface Teller {
  /** A line of the result. */
  say(line: string): void;
  /** A line of progress; silent under --quiet. */
  step(line: string): void;
  /** Machine-readable result, printed only under --json. */
  json(value: unknown): void;
}

export interface TellerOptions {
  readonly json: boolean;
  readonly quiet: boolean;
}

export function consoleTeller({ json, quiet }: TellerOptions): Teller {
  const people = json ? process.stderr : process.stdout;
  return {
    say: (line) => {
      if (!quiet) people.write(`${line}\n`);
    },
    step: (line) => {
      if (!quiet) process.stderr.write(`${line}\n`);
    },
    json: (value) => {
      if (json) process.stdout.write(`${JSON.stringify(value, null, 2)}\n`);
    },
  };
}

/** For notebooks and tests: nothing is printed. */
export const silentTeller: Teller = { say: () => {}, step: () => {}, json: () => {} };
