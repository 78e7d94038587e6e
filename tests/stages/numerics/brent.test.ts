import { test } from "vitest";
import { brentRoot } from "../../../stages/numerics/brent.js";
import { expectRelative } from "../../expect-relative.js";

test.each([
  ["cos x = x (Dottie number)", (x: number) => Math.cos(x) - x, 0, 1, 0.7390851332151607],
  ["x³ = 2", (x: number) => x ** 3 - 2, -10, 100, Math.cbrt(2)],
  ["a steep step", (x: number) => Math.tanh(1e4 * (x - 0.123)), -1, 1, 0.123],
  ["a root at an end", (x: number) => x - 3, 3, 5, 3],
] as const)("%s", (_, f, a, b, root) => {
  expectRelative([brentRoot(f, a, b, f(a), f(b))], [root], 4e-16 * 4); // the last digit of the abscissa
});
