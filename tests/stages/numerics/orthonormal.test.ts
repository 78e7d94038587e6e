import { expect, test } from "vitest";
import { dot, orthonormalBasis } from "../../../stages/numerics/orthonormal.js";

test("nearly parallel columns still give right angles", () => {
  const n = 50;
  const column = (k: number) => Float64Array.from({ length: n }, (_, i) => (1 + i / n) ** (k / 100));
  const basis = orthonormalBasis();
  const columns = [0, 1, 2, 3].map(column);
  for (const each of columns) basis.add(each);
  const probe = Float64Array.from({ length: n }, (_, i) => Math.sin(i * i));
  basis.project(probe);
  // Columns alike to 1e-7: one projection would leave 1e-9, two leave rounding.
  for (const each of columns) expect(Math.abs(dot(each, probe))).toBeLessThan(1e-13 * n);
});

test("a dependent column adds nothing", () => {
  const basis = orthonormalBasis();
  basis.add(Float64Array.of(1, 1, 0));
  basis.add(Float64Array.of(3, 3, 0));
  const probe = Float64Array.of(0, 0, 5);
  basis.project(probe);
  expect(probe).toEqual(Float64Array.of(0, 0, 5));
});
