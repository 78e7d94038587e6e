import { expect, test } from "vitest";
import { integrate } from "../../../stages/numerics/quadrature.js";
import { boseEntropyKernel, boseHeatKernel, boseOccupation } from "../../../stages/physics/bose.js";
import { expectRelative } from "../../expect-relative.js";
import { column, published } from "./published.js";

// Cut at x = 60 the tails are below 1e-19 of the integrals; what is left is the quadrature's own target.
test("the closed forms of the Bose integrals, to 1e-12", () => {
  const ours = [
    integrate((x) => x * x * boseHeatKernel(x), 0, 60, 1e-13),
    integrate((x) => x ** 3 * boseOccupation(x), 0, 60, 1e-13),
    integrate((x) => x * x * Math.log(-Math.expm1(-x)), 0, 60, 1e-13),
    integrate((x) => x * x * boseOccupation(x), 0, 60, 1e-13),
  ];
  expectRelative(ours, column(published("bose-integrals.csv"), "value"), 1e-12);
  expectRelative([ours[0]!, ours[2]!], [(4 * Math.PI ** 4) / 15, -(Math.PI ** 4) / 45], 1e-12);
});

// For energies proportional to k the entropy is a third of the heat capacity: ∫x² s dx = (4π⁴/15)/3.
test("the entropy kernel integrates to a third of the heat capacity", () => {
  const entropy = integrate((x) => x * x * boseEntropyKernel(x), 0, 60, 1e-13);
  expectRelative([entropy], [(4 * Math.PI ** 4) / 45], 1e-12);
});

// ((x/2)/sinh(x/2))² is the same function written without cancellation; a few roundings apart at any x.
test("the kernel keeps its digits at both ends", () => {
  for (const x of [1e-8, 9e-5, 1.1e-4, 0.01, 1, 30, 600]) {
    expectRelative([boseHeatKernel(x)], [(x / 2 / Math.sinh(x / 2)) ** 2], 2e-13);
  }
  expect(boseHeatKernel(0)).toBe(1);
  expect(boseHeatKernel(1e4)).toBe(0);
});
