import { expect, test } from "vitest";
import { conductanceLaw, heatShape, localLaw } from "../../../stages/pulses/cell-laws.js";

const T = Float64Array.from({ length: 12 }, (_, i) => 0.35 * 1.1 ** i);

test("a power law is found exactly, whatever shape is assumed", () => {
  const C = T.map((t) => 2e-3 * t ** 2.5);
  for (const shape of [(t: number) => t, (t: number) => t ** 3]) {
    const law = localLaw(T, C, 0.6, shape);
    expect(law.power).toBeCloseTo(2.5, 9);
    expect(law.bend).toBeCloseTo(0, 7);
  }
});

test("an activated rise is followed where the shape bends alike", () => {
  // Phonons and rotons of helium in order of magnitude; their shape is known a tenth off in the gap.
  const law = (gap: number) => (t: number) => 0.083 * t ** 3 + 400 * Math.exp(-gap / t);
  const C = T.map(law(8.6));
  const h = 1e-4;
  const at = 0.8;
  const slope = Math.log(law(8.6)(at * Math.exp(h)) / law(8.6)(at * Math.exp(-h))) / (2 * h);
  // The power there is about 6; a tenth of it changes C within a 3 % pulse by 0.3 % at its ends, and in the mean by
  // the square of that.
  expect(Math.abs(localLaw(T, C, at, law(9)).power - slope)).toBeLessThan(0.3);
});

test("one pulse read badly does not bend its neighbours", () => {
  const C = T.map((t) => 2e-3 * t ** 3);
  C[5]! *= 1.15;
  expect(localLaw(T, C, T[6]!, (t) => t ** 3).power).toBeCloseTo(3, 2);
});

test("a night of one temperature falls back on the shape", () => {
  expect(localLaw(Float64Array.of(0.5), Float64Array.of(1), 0.5, (t) => t ** 3).power).toBeCloseTo(3, 6);
});

test("the liquid's law is that of what the body leaves", () => {
  const body = (t: number) => 5e-4 * t;
  const C = T.map((t) => body(t) + 9e-3 * t ** 3);
  const shape = heatShape({ kind: "filled", body }, T, C, 0.5);
  expect(shape.bodyPower).toBeCloseTo(1, 6);
  expect(shape.liquidPower).toBeCloseTo(3, 6);
});

test("a conductance's exponent needs a span of temperature and numbers that stand out", () => {
  const k = T.map((t) => 3e-5 * t ** 1.4);
  const u = k.map((value) => 0.01 * value);
  const otherwise = { power: 1, u: 0.7 };
  expect(conductanceLaw(T, k, u, otherwise).power).toBeCloseTo(1.4, 6);
  expect(conductanceLaw(T, k, k, otherwise)).toBe(otherwise);
  expect(conductanceLaw(T.slice(0, 3), k, u, otherwise)).toBe(otherwise);
});
