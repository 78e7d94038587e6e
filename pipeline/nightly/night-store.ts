import { readFileSync } from "node:fs";
import type { Night } from "../night.js";
import { writeWhole } from "../store/write.js";

/** Bumped when a stored night's form changes, so that an old one is never misread. */
const FORM = 2;

const COLUMN = { f: Float64Array, i: Int32Array, b: Uint8Array } as const;

/** Columns as `{ "column": "f", "values": [...] }`; no number is lost, NaN is null. */
function encode(_key: string, value: unknown): unknown {
  for (const [kind, Type] of Object.entries(COLUMN)) {
    if (value instanceof Type)
      return {
        column: kind,
        values: Array.from(value as Iterable<number>, (x) => (Number.isFinite(x) ? x : null)),
      };
  }
  return typeof value === "number" && !Number.isFinite(value) ? { column: "nan" } : value;
}

function decode(_key: string, value: unknown): unknown {
  if (typeof value !== "object" || value === null || !("column" in value)) return value;
  const { column, values } = value as { column: string; values?: (number | null)[] };
  if (column === "nan") return Number.NaN;
  const Type = COLUMN[column as keyof typeof COLUMN];
  return Type.from((values ?? []).map((x) => x ?? Number.NaN));
}

export function storeNight(path: string, key: string, night: Night): void {
  writeWhole(path, `${JSON.stringify({ form: FORM, key, night }, encode)}\n`);
}

/** The stored night, or null if there is none with this key. */
export function recallNight(path: string, key: string): Night | null {
  let text: string;
  try {
    text = readFileSync(path, "utf8");
  } catch {
    return null;
  }
  try {
    const stored = JSON.parse(text, decode) as { form: number; key: string; night: Night };
    return stored.form === FORM && stored.key === key ? stored.night : null;
  } catch {
    // A file that another hand has changed is no result of ours: the night is reduced again.
    return null;
  }
}
