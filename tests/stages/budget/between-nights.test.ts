import { expect, test } from "vitest";
import { betweenNights } from "../../../stages/budget/between-nights.js";
import { separate } from "../../../stages/separate/separate.js";
import { expectRelative } from "../../expect-relative.js";
import { LANDAU, logGrid, simulated } from "../separate/helium.js";

const T = logGrid(240, 0.3, 1.2);
const run = Array.from(T, (_, i) => `night-${i % 6}`);

test("nights that agree have a Birge ratio near 1", () => {
  let mean = 0;
  for (let k = 0; k < 60; k++) {
    mean += betweenNights(separate(simulated(T, 0.005, [], 300 + k), LANDAU), run).birge_ratio! ** 2 / 60;
  }
  // χ²/ν of 5 degrees of freedom, 60 times: 1 ± √(2/300) = 0.082; three of these.
  expect(Math.abs(mean - 1)).toBeLessThan(0.25);
});

test("one night that is 1 % high is seen, and named", () => {
  const input = simulated(T, 0.005, [], 400);
  const high = { ...input, Cv_J_per_mol_K: input.Cv_J_per_mol_K.map((c, i) => (i % 6 === 2 ? 1.01 * c : c)) };
  const { nights, birge_ratio } = betweenNights(separate(high, LANDAU), run);
  // 1 % against 0.5 %/√40 is 12 standard deviations of one of six nights.
  expect(birge_ratio).toBeGreaterThan(4);
  const furthest = nights.reduce((a, b) => (b.relative_offset > a.relative_offset ? b : a));
  expect(furthest.run).toBe("night-2");
});

test("offsets are weighted means over the window's points only", () => {
  const found = separate(simulated(T, 0.005, [], 500), LANDAU);
  const { nights } = betweenNights(found, run);
  const count = T.filter((t) => t >= 0.35 && t <= 1.15).length;
  expect(nights.reduce((sum, night) => sum + night.points, 0)).toBe(count);
  expectRelative([nights[0]!.u_relative_offset], [0.005 / Math.sqrt(nights[0]!.points)], 0.02); // fit for truth
  expect(
    betweenNights(
      found,
      run.map(() => "one"),
    ).birge_ratio,
  ).toBeNull();
});
