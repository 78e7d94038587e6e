import type { z } from "zod";
import { InputError } from "../../stages/errors.js";
import { type ConfigDocument, type KeyPath, readDocument } from "./document.js";
import { faultAt, refusal } from "./faults.js";
import { requireFile } from "./files.js";
import { FILE_OF, type Kind } from "./kind.js";
import { likelyKind } from "./likely-kind.js";
import { type Located, locatedFrom, type Mention } from "./located.js";
import { type SchemaOf, schemaOf } from "./schemas.js";

/** A configuration file that holds, with the means to speak of its places. */
export interface ReadConfig<K extends Kind> {
  readonly config: z.output<SchemaOf<K>>;
  /** The file that a key names. @throws InputError if it is not there */
  fileAt(path: KeyPath): Located;
  /** Where a key stands, for messages on what it names. */
  mention(path: KeyPath): Mention;
  /** A fault at a key, found by looking at more than this file. */
  fault(path: KeyPath, expected: string, wayOut: string): InputError;
}

/** @throws InputError naming file, line, key, value, what was expected and a way out */
export function readConfig<K extends Kind>(file: Located, kind: K): ReadConfig<K> {
  const document = readDocument(file);
  const result = schemaOf(kind).safeParse(document.content);
  if (!result.success) {
    // Only now, since the kinds are told apart by their JSON Schemas, which take longer than a sound file.
    requireKind(document, kind);
    throw refusal(document, kind, result.error.issues);
  }
  return {
    config: result.data as z.output<SchemaOf<K>>,
    fileAt: (path) => {
      const written = valueAt(document.content, path) as string;
      const namedBy = mentionOf(document, path);
      return { ...requireFile(locatedFrom(file, written), namedBy), namedBy };
    },
    mention: (path) => mentionOf(document, path),
    fault: (path, expected, wayOut) => new InputError(faultAt(document, path, { expected, wayOut })),
  };
}

function valueAt(content: unknown, path: KeyPath): unknown {
  return path.reduce<unknown>((value, key) => (value as Record<string | number, unknown>)[key], content);
}

function mentionOf(document: ConfigDocument, path: KeyPath): Mention {
  const { expected: _, wayOut: __, ...mention } = faultAt(document, path, { expected: "", wayOut: "" });
  return mention;
}

/** A cell given for a campaign is said to be one, rather than found to lack every key. */
function requireKind(document: ConfigDocument, wanted: Kind): void {
  const kind = likelyKind(document.keys);
  if (kind === wanted || kind === null) return;
  const { file } = document;
  const expected = `${FILE_OF[wanted]}, with a key ${wanted}`;
  if (file.namedBy !== undefined) {
    // The slip is in the file that names this one.
    throw new InputError({
      ...file.namedBy,
      expected,
      wayOut: `${file.shown} is ${FILE_OF[kind]}; name another`,
    });
  }
  throw new InputError(
    faultAt(document, document.keys.includes(kind) ? [kind] : [], {
      expected,
      wayOut: `this is ${FILE_OF[kind]}; give the one that has ${wanted}: in it`,
    }),
  );
}
