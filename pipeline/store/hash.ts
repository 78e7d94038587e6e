import { createHash } from "node:crypto";
import { createReadStream } from "node:fs";

/** @returns SHA-256 of the file's bytes, hexadecimal; the file is read in pieces. */
export async function fileDigest(path: string): Promise<string> {
  const hash = createHash("sha256");
  for await (const piece of createReadStream(path, { highWaterMark: 1 << 20 })) hash.update(piece as Buffer);
  return hash.digest("hex");
}

/** @returns SHA-256 of the value's JSON, keys as they stand. */
export function valueDigest(value: unknown): string {
  return createHash("sha256").update(JSON.stringify(value)).digest("hex");
}
