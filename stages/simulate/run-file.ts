import type { CompleteNight } from "./config.js";
import type { SimulatedNight } from "./night.js";
import { indented, yamlText } from "./yaml-text.js";

/** run.yaml of one night. */
export function runFile(night: CompleteNight, simulated: SimulatedNight): string {
  const { format, clock } = night;
  const time = `{ column: t, unit: ${format.time} }`;
  const heater = simulated.heater.kind;
  const together = format.files === "together";
  const lines = [
    `run: ${yamlText(night.run)}`,
    "logs:",
    "  thermometer:",
    "    file: thermometer.csv",
    `    time: ${time}`,
    "    resistance: { column: R, unit: Ohm }",
    "  heater:",
    "    file: heater.csv",
    `    kind: ${heater}`,
    `    time: ${time}`,
    ...(heater === "events" ? ["    duration: { column: duration, unit: s }"] : []),
    "    current: { column: I, unit: mA }",
    "    voltage: { column: V, unit: mV }",
  ];
  if (simulated.stage !== null) {
    lines.push(
      "  stage:",
      `    file: ${together ? "thermometer.csv" : "stage.csv"}`,
      `    time: ${time}`,
      `    temperature: { column: ${together ? "T_stage" : "T"}, unit: K }`,
    );
  }
  lines.push(
    `clock: { heater_offset: ${clock.in_run === "auto" ? "auto" : yamlText(clock.heater_offset.text)} }`,
  );
  if (night.exclude.length > 0) {
    const spans = night.exclude.map(
      ({ from, to, reason }) =>
        `- { from: ${yamlText(from.text)}, to: ${yamlText(to.text)}, reason: ${yamlText(reason)} }`,
    );
    lines.push("exclude:", ...indented(spans));
  }
  if (night.veto.length > 0) {
    const pulses = night.veto.map(
      ({ pulse, reason }) => `- { pulse: ${pulse}, reason: ${yamlText(reason)} }`,
    );
    lines.push("veto:", ...indented(pulses));
  }
  return `${lines.join("\n")}\n`;
}
