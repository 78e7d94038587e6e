import { expect, test } from "vitest";
import { InputError } from "../../../stages/errors.js";
import { elapsed, type Night, nightOf } from "./night-of.js";

const rows = (n: number, row: (i: number) => string) => Array.from({ length: n }, (_, i) => row(i)).join("");

interface Malformed {
  readonly name: string;
  readonly night: Night;
  /** The whole message, its two lines. */
  readonly says: readonly [string, string];
}

/** Logs that cannot be used, and what a person reads about each. */
const malformed: readonly Malformed[] = [
  {
    name: "empty file",
    night: { thermometer: "" },
    says: [
      "thermometer.csv: expected a log, but the file is empty.",
      "  Way out: copy the log again, or leave this night out",
    ],
  },
  {
    name: "heading only",
    night: { thermometer: "t,R\n" },
    says: [
      "thermometer.csv: expected rows of data, but there is only a heading.",
      "  Way out: copy the log again, or leave this night out",
    ],
  },
  {
    name: "binary file",
    night: { thermometer: Uint8Array.of(7, 0, 1, 2, 0, 200, 3, 0, 9) },
    says: [
      "thermometer.csv: expected a text log, but this is a binary file.",
      "  Way out: export the log as CSV text from the instrument and name that file",
    ],
  },
  {
    name: "compressed file",
    night: { thermometer: Uint8Array.of(0x1f, 0x8b, 8, 0) },
    says: [
      "thermometer.csv: expected a text log, but this is a compressed file.",
      "  Way out: unpack it and name the unpacked log",
    ],
  },
  {
    name: "missing column",
    night: { thermometer: "t,Rx,Tstage\n0,100,1\n" },
    says: [
      'thermometer.csv:1: R is missing; expected one of the headings "t", "Rx", "Tstage".',
      '  Way out: write column: "Rx"',
    ],
  },
  {
    name: "missing column, another case",
    night: { thermometer: "t;r;Tstage\n0;100;1\n" },
    says: [
      'thermometer.csv:1: R is missing; expected one of the headings "t", "r", "Tstage".',
      '  Way out: write column: "r"',
    ],
  },
  {
    name: "missing excitation",
    night: { thermometer: "t,R\n0,100\n", excitation: "U" },
    says: [
      'thermometer.csv:1: U is missing; expected one of the headings "t", "R".',
      "  Way out: name one of these in column:",
    ],
  },
  {
    name: "no heading",
    night: { thermometer: "0,100\n1,101\n" },
    says: [
      "thermometer.csv: t is missing; expected a heading row with this name; the file has none.",
      "  Way out: add the heading to the file, or give columns by number: column: 1",
    ],
  },
  {
    name: "heading twice",
    night: { thermometer: "t,R,R\n0,100,101\n" },
    says: [
      'thermometer.csv:1: R is "t,R,R"; expected this heading once.',
      "  Way out: give the column by number: column: 1",
    ],
  },
  {
    name: "wrong delimiter configured",
    night: { thermometer: "t,R\n0,100\n", format: { delimiter: ";" } },
    says: [
      'thermometer.csv:1: format.delimiter is ";"; expected the delimiter of the heading, ",".',
      '  Way out: write delimiter: auto or delimiter: ","',
    ],
  },
  {
    name: "decimal comma configured against the data",
    night: { thermometer: "t;R\n0.5;100.25\n", format: { decimal: "," } },
    says: [
      'thermometer.csv:2: t is "0.5"; expected a number with the decimal mark ",", as format: says.',
      "  Way out: write decimal: auto, or the mark that the file has",
    ],
  },
  {
    name: "decimal point configured against the data",
    night: { thermometer: "t;R\n0,5;100,25\n", format: { decimal: "." } },
    says: [
      'thermometer.csv:2: t is "0,5"; expected a number with the decimal mark ".", as format: says.',
      "  Way out: write decimal: auto, or the mark that the file has",
    ],
  },
  {
    name: "decimal comma unquoted in comma file",
    night: { thermometer: "t,R\n0,5,100,25\n1,0,100,5\n" },
    says: [
      'thermometer.csv:2: found "0,5,100,25"; expected 2 cells, as the heading has; this row and most others have 4.',
      "  Way out: a decimal comma needs another delimiter or quotes about the numbers: export the log so; or give columns by number",
    ],
  },
  {
    name: "decimal mark changes",
    night: { thermometer: "t;R\n0.5;100.25\n1.0;100,5\n" },
    says: [
      'thermometer.csv:3: R is "100,5"; expected a resistance in Ohm with the decimal mark ".", as in the rows above.',
      '  Way out: write decimal: "," in format: if the whole log has it, or export the log with one mark',
    ],
  },
  {
    name: "word in R",
    night: { thermometer: "t,R\n0,100\n1,OVLD\n2,100\n" },
    says: [
      'thermometer.csv:3: R is "OVLD"; expected a resistance in Ohm.',
      '  Way out: mark gaps as 9.91E37, name the word in format: as gap_words: ["OVLD"], or add the span to exclude: in run.yaml',
    ],
  },
  {
    name: "word in heater",
    night: { thermometer: "t,R\n0,100\n", heater: "t,duration,I,V\n1,2,three,4\n" },
    says: [
      'heater.csv:2: I is "three"; expected a current in mA.',
      '  Way out: mark gaps as 9.91E37, name the word in format: as gap_words: ["three"], or add the span to exclude: in run.yaml',
    ],
  },
  {
    name: "word outside exclude",
    night: { thermometer: "t,R\n0,100\n1,OVLD\n2,OVLD\n", exclude: [elapsed(0.5, 1.5)] },
    says: [
      'thermometer.csv:4: R is "OVLD"; expected a resistance in Ohm.',
      '  Way out: mark gaps as 9.91E37, name the word in format: as gap_words: ["OVLD"], or add the span to exclude: in run.yaml',
    ],
  },
  {
    name: "thousands",
    night: { thermometer: 't,R\n0,"1,234.5"\n1,"1,234.6"\n' },
    says: [
      'thermometer.csv:2: R is "1,234.5"; expected a resistance in Ohm without thousands separators.',
      "  Way out: switch digit grouping off in the instrument and export the log again",
    ],
  },
  {
    name: "time text",
    night: { thermometer: "t,R\n0,100\n2026-11-14T21:00:01,100\n" },
    says: [
      'thermometer.csv:3: t is "2026-11-14T21:00:01"; expected a time in s.',
      "  Way out: write unit: iso8601 if these are dates, or add the span to exclude: in run.yaml",
    ],
  },
  {
    name: "time not iso",
    night: {
      thermometer: "t,R\n14/11/2026 21:00:00,100\n14/11/2026 21:00:01,100\n",
      time: { unit: "iso8601" },
    },
    says: [
      'thermometer.csv:2: t is "14/11/2026 21:00:00"; expected an ISO 8601 time such as 2026-11-14T21:30:00.5.',
      "  Way out: have the instrument write year-month-day, or write unit: epoch or unit: s if these are numbers",
    ],
  },
  {
    name: "no such day",
    night: { thermometer: "t,R\n2026-02-29T21:00:00,100\n", time: { unit: "iso8601" } },
    says: [
      'thermometer.csv:2: t is "2026-02-29T21:00:00"; expected an ISO 8601 time such as 2026-11-14T21:30:00.5.',
      "  Way out: have the instrument write year-month-day, or write unit: epoch or unit: s if these are numbers",
    ],
  },
  {
    name: "epoch in ms",
    night: { thermometer: "t,R\n1794610800123,100\n1794610800223,100\n", time: { unit: "epoch" } },
    says: [
      'thermometer.csv:2: t is "1794610800123"; expected a Unix time in s.',
      "  Way out: write unit: epoch-ms if the log counts milliseconds, unit: iso8601 for dates, unit: s for times from the log's own zero",
    ],
  },
  {
    name: "mixed",
    night: { thermometer: "t,R\n1794610800,100\n", time: { unit: "epoch" }, heaterTime: { unit: "s" } },
    says: [
      'heater.csv: logs.heater.time.unit is "s"; expected dates or Unix time, as in the thermometer\'s log thermometer.csv.',
      "  Way out: have both instruments log dates, or both log seconds from one start",
    ],
  },
  {
    name: "instant on relative",
    night: {
      thermometer: "t,R\n0,100\n",
      exclude: [
        {
          from: { kind: "instant", epoch_s: 1, text: "2026-11-14T21:00:00Z" },
          to: { kind: "instant", epoch_s: 2, text: "2026-11-14T22:00:00Z" },
          reason: "x",
        },
      ],
    },
    says: [
      'exclude[0].from is "2026-11-14T21:00:00Z"; expected a time on the log\'s own clock, which carries no dates.',
      '  Way out: write it as the log counts, such as "1200 s"',
    ],
  },
  {
    name: "ragged",
    night: { thermometer: `t,R\n${rows(10, (i) => `${i},100\n`)}${rows(4, (i) => `${i + 10}\n`)}20,100\n` },
    says: [
      'thermometer.csv:12: found "1 cell"; expected 2 cells as in the other rows; 4 of 15 rows differ.',
      "  Way out: name the delimiter in format:, or copy the log from the instrument again",
    ],
  },
  {
    name: "width",
    night: { thermometer: "t,R\n0,100,5\n1,100,6\n" },
    says: [
      'thermometer.csv:2: found "0,100,5"; expected 2 cells, as the heading has; this row and most others have 3.',
      "  Way out: a decimal comma needs another delimiter or quotes about the numbers: export the log so; or give columns by number",
    ],
  },
  {
    name: "stray quote",
    night: { thermometer: `t,R\n0,100\n1,"100\n${rows(20, (i) => `${i + 2},100\n`)}` },
    says: [
      'thermometer.csv:3: found "\\""; expected each quoted field to end on its own line.',
      "  Way out: take the stray quote out of a copy of the log, and name the copy in run.yaml",
    ],
  },
  {
    name: "clock back",
    night: { thermometer: `t,R\n${rows(20, (i) => `${i},100\n`)}${rows(20, (i) => `${i},100\n`)}` },
    says: [
      'thermometer.csv:22: t is "0 s after 19 s"; expected times that increase; 20 of 40 samples do not.',
      "  Way out: the clock was set back or the logger restarted: split a copy of the log there and reduce it as two runs",
    ],
  },
  {
    name: "no reading",
    night: { thermometer: "t,R\n0,9.9E37\n1,NaN\n" },
    says: [
      "thermometer.csv: expected at least one usable reading of the thermometer, but every one is a gap or over range.",
      "  Way out: check the column that logs.thermometer.resistance names, and the instrument's range",
    ],
  },
  {
    name: "column number beyond",
    night: {
      thermometer: "0,100\n1,101\n",
      time: { column: "#1" },
      resistance: { column: "#3", unit: "Ohm", factor: 1 },
    },
    says: [
      "thermometer.csv:1: #3 is missing; expected a column number up to 2, as many as the rows have.",
      "  Way out: give the column's number counted from 1, or name the delimiter in format:",
    ],
  },
  {
    name: "column numbers without numbers",
    night: {
      thermometer: "a,b\nc,d\n",
      time: { column: "#1" },
      resistance: { column: "#2", unit: "Ohm", factor: 1 },
    },
    says: [
      "thermometer.csv: #1 is missing; expected a row with numbers in columns 1, 2.",
      "  Way out: name the delimiter in format:, or give columns by their heading",
    ],
  },
  {
    name: "negative duration",
    night: { thermometer: "t,R\n0,100\n", heater: "t,duration,I,V\n1,-2,3,4\n" },
    says: [
      'heater.csv:2: duration is "-2"; expected a duration in s, not below 0.',
      "  Way out: mend the row in a copy of the log and name the copy in run.yaml",
    ],
  },
  {
    name: "endless line",
    night: { thermometer: "x".repeat(70_000) },
    says: [
      "thermometer.csv:1: expected lines of text, but this one is longer than 65536 characters.",
      "  Way out: check that the file is the instrument's log, and export it again as CSV text",
    ],
  },
  {
    name: "comment is delimiter",
    night: { thermometer: "t;R\n0;1\n", format: { delimiter: ";", comment: ";" } },
    says: [
      'thermometer.csv: format.comment is ";"; expected a mark that is not the delimiter.',
      '  Way out: write comment: "" if the log has no comments',
    ],
  },
  {
    name: "all cells empty",
    night: { thermometer: "t,R,Tstage\n0,100,\n1,100,\n", files: { stage: "thermometer.csv" } },
    says: [
      'thermometer.csv: Tstage is ""; expected rows with a temperature in K, but every cell is empty.',
      "  Way out: check which column logs.stage names",
    ],
  },
];

test.each(malformed)("a log is refused in words: $name", async ({ night, says }) => {
  const error = await nightOf(night).then(
    () => null,
    (reason: unknown) => reason,
  );
  expect(error).toBeInstanceOf(InputError);
  expect((error as InputError).message.split("\n")).toEqual(says);
});
