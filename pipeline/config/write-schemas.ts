import { mkdirSync, writeFileSync } from "node:fs";
import { join } from "node:path";
import { KINDS } from "./kind.js";
import { jsonSchema } from "./schemas.js";

// Run by the build, `node dist/pipeline/config/write-schemas.js DIR`: one <kind>.schema.json a kind, for editors.
const folder = process.argv[2];
if (folder === undefined) {
  process.stderr.write("write-schemas: name the folder to write to\n");
  process.exit(2);
}
mkdirSync(folder, { recursive: true });
for (const kind of KINDS) {
  writeFileSync(join(folder, `${kind}.schema.json`), `${JSON.stringify(jsonSchema(kind), null, 2)}\n`);
}
