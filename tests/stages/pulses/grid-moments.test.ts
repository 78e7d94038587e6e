import { expect, test } from "vitest";
import { gridMoments } from "../../../stages/pulses/grid-moments.js";
import { expectRelative } from "../../expect-relative.js";

// A sum over even steps gives the moments of a normal density to e^(−2π²σ²/h²); at σ = 3 steps that is below rounding.
// Left out beyond e⁻¹⁵ of the top: 5.5 σ, 1e-6 of the variance.
test("a normal variable, in a box a thousand times its width", () => {
  const { mean, sd, top } = gridMoments(([x]) => -0.5 * ((x! - 1.23) / 1e-3) ** 2, [[-3, 5]]);
  expectRelative(mean, [1.23], 1e-6);
  expectRelative(sd, [1e-3], 1e-3);
  expect(top).toBeGreaterThan(-0.01);
});

test("two variables that hang together", () => {
  // x = z₁, y = 0.9 z₁ + √0.19 z₂: both of standard deviation 1.
  const density = ([x, y]: readonly number[]) => -0.5 * (x! ** 2 + (y! - 0.9 * x!) ** 2 / 0.19);
  const { mean, sd } = gridMoments(density, [
    [-40, 60],
    [-40, 60],
  ]);
  expect(Math.hypot(...mean)).toBeLessThan(1e-3);
  // A grid of 61 points over 11 σ: a sixth of σ, which a ridge of √0.19 still bears.
  expectRelative(sd, [1, 1], 2e-3);
});

test("a flat density has its width over √12, and two hills are both seen", () => {
  const box = gridMoments(([x]) => (x! > 2 && x! < 5 ? 0 : -1e3), [[0, 10]]);
  // Edges fall anywhere within a cell of the closing grid: a sixtieth of the width at either end.
  expectRelative(box.mean, [3.5], 0.02);
  expectRelative(box.sd, [3 / Math.sqrt(12)], 0.04);
  const hill = (x: number, at: number) => Math.exp(-0.5 * ((x - at) / 0.1) ** 2);
  const hills = gridMoments(([x]) => Math.log(hill(x!, -1) + hill(x!, 1) + 1e-30), [[-9, 9]]);
  expectRelative(hills.sd, [Math.hypot(1, 0.1)], 1e-2);
});
