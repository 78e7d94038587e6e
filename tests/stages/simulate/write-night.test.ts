import { expect, test } from "vitest";
import { parse } from "yaml";
import { readLogFile } from "../../../stages/ingest/columns.js";
import { runSchema } from "../../../stages/ingest/config.js";
import { assembleNight } from "../../../stages/ingest/night.js";
import { requestsByFile } from "../../../stages/ingest/requests.js";
import { pcg32 } from "../../../stages/numerics/random.js";
import { tellNights } from "../../../stages/simulate/simulate.js";
import { writeNight } from "../../../stages/simulate/write-night.js";
import { aScenario } from "./a-scenario.js";

function written(night: object) {
  const told = tellNights(aScenario({}, night), pcg32)[0]!;
  return { told, files: writeNight(told) };
}

async function readBack(files: ReadonlyMap<string, string>) {
  const run = runSchema.parse(parse(files.get("run.yaml")!));
  const logs = [];
  for (const [file, requests] of requestsByFile(run.logs)) {
    logs.push(...(await readLogFile(new TextEncoder().encode(files.get(file)!), file, requests)));
  }
  return { run, night: assembleNight(logs, run) };
}

/** Apart by no more than half the last digit printed, and rounding. */
function expectSame(actual: Float64Array, expected: Float64Array, digit: number): void {
  expect(actual.length).toBe(expected.length);
  for (let i = 0; i < expected.length; i++) {
    expect(Math.abs(actual[i]! - expected[i]!)).toBeLessThanOrEqual(0.501 * digit);
  }
}

// Each dialect is read back by the stage that reads real logs: what was told is what is found.
test.each([
  ["plain", {}],
  [
    "semicolons, decimal commas, ISO times, CRLF",
    { delimiter: ";", decimal: ",", newline: "crlf", time: "iso8601" },
  ],
  ["tabs, ms, byte order mark", { delimiter: "tab", time: "ms", byte_order_mark: true }],
  ["comments, epoch, stage beside", { comments: true, time: "epoch", files: "together" }],
  ["quotes, decimal comma, epoch in ms", { quotes: true, decimal: ",", time: "epoch-ms" }],
  ["spaces", { delimiter: "space" }],
  ["bars", { delimiter: "|", decimal: "," }],
])("%s", async (_, format) => {
  for (const kind of ["events", "sampled"]) {
    const { told, files } = written({
      format,
      heater_log: { kind, current_offset: "0.4 nA" },
      stage_log: { every: 7 },
    });
    const { night } = await readBack(files);
    const { thermometer, heater, stage } = told.simulated;
    // Unix times hold 2e-7 s; the rest is digits: ms, 0.01 Ohm, 0.1 nA, 0.1 µV, 10 µK.
    expectSame(night.thermometer.time_s, thermometer.time_s, 1e-6);
    expectSame(night.thermometer.resistance_Ohm, thermometer.resistance_Ohm, 1e-9);
    expectSame(night.heater.time_s, heater.time_s, 1e-6);
    expectSame(night.heater.current_A, heater.current_A, 1e-15);
    expectSame(night.heater.voltage_V, heater.voltage_V, 1e-12);
    if (night.heater.kind === "events" && heater.kind === "events") {
      expectSame(night.heater.duration_s, heater.duration_s, 1e-9);
    }
    expect(night.heater.kind).toBe(kind);
    expectSame(night.stage!.temperature_K, stage!.temperature_K, 1e-5);
  }
});

test("a night as text", () => {
  const { files } = written({
    clock: { heater_offset: "0.35 ± 0.05 s", in_run: "declared" },
    stage_log: { every: 0 },
    format: { comments: true },
    exclude: [{ from: "3 s", to: "4 s", reason: "door: slammed" }],
    veto: [{ pulse: 2, reason: "helium transfer" }],
  });
  expect([...files.keys()].sort()).toEqual([
    "calibration.csv",
    "heater.csv",
    "run.yaml",
    "thermometer.csv",
    "truth.json",
  ]);
  expect(files.get("run.yaml")).toBe(`run: one
logs:
  thermometer:
    file: thermometer.csv
    time: { column: t, unit: s }
    resistance: { column: R, unit: Ohm }
  heater:
    file: heater.csv
    kind: events
    time: { column: t, unit: s }
    duration: { column: duration, unit: s }
    current: { column: I, unit: mA }
    voltage: { column: V, unit: mV }
clock: { heater_offset: 0.35 ± 0.05 s }
exclude:
  - { from: 3 s, to: 4 s, reason: "door: slammed" }
veto:
  - { pulse: 2, reason: helium transfer }
`);
  const lines = files.get("thermometer.csv")!.split("\n");
  expect(lines.slice(0, 3)).toEqual([
    "# Skerry Point, cell acorn, sample sip",
    "# thermometer ge-4, R in Ohm; simulated, seed 5001",
    "t,R",
  ]);
  expect(lines[3]).toMatch(/^0\.000,\d{4}\.\d{2}$/);
});

test("over-range and negative readings are written as instruments write them", () => {
  const { files } = written({
    faults: { over_range: 0.2 },
    heater_log: { kind: "sampled", voltage_offset: "-3 µV", current_noise: "0.01 nA" },
    format: { decimal: ",", delimiter: ";" },
  });
  expect(files.get("thermometer.csv")).toMatch(/;9,9E37\n/);
  expect(files.get("heater.csv")).toMatch(/;-0,0030\n/);
  expect(files.get("heater.csv")).not.toMatch(/-0,0+;/);
});

test("truth.json holds what is true", () => {
  const { told, files } = written({});
  const truth = JSON.parse(files.get("truth.json")!);
  expect(truth.filling).toMatchObject({ amount_mol: 0.05, sound_speed_m_per_s: 238.3, roton_gap_K: 8.608 });
  expect(truth.addenda).toEqual([{ coefficient: 1.5e-4, power: 1 }]);
  expect(truth.pulses.pulse).toEqual([1, 2]);
  for (const [i, Q] of truth.pulses.Q_J.entries()) {
    expect(Math.abs(Q / told.simulated.truth.pulses.Q_J[i]! - 1)).toBeLessThan(1e-8); // nine digits
  }
  expect(truth.heat_capacity.T_K).toHaveLength(truth.heat_capacity.Cv_J_per_mol_K.length);
});
