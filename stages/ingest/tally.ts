import type { Note } from "./types.js";

/** Counts what is worth a note, with the line where it was seen first. */
export class Tally {
  readonly #seen = new Map<string, { line: number; count: number }>();

  add(text: string, line: number): void {
    const seen = this.#seen.get(text);
    if (seen === undefined) this.#seen.set(text, { line, count: 1 });
    else seen.count++;
  }

  notes(file: string): Note[] {
    return [...this.#seen].map(([text, { line, count }]) => ({ file, line, count, text }));
  }
}
