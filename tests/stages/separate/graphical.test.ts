import { expect, test } from "vitest";
import { rotonShape } from "../../../stages/physics/roton.js";
import { graphicalEstimates } from "../../../stages/separate/graphical.js";
import { logGrid, TRUTH } from "./helium.js";

const points = (T: Float64Array, C: Float64Array) => ({
  row: Int32Array.from(T.keys()),
  T_K: T,
  C,
  u: C,
  uncertainty: "known" as const,
  sources: [],
});

test("two straight lines, taken off each other, come back", () => {
  const T = logGrid(60, 0.35, 1.15);
  const C = T.map((t) => TRUTH.A3 * t ** 3 - 0.02 * t ** 5 + TRUTH.B * rotonShape(t, TRUTH.gap));
  const { sound_speed, roton_gap } = graphicalEstimates(points(T, C), TRUTH.volume);
  // The truth is of the lines' own form: what is left is how far the rounds have settled.
  expect(Math.abs(sound_speed!.value - TRUTH.u1)).toBeLessThan(0.01);
  expect(Math.abs(roton_gap!.value - TRUTH.gap)).toBeLessThan(1e-3);
});

test("no line without three points for it", () => {
  const cold = logGrid(10, 0.2, 0.45);
  const { sound_speed, roton_gap } = graphicalEstimates(
    points(
      cold,
      cold.map((t) => TRUTH.A3 * t ** 3),
    ),
    TRUTH.volume,
  );
  expect(roton_gap).toBeNull();
  expect(Math.abs(sound_speed!.value - TRUTH.u1)).toBeLessThan(1e-9);
  const warm = logGrid(10, 1, 1.2);
  expect(graphicalEstimates(points(warm, warm), TRUTH.volume)).toEqual({
    sound_speed: null,
    roton_gap: null,
  });
});
