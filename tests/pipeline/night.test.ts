import { join } from "node:path";
import { expect, test } from "vitest";
import { loadCell, loadRun } from "../../pipeline/config/load.js";
import { reduceNight } from "../../pipeline/night.js";
import { readCalibration, readNight } from "../../pipeline/read-night.js";
import type { Contents } from "../../stages/pulses/cell-laws.js";
import { heaterSchema, pulsesSchema } from "../../stages/pulses/config.js";
import { ROOT } from "./program.js";

async function demoNight(heater: object, pulses: object = {}) {
  const contents: Contents = { kind: "filled", body: null };
  const run = loadRun(join(ROOT, "fixtures/nights/fjord-7/2026-11-14-a/run.yaml"));
  const cell = loadCell(join(ROOT, "configs/cells/thimble.yaml"));
  const raw = await readNight(run);
  const calibration = await readCalibration(cell.thermometer);
  const edited = { ...cell, config: { ...cell.config, heater: heaterSchema.parse(heater) } };
  return { raw, night: reduceNight(raw, calibration, run, edited, pulsesSchema.parse(pulses), contents) };
}

test("a lead quantity of 0 with a ± keeps its source", async () => {
  const source = async (heater: object, name: string) => {
    const { night } = await demoNight(heater);
    return Math.max(...night.heatSources.find((each) => each.name === name)!.relative);
  };
  // A heater of 1 kΩ: 2.4 Ω of leads add 2.4e-3 of the heat if all of it flows in, so 0.1 of it is 2.4e-4. The
  // heater's own resistance as read is within 1 % of 1 kΩ.
  const share = await source({ lead_resistance: "2.4 Ohm", lead_share: "0 ± 0.1" }, "lead_share");
  expect(Math.abs(share / 2.4e-4 - 1)).toBeLessThan(0.01);
  const resistance = await source({ lead_resistance: "0 ± 2 Ohm", lead_share: "0.5" }, "lead_resistance");
  expect(Math.abs(resistance / 1e-3 - 1)).toBeLessThan(0.01);
});
