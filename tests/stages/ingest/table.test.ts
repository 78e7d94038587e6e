import { expect, test } from "vitest";
import { readTable } from "../../../stages/ingest/table.js";
import { auto } from "./night-of.js";

const columns = [
  { column: "R_ohm", unit: "Ohm", factor: 1 },
  { column: "T_mK", unit: "mK", factor: 1e-3 },
];

test("a table is read by its headings, in SI, with the line of each row", async () => {
  const table = await readTable("# curve 4\nT_mK;R_ohm\n250;1000,5\n\n500;400\n", "curve.csv", columns, auto);
  expect(table).toEqual({
    columns: [Float64Array.of(1000.5, 400), Float64Array.of(0.25, 0.5)],
    line: Int32Array.of(3, 5),
  });
});

test.each([
  [
    "T_mK,R_ohm\n250,1000\n300,NaN\n",
    'curve.csv:3: R_ohm is "NaN"; expected a number in Ohm.\n  Way out: mend or leave out this row; a table has no gaps',
  ],
  [
    "T_mK,R_ohm\n250,1000\n300\n",
    'curve.csv:3: found "1 cell"; expected 2 cells as in the other rows.\n  Way out: mend this row',
  ],
])("a table has no gaps: %j", async (text, message) => {
  await expect(readTable(text, "curve.csv", columns, auto)).rejects.toThrow(message);
});
