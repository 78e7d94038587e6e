import { dirname, isAbsolute, join, resolve } from "node:path";
import type { InputFault } from "../../stages/errors.js";

/** A file: where it is, and what to call it in messages. */
export interface Located {
  /** Absolute. */
  readonly path: string;
  /** As the user would type it from where the program was started. */
  readonly shown: string;
  /** The key of another file that names it, if one does. */
  readonly namedBy?: Mention;
}

/** Where something was written in a configuration. */
export type Mention = Pick<InputFault, "file" | "line" | "key" | "value">;

/** A path as given on the command line. */
export function located(path: string): Located {
  return { path: resolve(path), shown: path };
}

/** A path as written in a file: relative to that file. */
export function locatedFrom(file: Located, written: string): Located {
  if (isAbsolute(written)) return { path: resolve(written), shown: written };
  return { path: resolve(dirname(file.path), written), shown: join(dirname(file.shown), written) };
}
