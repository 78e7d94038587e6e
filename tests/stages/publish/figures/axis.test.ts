import { expect, test } from "vitest";
import { logAxis, logDomain } from "../../../../stages/publish/figures/axis.js";

test("powers of ten are labelled, the rest of each decade is ticked", () => {
  const axis = logAxis([0.002, 2], "powers");
  expect(axis.values).toHaveLength(8 + 9 + 9 + 2);
  expect(axis.labelExpr).toContain('{"1":"1","0.01":"10⁻²","0.1":"10⁻¹"}');
});

test("a short axis is labelled in plain numbers and ticked in tenths past one", () => {
  const axis = logAxis([0.3, 1.25], "tenths");
  expect(axis.values).toEqual([0.3, 0.4, 0.5, 0.6, 0.7, 0.8, 0.9, 1, 1.1, 1.2]);
  expect(axis.labelExpr).toContain('"0.3":"0.3"');
  expect(axis.labelExpr).not.toContain('"1.1"');
});

test("a domain leaves out what a logarithm cannot show", () => {
  expect(logDomain([Number.NaN, -1, 0, 2, 8], 2)).toEqual([1, 16]);
});
