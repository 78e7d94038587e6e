import { expect, test } from "vitest";
import { z } from "zod";
import { InputError } from "../../../stages/errors.js";
import { pcg32 } from "../../../stages/numerics/random.js";
import { scenarioSchema } from "../../../stages/simulate/config.js";
import { drawLaboratory } from "../../../stages/simulate/laboratory.js";
import { simulateScenario } from "../../../stages/simulate/simulate.js";
import { aScenario } from "./a-scenario.js";

const logs = (files: Map<string, string>) => files.get("try/one/thermometer.csv");

test("same seed, same bytes; other seed, other bytes", () => {
  const once = simulateScenario(aScenario(), pcg32);
  expect(simulateScenario(aScenario(), pcg32)).toEqual(once);
  expect(logs(simulateScenario(aScenario({ seed: 6 }), pcg32))).not.toBe(logs(once));
  expect(logs(simulateScenario(aScenario({}, { seed: 6 }), pcg32))).not.toBe(logs(once));
});

test("errors: none leaves every value as written", () => {
  const { cell, filling, calibrationError_K } = drawLaboratory(aScenario(), pcg32(1));
  expect(filling.amount_mol).toBe(0.05);
  expect(cell.leadResistance_Ohm).toBe(2.4);
  expect(cell.addenda[0]!.coefficient).toBe(0.15e-3);
  expect(calibrationError_K).toBe(0);
});

test("errors: drawn draws about the value written, with its ±", () => {
  const config = aScenario({ errors: "drawn" });
  const n = 2000;
  const laboratories = Array.from({ length: n }, (_, seed) => drawLaboratory(config, pcg32(seed)));
  const check = (values: number[], mean: number, u: number) => {
    const average = values.reduce((sum, x) => sum + x, 0) / n;
    const spread = Math.sqrt(values.reduce((sum, x) => sum + (x - average) ** 2, 0) / n);
    // Four standard deviations of either estimate: 4/√2000 and 4/√4000.
    expect(Math.abs(average - mean) / u).toBeLessThan(0.09);
    expect(Math.abs(spread / u - 1)).toBeLessThan(0.064);
  };
  check(
    laboratories.map(({ filling }) => filling.amount_mol),
    0.05,
    5e-4,
  );
  check(
    laboratories.map(({ cell }) => cell.leadResistance_Ohm),
    2.4,
    0.2,
  );
  check(
    laboratories.map(({ cell }) => cell.leadShare),
    0.5,
    0.1,
  );
  check(
    laboratories.map(({ cell }) => cell.addenda[0]!.coefficient),
    1.5e-4,
    1e-5,
  );
  check(
    laboratories.map(({ calibrationError_K }) => calibrationError_K),
    0,
    1e-3,
  );
});

test("what is drawn is common to all nights of a scenario", () => {
  const night = {
    run: "one",
    stage: { settings: ["0.5 K"], settle: "5 s" },
    pulses: { length: "5 s", wait: "5 s" },
  };
  const config = aScenario({ errors: "drawn", nights: [night, { ...night, run: "two" }] });
  const files = simulateScenario(config, pcg32);
  const truth = (run: string) => JSON.parse(files.get(`try/${run}/truth.json`)!);
  expect(truth("one").filling).toEqual(truth("two").filling);
  expect(truth("one").filling.amount_mol).not.toBe(0.05);
  expect(files.get("try/one/calibration.csv")).toBe(files.get("try/two/calibration.csv"));
  expect(files.get("try/one/thermometer.csv")).not.toBe(files.get("try/two/thermometer.csv"));
});

test("configurations beside the nights declare what was written, not what is true", () => {
  const files = simulateScenario(aScenario({ errors: "drawn" }), pcg32);
  expect(files.get("sip.yaml")).toContain("amount: 0.0500 ± 0.0005 mol\n");
  expect(files.get("campaign.yaml")).toContain("runs: try/*/run.yaml\n");
  const none = simulateScenario(aScenario({ configs: "none" }), pcg32);
  expect([...none.keys()].filter((file) => !file.includes("/"))).toEqual([]);
});

test("a cell that runs away is told by its night", () => {
  const hot = aScenario({}, { faults: { disturbances: [{ from: "1 s", to: "2 s", heat: "1 J" }] } });
  expect(() => simulateScenario(hot, pcg32)).toThrow(InputError);
  expect(() => simulateScenario(hot, pcg32)).toThrow(/^nights\.0 is "one"; expected a night that stays near/);
});

test("every key of a scenario is described, and an editor can be told", () => {
  const json = z.toJSONSchema(scenarioSchema, { io: "input", reused: "inline" });
  const bare: string[] = [];
  const walk = (node: unknown, path: string): void => {
    if (typeof node !== "object" || node === null) return;
    const { properties, anyOf, oneOf, items } = node as Record<string, unknown>;
    for (const [key, child] of Object.entries(
      (properties ?? {}) as Record<string, { description?: string }>,
    )) {
      if (child.description === undefined) bare.push(`${path}.${key}`);
      walk(child, `${path}.${key}`);
    }
    for (const child of [...((anyOf ?? oneOf ?? []) as unknown[]), items]) walk(child, path);
  };
  walk(json, "");
  expect(bare).toEqual([]);
});

test.each([
  [{ nights: [{ run: "a" }] }, "the stage's programme, here or in every_night"],
  [
    { every_night: { stage: { settings: ["0.5 K"] } }, nights: [{ run: "a" }, { run: "a" }] },
    "a name of its own for each night",
  ],
  [{ nights: [{ run: "a", stage: { settings: ["0.5 K"] }, format: { decimal: "," } }] }, "comma twice"],
])("refused: %j", (change, message) => {
  expect(() => aScenario(change)).toThrow(message);
});
