import { test } from "vitest";
import { integrate } from "../../../stages/numerics/quadrature.js";
import { rotonShape } from "../../../stages/physics/roton.js";
import { meanOverStep } from "../../../stages/physics/step-mean.js";
import { expectRelative } from "../../expect-relative.js";

// Gauss and Legendre's five points are exact to degree 9: only rounding is left.
test("exact for powers up to T⁹", () => {
  for (let p = 0; p <= 9; p++) {
    const exact = (1.2 ** (p + 1) - 0.9 ** (p + 1)) / ((p + 1) * 0.3);
    expectRelative([meanOverStep((T) => T ** p, 0.9, 1.2)], [exact], 2e-15);
  }
});

// The roton term over a step of a tenth of T: what the docstring claims.
test("good to 1e-9 for an activated term over 10 % of T", () => {
  for (const T of [0.5, 1, 1.5]) {
    const [a, b] = [0.95 * T, 1.05 * T];
    const exact = integrate((t) => rotonShape(t, 8.65), a, b, 1e-13) / (b - a);
    expectRelative([meanOverStep((t) => rotonShape(t, 8.65), a, b)], [exact], 1e-9);
  }
});
