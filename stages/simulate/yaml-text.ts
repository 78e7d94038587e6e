const PLAIN = /^[\p{L}\p{N}][\p{L}\p{N} ._+%/()±-]*$/u;
const NOT_TEXT = /^(true|false|null|~|[-+]?[\d.]+(e[-+]?\d+)?)$/i;

/** Text as a YAML scalar, in quotes where it would be taken for something else. */
export function yamlText(text: string): string {
  return PLAIN.test(text) && !NOT_TEXT.test(text) && text.trim() === text ? text : JSON.stringify(text);
}

/** Lines one level further in. */
export function indented(lines: readonly string[]): string[] {
  return lines.map((line) => `  ${line}`);
}
