import { readFileSync } from "node:fs";

/** The program's version, from the package that holds it. */
export function programVersion(): string {
  const manifest = new URL("../../package.json", import.meta.url);
  return (JSON.parse(readFileSync(manifest, "utf8")) as { version: string }).version;
}
