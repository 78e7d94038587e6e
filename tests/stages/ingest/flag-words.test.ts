import { expect, test } from "vitest";
import { sampleFlagWords } from "../../../stages/ingest/flag-words.js";
import { SampleFlag } from "../../../stages/ingest/types.js";

test("every bit has its words, and a good sample none", () => {
  const all = Object.values(SampleFlag).reduce<number>((sum, bit) => sum | bit, 0);
  expect(sampleFlagWords(all)).toHaveLength(Object.keys(SampleFlag).length);
  expect(sampleFlagWords(0)).toEqual([]);
  expect(sampleFlagWords(SampleFlag.OverRange | SampleFlag.Excluded)).toEqual([
    "instrument over range",
    "in an excluded span",
  ]);
});
