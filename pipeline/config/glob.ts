import { existsSync, readdirSync, statSync } from "node:fs";
import { isAbsolute, join, parse } from "node:path";
import type { Located } from "./located.js";

/** Whether a path is a pattern: * and ? within a name, ** for any depth of folders. */
export function isPattern(written: string): boolean {
  return /[*?]/.test(written);
}

export interface Matches {
  /** Files in the order of their paths by code unit: the same on every system and in every locale. */
  readonly files: readonly Located[];
  /** The deepest folder that the pattern reached, and the part of it that nothing there matched. */
  readonly stoppedAt: Located;
  readonly unmatched: string;
}

/**
 * Files that match a pattern.
 * @param folder where relative patterns begin
 */
export function glob(pattern: string, folder: Located): Matches {
  const root = isAbsolute(pattern) ? parse(pattern).root : undefined;
  const start = root === undefined ? folder : { path: root, shown: root };
  const parts = (root === undefined ? pattern : pattern.slice(root.length))
    .split("/")
    .filter((part) => part !== "");
  let reached: readonly Located[] = [start];
  let stoppedAt = start;
  let unmatched = "";
  for (const [i, part] of parts.entries()) {
    const last = i === parts.length - 1;
    const next = reached.flatMap((place) => matchPart(part, place, last));
    if (next.length === 0) {
      stoppedAt = reached[0]!;
      unmatched = part;
      return { files: [], stoppedAt, unmatched };
    }
    reached = next;
  }
  const unique = new Map(reached.map((file) => [file.path, file]));
  const files = [...unique.values()].sort((a, b) => (a.path < b.path ? -1 : 1));
  return { files, stoppedAt, unmatched };
}

function matchPart(part: string, place: Located, last: boolean): Located[] {
  if (part === "**") {
    const folders = foldersBelow(place);
    return last ? folders.flatMap((folder) => entries(folder).filter(isFile)) : folders;
  }
  if (!isPattern(part)) {
    const next = below(place, part);
    return existsSync(next.path) && (last ? isFile(next) : isFolder(next)) ? [next] : [];
  }
  const expression = namePattern(part);
  return entries(place).filter((entry) => {
    const name = parse(entry.path).base;
    const hidden = name.startsWith(".") && !part.startsWith(".");
    return !hidden && expression.test(name) && (last ? isFile(entry) : isFolder(entry));
  });
}

function namePattern(part: string): RegExp {
  const source = part
    .replace(/[.+^${}()|[\]\\]/g, "\\$&")
    .replace(/\*+/g, ".*")
    .replace(/\?/g, ".");
  return new RegExp(`^${source}$`, "su");
}

function below(place: Located, name: string): Located {
  return { path: join(place.path, name), shown: join(place.shown, name) };
}

function entries(place: Located): Located[] {
  try {
    return readdirSync(place.path)
      .sort()
      .map((name) => below(place, name));
  } catch {
    // A folder one may not list holds nothing for us; a pattern that matches nothing at all is an error later.
    return [];
  }
}

/** The folder itself and all below it, links to folders left out lest they lead in circles. */
function foldersBelow(place: Located): Located[] {
  const inner = readdirSync(place.path, { withFileTypes: true })
    .filter((entry) => entry.isDirectory() && !entry.name.startsWith("."))
    .map((entry) => entry.name)
    .sort();
  return [place, ...inner.flatMap((name) => foldersBelow(below(place, name)))];
}

function isFile(place: Located): boolean {
  return statSync(place.path, { throwIfNoEntry: false })?.isFile() ?? false;
}

function isFolder(place: Located): boolean {
  return statSync(place.path, { throwIfNoEntry: false })?.isDirectory() ?? false;
}
