import { readFileSync } from "node:fs";

/** One NIST reference data set, as kept in fixtures/published/nist-strd. */
export interface ReferenceSet {
  /** Certified rows of the header by name; what the numbers are stands in the file. */
  readonly certified: ReadonlyMap<string, readonly number[]>;
  /** Data columns by name. */
  readonly data: ReadonlyMap<string, Float64Array>;
}

export function referenceSet(name: string): ReferenceSet {
  const path = new URL(`../../../fixtures/published/nist-strd/${name.toLowerCase()}.csv`, import.meta.url);
  const lines = readFileSync(path, "utf8").trimEnd().split("\n");
  const certified = new Map(
    lines
      .filter((line) => /^# [\w]+,/.test(line))
      .map((line) => {
        const [key, ...numbers] = line.slice(2).split(",");
        return [key!, numbers.map(Number)] as const;
      }),
  );
  const [header, ...rows] = lines.filter((line) => !line.startsWith("#")).map((line) => line.split(","));
  const data = new Map(
    header!.map((column, j) => [column, Float64Array.from(rows, (row) => Number(row[j]))]),
  );
  return { certified, data };
}

/** The certified parameters, in order: each row start 1, start 2, value, standard deviation (or the last two only). */
export function parameters(set: ReferenceSet): readonly (readonly number[])[] {
  return [...set.certified].filter(([key]) => /^[bB]\d$/.test(key)).map(([, numbers]) => numbers);
}
