import { expect, test } from "vitest";
import { normal, pcg32, pcg32Words } from "../../../stages/numerics/random.js";

test("the words of the published generator", () => {
  // First words printed by its author's demonstration for state 42, stream 54 (from memory).
  const word = pcg32Words(42, 54);
  expect(Array.from({ length: 6 }, word)).toEqual([
    0xa15c02b7, 0x7b47f409, 0xba1d3330, 0x83d2f293, 0xbfa4784b, 0xcbed606e,
  ]);
});

test("the same words as its definition in 64-bit integers", () => {
  const seed = 2 ** 52 + 12345;
  const stream = 2 ** 45 + 99;
  const wrap = (value: bigint) => BigInt.asUintN(64, value);
  const increment = wrap(2n * BigInt(stream) + 1n);
  let state = 0n;
  const step = () => {
    state = wrap(state * 6364136223846793005n + increment);
  };
  step();
  state = wrap(state + BigInt(seed));
  step();
  const word = pcg32Words(seed, stream);
  for (let i = 0; i < 1000; i++) {
    const shifted = BigInt.asUintN(32, ((state >> 18n) ^ state) >> 27n);
    const rotation = state >> 59n;
    const expected = BigInt.asUintN(32, (shifted >> rotation) | (shifted << (-rotation & 31n)));
    step();
    expect(BigInt(word())).toBe(expected);
  }
});

test("uniform numbers: in [0, 1), with the moments they should have", () => {
  const random = pcg32(7);
  const n = 200_000;
  let sum = 0;
  let square = 0;
  for (let i = 0; i < n; i++) {
    const u = random();
    if (u < 0 || u >= 1) throw new Error(`${u} is outside`);
    sum += u;
    square += (u - 0.5) ** 2;
  }
  // Five standard deviations of each mean: √(1/12n) and √(1/180n).
  expect(Math.abs(sum / n - 0.5)).toBeLessThan(5 / Math.sqrt(12 * n));
  expect(Math.abs(square / n - 1 / 12)).toBeLessThan(5 / Math.sqrt(180 * n));
});

test("normal numbers: four moments", () => {
  const draw = normal(pcg32(11));
  const n = 200_000;
  const moment = [0, 0, 0, 0];
  for (let i = 0; i < n; i++) {
    const z = draw();
    for (let k = 0; k < 4; k++) moment[k]! += z ** (k + 1) / n;
  }
  // E zᵏ = 0, 1, 0, 3 with variances 1, 2, 15, 96 over n; five standard deviations.
  [0, 1, 0, 3].forEach((expected, k) => {
    expect(Math.abs(moment[k]! - expected)).toBeLessThan(5 * Math.sqrt([1, 2, 15, 96][k]! / n));
  });
});

test("one seed, one sequence", () => {
  const sequence = (seed: number) => Array.from({ length: 4 }, pcg32(seed));
  expect(sequence(3)).toEqual(sequence(3));
  expect(sequence(3)).not.toEqual(sequence(4));
});
