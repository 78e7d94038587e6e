import { readFileSync } from "node:fs";
import { expect, test } from "vitest";
import { studentT } from "../../../stages/numerics/student.js";
import { expectRelative } from "../../expect-relative.js";

const student = await studentT();

test("coverage factors of the GUM, Table G.2", () => {
  const url = new URL("../../../fixtures/published/gum-g2-student-t.csv", import.meta.url);
  const rows = readFileSync(url, "utf8")
    .trimEnd()
    .split("\n")
    .filter((line) => /^(\d|inf)/.test(line));
  expect(rows.length).toBe(28);
  // 68.27 %, 95.45 % and 99.73 % stand for one, two and three standard deviations; erf to 17 digits.
  const levels = [0.68268949213708585, 0.9, 0.95, 0.95449973610364158, 0.99, 0.99730020393673979];
  for (const row of rows) {
    const [nu, ...factors] = row
      .split(",")
      .map((field) => (field === "inf" ? Number.POSITIVE_INFINITY : Number(field)));
    levels.forEach((level, i) => {
      // Printed to two decimals.
      expect(Math.abs(student.coverageFactor(level, nu!) - factors[i]!), `ν = ${nu}`).toBeLessThanOrEqual(
        0.005,
      );
    });
  }
});

test("closed forms: one degree is Cauchy's, two are algebraic", () => {
  for (const p of [0.05, 0.3, 0.6, 0.975]) {
    const a = 2 * p - 1;
    // cephes claims 5e-16; the tangent near 0.975 multiplies rounding of p by ten.
    expectRelative([student.quantile(p, 1)], [Math.tan(Math.PI * (p - 0.5))], 1e-13);
    expectRelative([student.quantile(p, 2)], [a * Math.sqrt(2 / (1 - a * a))], 1e-13);
  }
  expect(student.quantile(0.5, 7.3)).toBe(0);
});

test("degrees of freedom need not be whole", () => {
  const between = student.coverageFactor(0.95, 7.5);
  expect(between).toBeLessThan(student.coverageFactor(0.95, 7));
  expect(between).toBeGreaterThan(student.coverageFactor(0.95, 8));
});
