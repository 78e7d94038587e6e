import type { Kind } from "./kind.js";
import { jsonSchema } from "./schemas.js";

/** A campaign also has a key `cell` and a cell a key `thermometer`: between equals, the whole goes before its parts. */
const WHOLE_BEFORE_PARTS: readonly Kind[] = ["campaign", "scenario", "run", "sample", "cell", "thermometer"];

/**
 * The kind of file that knows most of these keys, its own name counting twice; null if none knows any.
 * Counting, not the name alone, tells a campaign whose first key is misspelt from the cell and sample it names.
 */
export function likelyKind(keys: readonly string[]): Kind | null {
  let best: Kind | null = null;
  let most = 0;
  for (const kind of WHOLE_BEFORE_PARTS) {
    const known = jsonSchema(kind).properties ?? {};
    const count =
      keys.filter((key) => key !== "version" && key in known).length + (keys.includes(kind) ? 1 : 0);
    if (count > most) {
      best = kind;
      most = count;
    }
  }
  return best;
}
