import { readdirSync, statSync } from "node:fs";
import { basename, dirname } from "node:path";
import { InputError } from "../../stages/errors.js";
import type { Located, Mention } from "./located.js";
import { nearestFew } from "./nearest.js";

/** @throws InputError if there is no such file, naming what the folder holds instead */
export function requireFile(file: Located, mention: Mention): Located {
  try {
    if (statSync(file.path).isFile()) return file;
  } catch (error) {
    throw missingFile(file, error, mention);
  }
  throw new InputError({
    ...mention,
    expected: "a file",
    wayOut: `${file.shown} is no file; name one that is in it`,
  });
}

/** The report on a file that could not be read. */
export function missingFile(file: Located, error: unknown, mention: Mention): InputError {
  const where = mention.file === undefined ? { value: file.shown } : mention;
  const code = (error as NodeJS.ErrnoException).code;
  if (code === "EACCES" || code === "EPERM") {
    return new InputError({
      ...where,
      expected: "a file that may be read",
      wayOut: "check the permissions of the file",
    });
  }
  if (code === "EISDIR") {
    return new InputError({ ...where, expected: "a file; this is a folder", wayOut: "name a file in it" });
  }
  return new InputError({ ...where, expected: "a file that exists", wayOut: whatIsThere(file) });
}

/** "../nights holds night-1.csv and night-2.csv": the nearest names in the folder, or the folder that is missing. */
function whatIsThere(file: Located): string {
  const folder = { path: dirname(file.path), shown: dirname(file.shown) };
  const names = listFolder(folder.path);
  if (names === undefined)
    return `there is no folder ${folder.shown}; paths are relative to the file that names them`;
  if (names.length === 0) return `the folder ${folder.shown} is empty`;
  return `the folder ${folder.shown} holds ${fewNames(basename(file.path), names)}`;
}

/** The three names nearest to one, and how many more there are. */
export function fewNames(name: string, names: readonly string[]): string {
  const near = nearestFew(name, names, 3);
  const more = names.length - near.length;
  return more === 0 ? near.join(", ") : `${near.join(", ")} and ${more} more`;
}

/** Names in a folder by code unit, hidden ones left out; undefined if it cannot be listed. */
export function listFolder(path: string): string[] | undefined {
  try {
    return readdirSync(path)
      .filter((name) => !name.startsWith("."))
      .sort();
  } catch {
    return undefined;
  }
}
