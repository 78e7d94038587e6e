import { expect, test } from "vitest";
import { pcg32 } from "../../../stages/numerics/random.js";
import { normal, slowNoise } from "../../../stages/simulate/random.js";
import { OVER_RANGE, reader, resistance_Ohm, temperature_K } from "../../../stages/simulate/thermometer.js";
import { expectRelative } from "../../expect-relative.js";
import { aCell } from "./a-cell.js";

const { thermometer } = aCell();
const N = 20_000;

function readings(change: Partial<typeof thermometer>): number[] {
  const read = reader({ ...thermometer, ...change }, pcg32(4));
  return Array.from({ length: N }, () => read(0.5, 1));
}

const spread = (values: readonly number[]) => {
  const mean = values.reduce((sum, x) => sum + x, 0) / values.length;
  return Math.sqrt(values.reduce((sum, x) => sum + (x - mean) ** 2, 0) / values.length);
};

test("the law and its inverse", () => {
  const T = [0.25, 0.5, 1, 1.6];
  // By hand at 1 K: ln R = 6.2. At 0.5 K, x = −ln 2.
  const x = -Math.LN2;
  expectRelative([resistance_Ohm(thermometer.law, 1)], [Math.exp(6.2)], 1e-14);
  expectRelative(
    [resistance_Ohm(thermometer.law, 0.5)],
    [Math.exp(6.2 - 2.2 * x + 0.35 * x * x - 0.05 * x ** 3)],
    1e-13,
  );
  const back = T.map((t) => temperature_K(thermometer.law, resistance_Ohm(thermometer.law, t), 0.7));
  expectRelative(back, T, 1e-13); // digits of ln R
});

test("white noise is as large as was asked for, and nothing else is added", () => {
  const R = resistance_Ohm(thermometer.law, 0.5);
  expect(new Set(readings({}))).toEqual(new Set([R]));
  // Standard deviation of 20,000: known to 0.5 %; 2 % is four of them.
  expectRelative([spread(readings({ noise: 3e-4 })) / R], [3e-4], 0.02);
});

test("digitising: only multiples of the step", () => {
  for (const R of readings({ noise: 3e-4, resolution_Ohm: 0.5 }).slice(0, 500)) expect((2 * R) % 1).toBe(0);
});

test("spikes and over-range readings come as often as was asked for", () => {
  const R = resistance_Ohm(thermometer.law, 0.5);
  const hit = readings({ spikes: { share: 0.01, size: 0.1 } }).filter((r) => r !== R).length;
  const over = readings({ overRangeShare: 0.01 }).filter((r) => r === OVER_RANGE).length;
  // 200 expected, binomial standard deviation 14: four of them.
  expect(Math.abs(hit - 200)).toBeLessThan(57);
  expect(Math.abs(over - 200)).toBeLessThan(57);
});

test("normal numbers have the moments of the normal distribution", () => {
  const random = pcg32(9);
  const z = Array.from({ length: N }, () => normal(random));
  const moment = (k: number) => z.reduce((sum, x) => sum + x ** k, 0) / N;
  // Standard deviations of these means: √(1, 2, 15, 96)/√20,000 = 0.007, 0.010, 0.027, 0.069; four of each.
  expect(Math.abs(moment(1))).toBeLessThan(0.028);
  expect(Math.abs(moment(2) - 1)).toBeLessThan(0.04);
  expect(Math.abs(moment(3))).toBeLessThan(0.11);
  expect(Math.abs(moment(4) - 3)).toBeLessThan(0.28);
});

test("slow noise: unit variance, and power per octave the same from octave to octave", () => {
  const noise = slowNoise([4, 4000], pcg32(2));
  const x = Array.from({ length: 400_000 }, () => noise(1));
  // 400,000 s hold a hundred of the longest times: the variance is known to about a tenth.
  expectRelative([spread(x)], [1], 0.2);
  // Variance between neighbouring means over m samples (Allan): flat for 1/f noise. Walks two a decade ripple by
  // a few per cent; at 40, 100 and 250 s, well within the band, it is flat to 20 %.
  const allan = (m: number) => {
    const means = Array.from({ length: Math.floor(x.length / m) }, (_, i) => {
      let sum = 0;
      for (let j = 0; j < m; j++) sum += x[i * m + j]!;
      return sum / m;
    });
    let sum = 0;
    for (let i = 1; i < means.length; i++) sum += (means[i]! - means[i - 1]!) ** 2;
    return sum / (2 * (means.length - 1));
  };
  const middle = allan(100);
  expectRelative([allan(40) / middle, allan(250) / middle], [1, 1], 0.2);
});
