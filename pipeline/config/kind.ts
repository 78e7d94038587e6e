/** Kinds of configuration file, each known by its first key: `campaign: fjord-7`. */
export const KINDS = ["campaign", "cell", "sample", "thermometer", "run", "scenario"] as const;
export type Kind = (typeof KINDS)[number];

/** A campaign also has a key `cell` and a cell a key `thermometer`: the whole is recognised before its parts. */
const WHOLE_BEFORE_PARTS: readonly Kind[] = ["campaign", "scenario", "run", "sample", "cell", "thermometer"];

/** The kind of file that has these keys at its top, or null. */
export function kindOfKeys(keys: readonly string[]): Kind | null {
  return WHOLE_BEFORE_PARTS.find((kind) => keys.includes(kind)) ?? null;
}
