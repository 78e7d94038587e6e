import type { KeyPath } from "./document.js";
import type { JsonSchema } from "./schemas.js";

/**
 * The schema of the value at a path, where alternatives are told apart by the words written (`kind: events`).
 * @param content the file's content, which chooses among alternatives
 */
export function schemaAt(schema: JsonSchema, path: KeyPath, content: unknown): JsonSchema | undefined {
  let node: JsonSchema | undefined = chosen(schema, content);
  let value: unknown = content;
  for (const key of path) {
    node = typeof key === "number" ? (node?.prefixItems?.[key] ?? node?.items) : node?.properties?.[key];
    if (node === undefined) return undefined;
    value =
      typeof value === "object" && value !== null
        ? (value as Record<string | number, unknown>)[key]
        : undefined;
    node = chosen(node, value);
  }
  return node;
}

/** Among alternatives, the one whose fixed words the value has, or whose type it is. */
function chosen(schema: JsonSchema, value: unknown): JsonSchema {
  const fits = (option: JsonSchema): boolean =>
    Object.entries(option.properties ?? {}).some(
      ([key, { const: word }]) =>
        word !== undefined && (value as Record<string, unknown> | undefined)?.[key] === word,
    );
  return schema.oneOf?.find(fits) ?? schema;
}

/** The words of the alternative that has a key: "kind: events". */
export function alternativeWith(schema: JsonSchema | undefined, key: string): string | undefined {
  const option = schema?.oneOf?.find(({ properties }) => properties !== undefined && key in properties);
  return option === undefined ? undefined : fixedWord(option);
}

/** Dotted paths of every place where a key of this name belongs, such as "reduction.pulses". */
export function homesOf(schema: JsonSchema, key: string, place = ""): string[] {
  const here = schema.properties !== undefined && key in schema.properties ? [place] : [];
  const inner = Object.entries(schema.properties ?? {}).flatMap(([name, child]) =>
    homesOf(child, key, place === "" ? name : `${place}.${name}`),
  );
  const options = (schema.oneOf ?? []).flatMap((option) => homesOf(option, key, place));
  return [...new Set([...here, ...inner, ...options])];
}

/** "auto, drift, two-body or relaxation"; "a list of at least 1 whole number": a schema in words. */
export function inWords(schema: JsonSchema): string {
  const alternatives = schema.anyOf ?? schema.oneOf;
  if (alternatives !== undefined) {
    const words = alternatives.map((option) =>
      option.properties === undefined ? inWords(option) : fixedWord(option),
    );
    return joinOr([...new Set(words)]);
  }
  if (schema.const !== undefined) return String(schema.const);
  if (schema.enum !== undefined) return joinOr(schema.enum.map(String));
  switch (Array.isArray(schema.type) ? schema.type[0] : schema.type) {
    case "string":
      return "text";
    case "boolean":
      return "true or false";
    case "integer":
      return `a whole number${bounds(schema)}`;
    case "number":
      return `a number${bounds(schema)}`;
    case "array":
      return listInWords(schema);
    default:
      return `a block with the keys ${Object.keys(schema.properties ?? {}).join(", ")}`;
  }
}

function fixedWord(option: JsonSchema): string {
  const [key, { const: word }] = Object.entries(option.properties!).find(
    ([, child]) => child.const !== undefined,
  )!;
  return `${key}: ${String(word)}`;
}

function listInWords(schema: JsonSchema): string {
  if (schema.prefixItems !== undefined) return `a list of ${schema.prefixItems.length}`;
  const least = schema.minItems ?? 0;
  const number = least > 0 ? ` of at least ${least}` : "";
  const { items } = schema;
  if (items?.enum !== undefined) return `a list${number} of ${joinOr(items.enum.map(String))}`;
  if (items?.properties !== undefined)
    return `a list${number}, each with ${Object.keys(items.properties).join(", ")}`;
  return `a list${number === "" ? " of" : `${number},`} ${items === undefined ? "values" : `each ${inWords(items)}`}`.replace(
    " of each",
    ", each",
  );
}

function bounds({ minimum, maximum }: JsonSchema): string {
  if (minimum !== undefined && maximum !== undefined) return ` from ${minimum} to ${maximum}`;
  if (minimum !== undefined) return ` of at least ${minimum}`;
  return maximum === undefined ? "" : ` of at most ${maximum}`;
}

function joinOr(words: readonly string[]): string {
  if (words.length <= 1) return words.join("");
  return `${words.slice(0, -1).join(", ")} or ${words.at(-1)!}`;
}
