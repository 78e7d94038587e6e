import { expect, test } from "vitest";
import { rodas4, type StiffSystem } from "../../../stages/simulate/rodas4.js";
import { expectRelative } from "../../expect-relative.js";

/** dy/dt = f(y) for one variable. */
function scalar(f: (y: number) => number, slope: (y: number) => number): StiffSystem {
  let matrix = 1;
  return {
    size: 1,
    derivative: (y, out) => {
      out[0] = f(y[0]!);
    },
    factor: (y, shift) => {
      matrix = shift - slope(y[0]!);
    },
    solve: (b) => {
      b[0]! /= matrix;
    },
  };
}

/** Steps of equal length: with a tolerance that refuses none, one call is one step. */
function fixedSteps(system: StiffSystem, start: number, end_s: number, count: number): number {
  const integrator = rodas4(system, Number.POSITIVE_INFINITY);
  const y = Float64Array.of(start);
  for (let i = 0; i < count; i++) integrator.advance(y, end_s / count);
  expect(integrator.steps()).toBe(count);
  return y[0]!;
}

test("order 4: halving the step divides the error by 16", () => {
  // dy/dt = −y² has y = 1/(1 + t): non-linear, so a wrong digit in any coefficient costs an order or more.
  const system = scalar(
    (y) => -y * y,
    (y) => -2 * y,
  );
  const error = (count: number) => Math.abs(fixedSteps(system, 1, 2, count) - 1 / 3);
  for (const count of [16, 32, 64]) {
    const order = Math.log2(error(count) / error(2 * count));
    // The next order adds a part in (step·rate) to the slope; at 16 steps that is a tenth.
    expect(order).toBeGreaterThan(3.85);
    expect(order).toBeLessThan(4.2);
  }
});

test("L-stable: a body that is in balance within 1e-12 of a step is in balance after it", () => {
  const system = scalar(
    (y) => -1e12 * (y - 0.5),
    () => -1e12,
  );
  // R(z) → 0 as 1/z: 1e-12 times the distance, then digits of 0.5.
  expectRelative([fixedSteps(system, 1, 1, 1)], [0.5], 1e-10);
});

test("steps of its own choosing keep a decay to the tolerance", () => {
  const system = scalar(
    (y) => -30 * (y - 1),
    () => -30,
  );
  const y = Float64Array.of(1.02);
  rodas4(system, 1e-10).advance(y, 0.1);
  // Some 50 steps of at most 1e-10 each, of which the earlier ones have decayed.
  expectRelative(y, [1 + 0.02 * Math.exp(-3)], 1e-9);
});

test("time is covered exactly, however it is cut", () => {
  const system = scalar(
    () => 1,
    () => 0,
  );
  const integrator = rodas4(system, 1e-10);
  const y = Float64Array.of(1);
  for (let i = 0; i < 1000; i++) integrator.advance(y, 0.1);
  // 1000 additions of a rounded 0.1.
  expectRelative(y, [101], 1e-13);
});
