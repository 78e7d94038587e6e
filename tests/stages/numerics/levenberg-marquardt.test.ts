import { expect, test } from "vitest";
import {
  type LeastSquaresProblem,
  levenbergMarquardt,
} from "../../../stages/numerics/levenberg-marquardt.js";
import { expectRelative } from "../../expect-relative.js";
import { parameters, referenceSet } from "./nist-strd.js";

type Model = (b: Float64Array, x: number, x2: number) => number;
const { atan, cos, exp, sin, PI } = Math;

const lanczos: Model = (b, x) => b[0]! * exp(-b[1]! * x) + b[2]! * exp(-b[3]! * x) + b[4]! * exp(-b[5]! * x);
const chwirut: Model = (b, x) => exp(-b[0]! * x) / (b[1]! + b[2]! * x);
const gauss: Model = (b, x) =>
  b[0]! * exp(-b[1]! * x) +
  b[2]! * exp(-((x - b[3]!) ** 2) / b[4]! ** 2) +
  b[5]! * exp(-((x - b[6]!) ** 2) / b[7]! ** 2);
const models: Readonly<Record<string, Model>> = {
  Misra1a: (b, x) => b[0]! * -Math.expm1(-b[1]! * x),
  Misra1b: (b, x) => b[0]! * (1 - (1 + (b[1]! * x) / 2) ** -2),
  Misra1c: (b, x) => b[0]! * (1 - (1 + 2 * b[1]! * x) ** -0.5),
  Misra1d: (b, x) => (b[0]! * b[1]! * x) / (1 + b[1]! * x),
  Chwirut1: chwirut,
  Chwirut2: chwirut,
  DanWood: (b, x) => b[0]! * x ** b[1]!,
  Lanczos2: lanczos,
  Lanczos3: lanczos,
  Gauss1: gauss,
  Gauss2: gauss,
  Nelson: (b, x, x2) => b[0]! - b[1]! * x * exp(-b[2]! * x2),
  Rat42: (b, x) => b[0]! / (1 + exp(b[1]! - b[2]! * x)),
  Roszman1: (b, x) => b[0]! - b[1]! * x - atan(b[2]! / (x - b[3]!)) / PI,
  MGH17: (b, x) => b[0]! + b[1]! * exp(-x * b[3]!) + b[2]! * exp(-x * b[4]!),
  ENSO: (b, x) =>
    b[0]! +
    b[1]! * cos((2 * PI * x) / 12) +
    b[2]! * sin((2 * PI * x) / 12) +
    b[4]! * cos((2 * PI * x) / b[3]!) +
    b[5]! * sin((2 * PI * x) / b[3]!) +
    b[7]! * cos((2 * PI * x) / b[6]!) +
    b[8]! * sin((2 * PI * x) / b[6]!),
};

function problemOf(name: string): LeastSquaresProblem {
  const { data } = referenceSet(name);
  const x = data.get("x") ?? data.get("x1")!;
  const x2 = data.get("x2") ?? x;
  const y = name === "Nelson" ? data.get("y")!.map(Math.log) : data.get("y")!;
  const model = models[name]!;
  return {
    residuals: y.length,
    residual(b, out) {
      for (let i = 0; i < y.length; i++) out[i] = model(b, x[i]!, x2[i]!) - y[i]!;
    },
  };
}

// MGH17 from its far start runs into a valley where two exponentials cancel; variable-projection.test.ts takes it.
const cases = Object.keys(models).flatMap((name) =>
  [1, 2].filter((start) => name !== "MGH17" || start === 2).map((start) => [name, start] as const),
);

// Certified to 11 digits. The Jacobian is by central differences here, good to about 1e-9 of each element, which the
// standard deviations inherit. Six digits are what the publisher asks of a good solver.
test.each(cases)("NIST StRD %s from start %i", (name, start) => {
  const set = referenceSet(name);
  const certified = parameters(set);
  const fit = levenbergMarquardt(
    problemOf(name),
    certified.map((row) => row[start - 1]!),
  );
  expect(fit.converged).toBe(true);
  expectRelative(
    fit.value,
    certified.map((row) => row[2]!),
    1e-6,
  );
  expectRelative(
    fit.standardDeviation,
    certified.map((row) => row[3]!),
    1e-6,
  );
  expectRelative([fit.residualStandardDeviation], set.certified.get("residual_standard_deviation")!, 1e-6);
  expectRelative([fit.chiSquared], set.certified.get("residual_sum_of_squares")!, 1e-6);
});

const decay = { t: Float64Array.of(0, 1, 2, 3, 4, 6), y: Float64Array.of(5.1, 3.2, 1.9, 1.2, 0.8, 0.2) };
const decayProblem: LeastSquaresProblem = {
  residuals: 6,
  residual(b, out) {
    for (let i = 0; i < 6; i++) out[i] = b[0]! * exp(-b[1]! * decay.t[i]!) - decay.y[i]!;
  },
  jacobian(b, out) {
    for (let i = 0; i < 6; i++) {
      const e = exp(-b[1]! * decay.t[i]!);
      out.set(i, 0, e);
      out.set(i, 1, -b[0]! * decay.t[i]! * e);
    }
  },
};

test("its own Jacobian and differences lead to the same place", () => {
  const { residuals, residual } = decayProblem;
  const exact = levenbergMarquardt(decayProblem, [1, 1]);
  const differences = levenbergMarquardt({ residuals, residual }, [1, 1]);
  // Central differences: 1e-10 of the Jacobian's elements.
  expectRelative(differences.value, exact.value, 1e-9);
  expectRelative(differences.standardDeviation, exact.standardDeviation, 1e-8);
});

test("a bound that binds: the rest is the fit with that parameter held", () => {
  const fit = levenbergMarquardt(decayProblem, [1, 0.2], { upper: [Number.POSITIVE_INFINITY, 0.4] });
  expect(fit.atBound).toEqual([1]);
  expect(fit.value[1]).toBe(0.4);
  const e = decay.t.map((t) => exp(-0.4 * t));
  const dot = (a: Float64Array, b: Float64Array) => a.reduce((sum, v, i) => sum + v * b[i]!, 0);
  expectRelative([fit.value[0]!], [dot(e, decay.y) / dot(e, e)], 1e-10); // linear in what is left
  expect(fit.standardDeviation[1]).toBeNaN();
  expect(fit.standardDeviation[0]).toBeGreaterThan(0);
});

test("a parameter the residuals do not know is said", () => {
  const fit = levenbergMarquardt(
    {
      residuals: 3,
      residual(b, out) {
        for (let i = 0; i < 3; i++) out[i] = b[0]! + b[1]! - i;
      },
    },
    [3, 4],
  );
  expect(fit.undetermined).toEqual([0, 1]);
  expectRelative([fit.value[0]! + fit.value[1]!], [1], 1e-9);
});
