import { expect, test } from "vitest";
import { allowedBias, KINDS, night, summarise } from "./battery.mjs";

// `npm run bench battery` takes ten seeds of every kind; here one of each shows that nothing has broken.
const SEED = 1;

test.each(Object.keys(KINDS))("a night of this kind is read within what is stated: %s", async (kind) => {
  const judged = await night(kind, SEED);
  const found = summarise([judged]);
  expect(judged.rows.length).toBe(judged.wanted);
  expect(found.used).toBeGreaterThanOrEqual(0.3 * found.pulses);
  // n pulls of spread at most 1.4 scatter in the mean by 1.4/√n; three times that, and the bias a kind is allowed.
  const n = found.used;
  expect(Math.abs(found.pull)).toBeLessThan((3 * 1.4) / Math.sqrt(n) + allowedBias(found) / found.u);
  // χ² of n − 1 pulls of spread 1.4: beyond 1.4·(1 + 3/√(2(n − 1))) once in several hundred.
  expect(found.spread).toBeLessThan(1.4 * (1 + 3 / Math.sqrt(2 * (n - 1))));
});

test("the shared kind of night, a link of a minute and a boundary: C within 0.15 % above 0.4 K, 0.4 % below", async () => {
  for (const kind of ["leaky", "leaky, slow boundary"]) {
    const { rows } = await night(kind, 3);
    // Three standard uncertainties of the night's own noise stand beside what is asked of the method.
    for (const { T, error, u } of rows)
      expect(Math.abs(error)).toBeLessThan((T > 0.4 ? 1.5e-3 : 4e-3) + 3 * u);
  }
});
