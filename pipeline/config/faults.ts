import type { z } from "zod";
import { InputError, type InputFault } from "../../stages/errors.js";
import type { ConfigDocument, KeyPath } from "./document.js";
import type { Kind } from "./kind.js";
import { nearest } from "./nearest.js";
import { alternativeWith, homesOf, inWords, schemaAt } from "./schema-place.js";
import { type JsonSchema, jsonSchema } from "./schemas.js";

/** `exclude[0].from` */
export function dotted(path: KeyPath): string {
  return path.reduce<string>(
    (text, key) => (typeof key === "number" ? `${text}[${key}]` : text === "" ? key : `${text}.${key}`),
    "",
  );
}

interface Found {
  readonly fault: InputFault;
  /** A key that this fault makes look missing. */
  readonly meant?: string;
  readonly path: string;
}

/** The first fault of a file in full, and where the others are. */
export function refusal(
  document: ConfigDocument,
  kind: Kind,
  issues: readonly z.core.$ZodIssue[],
): InputError {
  const schema = jsonSchema(kind);
  const found = issues.flatMap((issue) =>
    issue.code === "unrecognized_keys"
      ? issue.keys.map((key) => unknownKey(document, schema, pathOf(issue), key))
      : [otherFault(document, schema, issue)],
  );
  // A misspelt key is both unknown and missing: only the misspelling is worth a message.
  const meant = new Set(found.map((one) => one.meant));
  const [first, ...others] = found
    .filter(({ fault, path }) => !(fault.value === undefined && meant.has(path)))
    .sort((a, b) => (a.fault.line ?? 0) - (b.fault.line ?? 0));
  const { fault } = first!;
  if (others.length === 0) return new InputError(fault);
  const places = [...new Set(others.map(({ path }) => path))]
    .filter((path) => path !== first!.path)
    .join(", ");
  if (places === "") return new InputError(fault);
  return new InputError({ ...fault, wayOut: `${fault.wayOut}. Then see to ${places}` });
}

function pathOf(issue: z.core.$ZodIssue): KeyPath {
  return issue.path.map((key) => (typeof key === "number" ? key : String(key)));
}

/** A fault at a key, with what was written there. */
export function faultAt(
  document: ConfigDocument,
  path: KeyPath,
  what: { readonly expected: string; readonly wayOut: string },
): InputFault {
  const line = document.lineOf(path);
  const value = path.length === 0 ? undefined : document.written(path);
  return {
    file: document.file.shown,
    ...(line === undefined ? {} : { line }),
    ...(path.length === 0 ? {} : { key: dotted(path) }),
    ...(value === undefined ? {} : { value }),
    ...what,
  };
}

function unknownKey(document: ConfigDocument, schema: JsonSchema, path: KeyPath, key: string): Found {
  const known = Object.keys(schemaAt(schema, path, document.content)?.properties ?? {});
  const near = nearest(key, known);
  const here = dotted(path);
  const homes = near === undefined ? homesOf(schema, key).filter((home) => home !== "" && home !== here) : [];
  const kindOfKey = near === undefined ? alternativeWith(schemaAt(schema, path, undefined), key) : undefined;
  const full = [...path, key];
  const wayOut =
    near !== undefined
      ? `did you mean ${near}?`
      : kindOfKey !== undefined
        ? `${key} goes with ${kindOfKey}`
        : homes.length > 0
          ? `${key} belongs under ${homes.slice(0, 2).join(" or ")}`
          : "remove it, or put # before it to keep it as a comment";
  return {
    path: dotted(full),
    ...(near === undefined ? {} : { meant: dotted([...path, near]) }),
    fault: faultAt(document, full, { expected: `one of the keys ${known.join(", ")}`, wayOut }),
  };
}

function otherFault(document: ConfigDocument, schema: JsonSchema, issue: z.core.$ZodIssue): Found {
  const path = pathOf(issue);
  if (issue.code === "custom" && issue.params !== undefined) {
    const { expected, wayOut } = issue.params as { expected: string; wayOut: string };
    return { path: dotted(path), fault: faultAt(document, path, { expected, wayOut }) };
  }
  const place =
    issue.code === "invalid_union" && "options" in issue
      ? { enum: issue.options as readonly unknown[] }
      : (schemaAt(schema, path, document.content) ?? {});
  return {
    path: dotted(path),
    fault: faultAt(document, path, {
      expected: inWords(place),
      wayOut: wayOutOf(place, path, document.written(path)),
    }),
  };
}

/** A correct example, nearest to what was written. */
function wayOutOf(place: JsonSchema, path: KeyPath, written: string | undefined): string {
  const key = path.findLast((part) => typeof part === "string") ?? "";
  const words = place.enum?.map(String);
  const near = words === undefined || written === undefined ? undefined : nearest(written, words);
  if (near !== undefined) return `did you mean ${near}?`;
  const example = place.examples?.[0] ?? words?.[0] ?? place.const ?? blockExample(place) ?? place.default;
  if (example === undefined) {
    return place.properties === undefined
      ? "see `rotonwell schema` for what belongs here"
      : `write the keys below ${key}:, each on a line of its own and indented`;
  }
  return `write ${key}: ${typeof example === "string" ? example : JSON.stringify(example)}`;
}

/** `{ method: auto }`: a block with its first key. */
function blockExample(place: JsonSchema): string | undefined {
  for (const [key, child] of Object.entries(place.properties ?? {})) {
    const value = child.default ?? child.examples?.[0] ?? child.enum?.[0];
    if (key !== "version" && typeof value === "string") return `{ ${key}: ${value} }`;
  }
  return undefined;
}
