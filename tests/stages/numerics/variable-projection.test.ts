import { expect, test } from "vitest";
import { type SeparableModel, variableProjection } from "../../../stages/numerics/variable-projection.js";
import { expectRelative } from "../../expect-relative.js";
import { parameters, referenceSet } from "./nist-strd.js";

/** One moving column f(a, x) with derivative g(a, x); no other. */
function oneColumn(
  x: Float64Array,
  f: (a: number, x: number) => number,
  g: (a: number, x: number) => number,
): SeparableModel {
  return {
    fixed: [],
    moving: (a) => [x.map((at) => f(a[0]!, at))],
    derivative: (a) => [[x.map((at) => g(a[0]!, at))]],
  };
}

const saturation = {
  f: (a: number, x: number) => -Math.expm1(-a * x),
  g: (a: number, x: number) => x * Math.exp(-a * x),
};
const family = {
  Misra1a: saturation,
  Misra1b: {
    f: (a: number, x: number) => 1 - (1 + (a * x) / 2) ** -2,
    g: (a: number, x: number) => x * (1 + (a * x) / 2) ** -3,
  },
  Misra1c: {
    f: (a: number, x: number) => 1 - (1 + 2 * a * x) ** -0.5,
    g: (a: number, x: number) => x * (1 + 2 * a * x) ** -1.5,
  },
  Misra1d: {
    f: (a: number, x: number) => (a * x) / (1 + a * x),
    g: (a: number, x: number) => x / (1 + a * x) ** 2,
  },
};

// Certified to 11 digits, linear in b1 and non-linear in b2, like a separation. No start is used: the bracket is three
// decades wide, scanned evenly.
test.each(Object.entries(family))("NIST StRD %s from a bracket", (name, { f, g }) => {
  const set = referenceSet(name);
  const certified = parameters(set);
  const fit = variableProjection(oneColumn(set.data.get("x")!, f, g), set.data.get("y")!, {
    bracket: [1e-6, 5e-3],
    steps: 100,
  });
  expectRelative(
    [...fit.linear, ...fit.nonlinear],
    certified.map((row) => row[2]!),
    1e-9,
  );
  const s = Math.sqrt(fit.chiSquared / (set.data.get("x")!.length - 2));
  // Certified standard deviations come from the same full Jacobian: 1e-9 is what cancellation leaves of 11 digits.
  expectRelative(
    [0, 1].map((j) => s * Math.sqrt(fit.covariance.get(j, j))),
    certified.map((row) => row[3]!),
    1e-9,
  );
  expect(fit.atBound).toBe(false);
});

// Two non-linear exponents; Levenberg–Marquardt on all five parameters does not settle from start 1.
test.each([1, 2])("NIST StRD MGH17 from start %i", (start) => {
  const set = referenceSet("MGH17");
  const certified = parameters(set);
  const x = set.data.get("x")!;
  const model: SeparableModel = {
    fixed: [x.map(() => 1)],
    moving: (a) => [0, 1].map((k) => x.map((at) => Math.exp(-at * a[k]!))),
    derivative: (a) =>
      [0, 1].map((k) => [0, 1].map((j) => x.map((at) => (j === k ? -at * Math.exp(-at * a[k]!) : 0)))),
  };
  const fit = variableProjection(model, set.data.get("y")!, {
    start: certified.slice(3).map((row) => row[start - 1]!),
  });
  // The two exponentials are alike, and exchanging them is the same fit.
  const [i, j] = fit.nonlinear[0]! < fit.nonlinear[1]! ? [0, 1] : [1, 0];
  expectRelative(
    [fit.linear[0]!, fit.linear[1 + i]!, fit.linear[1 + j]!, fit.nonlinear[i]!, fit.nonlinear[j]!],
    certified.map((row) => row[2]!),
    1e-7, // cancellation between the two amplitudes costs three digits
  );
  const s = Math.sqrt(fit.chiSquared / (x.length - 5));
  expectRelative(
    [0, 1 + i, 1 + j, 3 + i, 3 + j].map((k) => s * Math.sqrt(fit.covariance.get(k, k))),
    certified.map((row) => row[3]!),
    1e-6,
  );
});

test("a minimum outside the bracket is said", () => {
  const x = Float64Array.of(1, 2, 3, 4, 5);
  const y = x.map((at) => saturation.f(2, at));
  const fit = variableProjection(oneColumn(x, saturation.f, saturation.g), y, {
    bracket: [0.1, 1],
    steps: 20,
  });
  expect(fit.atBound).toBe(true);
});

test("fixed columns: a decay on a background that resembles it", () => {
  const x = Float64Array.from({ length: 200 }, (_, i) => i / 20);
  const model: SeparableModel = {
    fixed: [x.map(() => 1), x, x.map((at) => at * at)],
    moving: (a) => [x.map((at) => Math.exp(-at / a[0]!))],
    derivative: (a) => [[x.map((at) => (Math.exp(-at / a[0]!) * at) / a[0]! ** 2)]],
  };
  const y = x.map((at) => 3 - 0.2 * at + 0.01 * at * at + 1e-3 * Math.exp(-at / 1.7));
  const fit = variableProjection(model, y, { bracket: [0.1, 6], steps: 60 });
  // Rounding of y is 2e-13 of the small exponential, and the background takes most of its shape: three digits more.
  expectRelative([...fit.nonlinear, ...fit.linear], [1.7, 3, -0.2, 0.01, 1e-3], 1e-9);
});
