import type { Kind } from "./kind.js";
import { inWords } from "./schema-place.js";
import { type JsonSchema, jsonSchema } from "./schemas.js";

interface Row {
  readonly key: string;
  readonly value: string;
  readonly fallback: string;
  readonly meaning: string;
  /** Words that choose the alternative this key belongs to, such as "kind: events"; "" for all. */
  readonly only: string;
}

/** Where a block of keys was first explained, by its keys and defaults: a second `{ column, unit }` needs no rows. */
type Explained = Map<string, string>;

/** Every key of a kind of file as a Markdown table: key, value, default, meaning. */
export function keyTable(kind: Kind): string {
  const rows = rowsOf(jsonSchema(kind), "", "", new Map());
  const lines = rows.map(({ key, value, fallback, meaning, only }) =>
    line([`\`${key}\``, value, fallback, only === "" ? meaning : `${meaning} (${only})`]),
  );
  return [line(["key", "value", "default", "meaning"]), "|---|---|---|---|", ...lines, ""].join("\n");
}

function line(cells: readonly string[]): string {
  return `| ${cells.map((cell) => cell.replace(/\|/g, "\\|")).join(" | ")} |`;
}

function rowsOf(schema: JsonSchema, place: string, only: string, explained: Explained): Row[] {
  return Object.entries(schema.properties ?? {}).flatMap(([name, child]) => {
    const key = place === "" ? name : `${place}.${name}`;
    const before = firstPlace(child, key, explained);
    const own: Row = {
      key,
      value: before === undefined ? valueCell(child) : (exampleOf(child) ?? `as \`${before}\``),
      fallback: (schema.required ?? []).includes(name) ? "required" : defaultCell(child),
      meaning: child.description ?? "",
      only,
    };
    return before === undefined ? [own, ...innerRows(child, key, explained)] : [own];
  });
}

/** The place where a block like this one was explained; records this one if it is the first. */
function firstPlace(schema: JsonSchema, key: string, explained: Explained): string | undefined {
  if (schema.properties === undefined) return undefined;
  const sign = JSON.stringify(
    Object.entries(schema.properties).map(([name, child]) => [name, child.default]),
  );
  const before = explained.get(sign);
  if (before === undefined) explained.set(sign, key);
  return before;
}

function innerRows(child: JsonSchema, key: string, explained: Explained): Row[] {
  if (child.items?.properties !== undefined) return rowsOf(child.items, `${key}[]`, "", explained);
  if (child.oneOf === undefined) return rowsOf(child, key, "", explained);
  const rows = child.oneOf.flatMap((option) => rowsOf(option, key, telling(option), explained));
  return sharedOnce(rows, child.oneOf.length);
}

/** Keys that every alternative has, with one meaning, are listed once and for all. */
function sharedOnce(rows: readonly Row[], alternatives: number): Row[] {
  const same = (a: Row, b: Row): boolean => a.key === b.key && a.meaning === b.meaning;
  return rows.flatMap((row, i) => {
    if (rows.filter((other) => same(row, other)).length < alternatives) return [row];
    return rows.findIndex((other) => same(row, other)) === i ? [{ ...row, only: "" }] : [];
  });
}

function telling(option: JsonSchema): string {
  const fixed = Object.entries(option.properties ?? {}).find(([, { const: word }]) => word !== undefined);
  return fixed === undefined ? "" : `${fixed[0]}: ${String(fixed[1].const)}`;
}

function valueCell(schema: JsonSchema): string {
  if (schema.properties !== undefined || schema.oneOf !== undefined) return "";
  if (schema.enum !== undefined && schema.enum.length <= 8) {
    return schema.enum.map((word) => `\`${String(word)}\``).join(" ");
  }
  return exampleOf(schema) ?? inWords(schema);
}

function exampleOf(schema: JsonSchema): string | undefined {
  const example = schema.examples?.at(-1);
  if (example === undefined) return undefined;
  return `\`${typeof example === "string" ? example : JSON.stringify(example)}\``;
}

function defaultCell(schema: JsonSchema): string {
  if (schema.default === undefined || schema.properties !== undefined) return "";
  if (typeof schema.default === "string") return `\`${schema.default}\``;
  return `\`${JSON.stringify(schema.default).replace(/"/g, "").replace(/,/g, ", ")}\``;
}
