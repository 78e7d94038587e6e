import { readFileSync } from "node:fs";
import Papa from "papaparse";

/** A table of fixtures/published as rows by heading; `#` lines hold its source. */
export function published(name: string): readonly Readonly<Record<string, string>>[] {
  const text = readFileSync(new URL(`../../../fixtures/published/${name}`, import.meta.url), "utf8");
  return Papa.parse<Record<string, string>>(text, { header: true, comments: "#", skipEmptyLines: true }).data;
}

/** One column of such a table as numbers; NaN where the field is blank. */
export function column(rows: readonly Readonly<Record<string, string>>[], name: string): Float64Array {
  return Float64Array.from(rows, (row) => {
    const field = row[name];
    if (field === undefined) throw new Error(`no column ${name}`);
    return field === "" ? Number.NaN : Number(field);
  });
}
