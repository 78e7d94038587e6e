import { mkdirSync } from "node:fs";
import { dirname } from "node:path";
import writeFileAtomic from "write-file-atomic";
import { InputError } from "../../stages/errors.js";

const REASONS: Readonly<Record<string, string>> = {
  EACCES: "a folder this account may write to",
  EPERM: "a folder this account may write to",
  EROFS: "a folder on a disk that can be written",
  ENOSPC: "free space on the disk",
  EDQUOT: "free space within the quota",
  ENOTDIR: "a folder, where a file stands in the way",
  EEXIST: "a folder, where a file stands in the way",
  EISDIR: "a file, where a folder stands in the way",
};

/** The whole file appears or nothing: written to a temporary name beside it, flushed, renamed. Folders are made. */
export function writeWhole(path: string, content: string | Uint8Array): void {
  try {
    mkdirSync(dirname(path), { recursive: true });
    writeFileAtomic.sync(path, typeof content === "string" ? content : Buffer.from(content));
  } catch (error) {
    const code = (error as NodeJS.ErrnoException).code ?? "";
    throw new InputError({
      file: path,
      expected: REASONS[code] ?? `a file that can be written (${code})`,
      wayOut: "choose another folder with output: in the campaign file, or mend this one",
    });
  }
}
