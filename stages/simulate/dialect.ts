import type { LogDialect } from "./config.js";

/** One column of a log: its heading, and row i as text with a decimal point. */
export interface LogColumn {
  readonly heading: string;
  /** Numbers take the dialect's decimal mark; times in ISO 8601 keep their point. */
  readonly kind: "number" | "text";
  row(i: number): string;
}

const DELIMITER = { ",": ",", ";": ";", "|": "|", tab: "\t", space: " " } as const;

/** A log in the dialect of one instrument or another. */
export function writeLog(
  dialect: LogDialect,
  comments: readonly string[],
  columns: readonly LogColumn[],
  rows: number,
): string {
  const newline = dialect.newline === "crlf" ? "\r\n" : "\n";
  const between = DELIMITER[dialect.delimiter];
  const field = dialect.quotes ? (text: string) => `"${text}"` : (text: string) => text;
  const lines: string[] = dialect.comments ? comments.map((comment) => `# ${comment}`) : [];
  lines.push(columns.map(({ heading }) => field(heading)).join(between));
  const commas = dialect.decimal === ",";
  for (let i = 0; i < rows; i++) {
    let line = "";
    for (const [j, column] of columns.entries()) {
      const text = column.row(i);
      line +=
        (j === 0 ? "" : between) + field(commas && column.kind === "number" ? text.replace(".", ",") : text);
    }
    lines.push(line);
  }
  return `${dialect.byte_order_mark ? "\ufeff" : ""}${lines.join(newline)}${newline}`;
}

/** Times as the dialect has them, to the ms. */
export function timeColumn(dialect: LogDialect, start: string, time_s: Float64Array): LogColumn {
  const start_ms = Date.parse(start);
  const ms = (i: number) => Math.round(time_s[i]! * 1000);
  const seconds = (whole_ms: number) => {
    const size = Math.abs(whole_ms);
    return `${whole_ms < 0 ? "-" : ""}${Math.floor(size / 1000)}.${String(size % 1000).padStart(3, "0")}`;
  };
  const row = {
    s: (i: number) => seconds(ms(i)),
    ms: (i: number) => String(ms(i)),
    epoch: (i: number) => seconds(start_ms + ms(i)),
    "epoch-ms": (i: number) => String(start_ms + ms(i)),
    iso8601: (i: number) => new Date(start_ms + ms(i)).toISOString(),
  }[dialect.time];
  return { heading: "t", kind: dialect.time === "iso8601" ? "text" : "number", row };
}
