import { readFileSync } from "node:fs";
import {
  type Document,
  isAlias,
  isMap,
  isScalar,
  LineCounter,
  type Node,
  parseDocument,
  visit,
  type YAMLError,
} from "yaml";
import { InputError, type InputFault } from "../../stages/errors.js";
import { missingFile } from "./files.js";
import type { Located } from "./located.js";

export type KeyPath = readonly (string | number)[];

/** A configuration file read as YAML, which still knows where each key stands. */
export interface ConfigDocument {
  readonly file: Located;
  /** The plain value. */
  readonly content: Readonly<Record<string, unknown>>;
  /** Keys at the top, in order. */
  readonly keys: readonly string[];
  /** 1-based line of a key, or of the nearest key above it that is there; undefined at the top. */
  lineOf(path: KeyPath): number | undefined;
  /** The value as written, shortened; undefined if the key is missing, "" if nothing follows it. */
  written(path: KeyPath): string | undefined;
}

/**
 * Reads a YAML file of keys.
 * @throws InputError if it cannot be read, is not UTF-8, not YAML, empty, or no block of keys
 */
export function readDocument(file: Located): ConfigDocument {
  const source = readText(file);
  const lines = new LineCounter();
  const document = parseDocument(source, { lineCounter: lines, prettyErrors: false, logLevel: "error" });
  const problem = document.errors[0] ?? document.warnings[0];
  if (problem !== undefined) throw syntaxError(file, problem, source, lines);
  refuseUnknownAlias(file, document, source, lines);

  const { contents } = document;
  if (contents === null || (isScalar(contents) && contents.value === null)) {
    throw new InputError({
      file: file.shown,
      expected: "keys and values; the file is empty",
      wayOut: "see `rotonwell schema` for the keys of each kind of file",
    });
  }
  if (!isMap(contents)) {
    throw new InputError({
      file: file.shown,
      line: 1,
      value: short(source.trim()),
      expected: "keys and values, such as campaign: fjord-7",
      wayOut: "begin each line with a key and a colon; is this a configuration file?",
    });
  }
  const content = document.toJS() as Record<string, unknown>;
  return {
    file,
    content,
    keys: Object.keys(content),
    lineOf: (path) => lineOf(document, path, lines),
    written: (path) => written(document, path, source),
  };
}

function readText(file: Located): string {
  let bytes: Buffer;
  try {
    bytes = readFileSync(file.path);
  } catch (error) {
    throw missingFile(file, error, {});
  }
  try {
    return new TextDecoder("utf-8", { fatal: true }).decode(bytes);
  } catch {
    throw new InputError({
      file: file.shown,
      expected: "a text file in UTF-8",
      wayOut: "save it as UTF-8 in your editor, or write u for µ, +/- for ± and Ohm for Ω",
    });
  }
}

function lineOf(document: Document, path: KeyPath, lines: LineCounter): number | undefined {
  for (let length = path.length; length > 0; length--) {
    const offset = offsetOf(document, path.slice(0, length));
    if (offset !== undefined) return lines.linePos(offset).line;
  }
  return undefined;
}

/** Where the key (or the item of a list) begins. */
function offsetOf(document: Document, path: KeyPath): number | undefined {
  const parent = nodeAt(document, path.slice(0, -1));
  const last = path.at(-1);
  if (isMap(parent)) {
    const pair = parent.items.find(({ key }) => isScalar(key) && String(key.value) === String(last));
    return isScalar(pair?.key) ? pair.key.range?.[0] : undefined;
  }
  return nodeAt(document, path)?.range?.[0];
}

function nodeAt(document: Document, path: KeyPath): Node | undefined {
  let node = document.contents as Node | null | undefined;
  for (const key of path) {
    if (isAlias(node)) node = node.resolve(document);
    node =
      node !== null && node !== undefined && "get" in node
        ? (node.get(key, true) as Node | undefined)
        : undefined;
  }
  return node ?? undefined;
}

function written(document: Document, path: KeyPath, source: string): string | undefined {
  const node = nodeAt(document, path);
  if (node === undefined) return undefined;
  if (isScalar(node)) {
    if (node.value === null) return "";
    return short(typeof node.value === "string" ? node.value : (node.source ?? String(node.value)));
  }
  const [from, to] = node.range ?? [0, 0];
  return short(source.slice(from, to));
}

function short(value: string): string {
  const oneLine = value.replace(/\s+/g, " ").trim();
  return oneLine.length <= 60 ? oneLine : `${oneLine.slice(0, 59)}…`;
}

/** `runs: *.yaml` reads as a reference to an anchor that nobody set. */
function refuseUnknownAlias(file: Located, document: Document, source: string, lines: LineCounter): void {
  visit(document, {
    Alias: (_, alias) => {
      if (alias.resolve(document) !== undefined) return;
      const [from, to] = alias.range ?? [0, 0];
      const value = source.slice(from, to);
      throw new InputError({
        file: file.shown,
        line: lines.linePos(from).line,
        value,
        expected: "text; an asterisk at the beginning means a reference in YAML",
        wayOut: `put it in quotes: "${value}"`,
      });
    },
  });
}

/** What the commonest slips of YAML mean, in words of the bench. */
function syntaxError(file: Located, problem: YAMLError, source: string, lines: LineCounter): InputError {
  const offset = problem.pos[0];
  const fault = (what: Omit<InputFault, "file" | "line">): InputError =>
    new InputError({ file: file.shown, line: lines.linePos(offset).line, ...what });
  switch (problem.code) {
    case "TAB_AS_INDENT":
      return fault({ expected: "spaces before a key, not tabs", wayOut: "replace each tab by two spaces" });
    case "DUPLICATE_KEY": {
      const key = /^[^:\s]+/.exec(source.slice(offset))?.[0] ?? "key";
      return fault({ expected: `the key ${key} once`, wayOut: `keep one of the two lines with ${key}:` });
    }
    case "MULTIPLE_DOCS":
      return fault({ expected: "one document", wayOut: "put each configuration into a file of its own" });
    case "BLOCK_AS_IMPLICIT_KEY":
      return fault({
        expected: "one colon and space in a line",
        wayOut: "put a value that holds a colon in quotes",
      });
    case "BAD_SCALAR_START":
      return fault({
        expected: "a value that does not begin with @, ` or %",
        wayOut: "put the value in quotes",
      });
    default: {
      const bracket = /end with a ([\]}])/.exec(problem.message)?.[1];
      if (bracket !== undefined) {
        return fault({
          expected: `a closing ${bracket}`,
          wayOut: `close the bracket opened above; what follows a # is a comment unless it is in quotes`,
        });
      }
      const what = problem.message.replace(/\s+at line .*$/s, "").trim();
      return fault({
        expected: `YAML: ${what.charAt(0).toLowerCase()}${what.slice(1)}`,
        wayOut: "look at indentation, quotes and brackets on this line and the one above",
      });
    }
  }
}
