import { InputError } from "../../stages/errors.js";
import { KINDS } from "../config/kind.js";
import type { Command } from "./common.js";

export const schemaCommand: Command = {
  usage: "schema [kind]",
  summary: "JSON Schema of a configuration file, for editors",
  options: (yargs) =>
    yargs.positional("kind", { type: "string", describe: `one of ${KINDS.join(", ")}; all if left out` }),
  async run(options) {
    const { jsonSchema } = await import("../config/schemas.js");
    const wanted = options["kind"] as string | undefined;
    const kind = KINDS.find((known) => known === wanted);
    if (wanted !== undefined && kind === undefined) {
      throw new InputError({
        key: "kind",
        value: wanted,
        expected: `one of ${KINDS.join(", ")}`,
        wayOut: "rotonwell schema campaign",
      });
    }
    const schema =
      kind === undefined
        ? Object.fromEntries(KINDS.map((each) => [each, jsonSchema(each)]))
        : jsonSchema(kind);
    // The schema is itself the result, with or without --json.
    process.stdout.write(`${JSON.stringify(schema, null, 2)}\n`);
    return 0;
  },
};
