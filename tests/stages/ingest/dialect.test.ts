import { expect, test } from "vitest";
import { detectDialect, type WantedColumn } from "../../../stages/ingest/dialect.js";
import { auto } from "./night-of.js";

const t: WantedColumn = { column: "t", holds: "number" };
const R: WantedColumn = { column: "R", holds: "number" };
const detect = (head: string, wanted = [t, R]) => detectDialect(head, wanted, auto, "log.csv");

test.each([
  ["comma", "t,R\n0.5,100.5\n", ",", "."],
  ["semicolon and decimal comma", "t;R\n0,5;100,5\n", ";", ","],
  ["semicolon and decimal point", "t;R\n0.5;100.5\n", ";", "."],
  ["tab", "t\tR\n0.5\t100.5\n", "tab", "."],
  ["tab and decimal comma", "t\tR\n0,5\t100,5\n", "tab", ","],
  ["pipe", "t|R\n0.5|100.5\n", "|", "."],
  ["spaces", "t  R\n0.5   100.5\n", "space", "."],
  ["spaces and decimal comma", "  t  R\n  0,5   100,5\n", "space", ","],
  ["quoted decimal commas between commas", 't,R\n"0,5","100,5"\n', ",", ","],
  ["whole numbers only", "t;R\n0;100\n1;101\n", ";", "."],
])("%s", (_, head, delimiter, decimal) => {
  const dialect = detect(head);
  expect([dialect.delimiter, dialect.decimal, dialect.indices, dialect.dataLine]).toEqual([
    delimiter,
    decimal,
    [0, 1],
    2,
  ]);
});

test.each([
  ["\n", "t,R\n1,2\n"],
  ["\r\n", "t,R\r\n1,2\r\n"],
  ["\r", "t,R\r1,2\r"],
])("line ends %j", (newline, head) => {
  const dialect = detect(head);
  expect(dialect.newline).toBe(newline);
  expect(head.slice(dialect.dataStart)).toMatch(/^1,2/);
});

test("the heading is found below a preamble, by its names", () => {
  const head = 'Bridge: AB-7\nRange: 2 kOhm, 20 Hz\n\n"t" , "R" ,"note, long"\n0.5,100.5,x\n';
  const dialect = detect(head);
  expect(dialect.heading).toEqual(["t", "R", "note, long"]);
  expect(dialect.dataLine).toBe(5);
  expect(dialect.width).toBe(3);
});

test("a heading may be a comment, and be followed by units", () => {
  expect(detect("# t, R\n0.5,100.5\n").dataLine).toBe(2);
  expect(detect("t,R\ns,Ohm\n0.5,100.5\n").dataLine).toBe(3);
  expect(detect("# t,R\nt,R\n[s],[Ohm]\n# warm\n0.5,100.5\n").dataLine).toBe(5);
});

test("a first reading that is a word is data, not units", () => {
  expect(detect("t,R\n0.5,OVLD\n1.0,100.5\n").dataLine).toBe(2);
});

test("columns by number need no heading and step over what is above the data", () => {
  const wanted: WantedColumn[] = [
    { column: "#1", holds: "number" },
    { column: "#3", holds: "number" },
  ];
  const bare = detect("0,5;1;100,5\n1,0;1;100,6\n", wanted);
  expect([bare.delimiter, bare.decimal, bare.heading, bare.indices, bare.dataLine]).toEqual([
    ";",
    ",",
    null,
    [0, 2],
    1,
  ]);
  expect(detect("run 7\nt,x,R\n0.5,1,100.5\n", wanted).dataLine).toBe(3);
  expect(detect("0.5,1,100.5\n1.0,1,100.6\n", wanted).delimiter).toBe(",");
});

test("dates say nothing of the decimal mark", () => {
  const moment: WantedColumn = { column: "t", holds: "moment" };
  expect(detect("t;R\n2026-11-14T21:00:00.5;100,5\n", [moment, R]).decimal).toBe(",");
});

test("empty cells at the end of heading or rows do not count", () => {
  expect(detect("t,R,\n0.5,100.5\n")).toMatchObject({ width: 2, least: 2 });
  expect(detect("t,R\n0.5,100.5,\n")).toMatchObject({ width: 3, least: 2 });
});
