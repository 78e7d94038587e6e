import type { IssuedCalibration } from "./calibration.js";
import { completeNight, type ScenarioConfig } from "./config.js";
import { settings_K } from "./laboratory.js";
import { indented, yamlText } from "./yaml-text.js";

/** Folder of a night, below that of the scenario: filled nights by campaign, empty ones by cell. */
export function folderOf(config: ScenarioConfig, night: { readonly filled: boolean }): string {
  return night.filled ? config.scenario : `${config.cell.cell}-empty`;
}

/**
 * Campaign, cell, sample and thermometer as the laboratory would declare them, ± and all; what is true is not in them.
 * @returns file name → content
 */
export function configFiles(config: ScenarioConfig, calibration: IssuedCalibration): Map<string, string> {
  const { cell, sample, thermometer } = config;
  const files = new Map<string, string>();
  const set = (file: string, lines: readonly string[]) => files.set(file, `${lines.join("\n")}\n`);
  const tableFile = `${thermometer.thermometer}.csv`;
  set("campaign.yaml", campaignLines(config));
  set(`${cell.cell}.yaml`, [
    `cell: ${yamlText(cell.cell)}`,
    `volume: ${yamlText(cell.volume.text)}`,
    ...optional("dead_volume", cell.dead_volume?.text),
    ...optional("relief_pressure", cell.relief_pressure?.text),
    `thermometer: ${thermometer.thermometer}.yaml`,
    "heater:",
    `  lead_resistance: ${yamlText(cell.heater.lead_resistance.text)}`,
    `  lead_share: ${yamlText(cell.heater.lead_share.text)}`,
    `  current_gain: ${yamlText(cell.heater.current_gain.text)}`,
    `  voltage_gain: ${yamlText(cell.heater.voltage_gain.text)}`,
  ]);
  set(`${sample.sample}.yaml`, [
    `sample: ${yamlText(sample.sample)}`,
    "substance: helium-4",
    `amount: ${yamlText(sample.amount.text)}`,
    `condition: ${sample.vapour_space === undefined ? "constant-volume" : "saturated-vapour"}`,
    ...optional("vapour_space", sample.vapour_space?.text),
    `molar_volume: ${yamlText(sample.molar_volume.text)}`,
  ]);
  set(`${thermometer.thermometer}.yaml`, [
    `thermometer: ${yamlText(thermometer.thermometer)}`,
    `scale: ${yamlText(thermometer.scale)}`,
    "calibration:",
    ...indented(calibration.yaml(tableFile)),
  ]);
  if (calibration.table !== null) files.set(tableFile, calibration.table);
  return files;
}

const optional = (key: string, text: string | undefined) =>
  text === undefined ? [] : [`${key}: ${yamlText(text)}`];

function campaignLines(config: ScenarioConfig): string[] {
  const { cell, sample, nights } = config;
  const lines = [
    `campaign: ${yamlText(config.scenario)}`,
    `cell: ${cell.cell}.yaml`,
    `sample: ${sample.sample}.yaml`,
    `runs: ${folderOf(config, { filled: true })}/*/run.yaml`,
  ];
  if (nights.some(({ filled }) => !filled)) {
    lines.push("addenda:", `  runs: ${folderOf(config, { filled: false })}/*/run.yaml`);
  } else if (cell.parts.length > 0) {
    const parts = cell.parts.map(
      ({ material, mass }) => `- { material: ${yamlText(material)}, mass: ${yamlText(mass.text)} }`,
    );
    lines.push("addenda:", "  parts:", ...indented(indented(parts)));
  }
  const window = windowOf(config);
  if (window !== null) {
    lines.push("reduction:", `  separate: { window: ["${window[0]} K", "${window[1]} K"] }`);
  }
  return lines;
}

/** The part of the usual window that the nights cover, where it is not the whole. */
function windowOf(config: ScenarioConfig): [number, number] | null {
  const filled = config.nights.filter(({ filled }) => filled).map((night) => completeNight(config, night));
  const lowest = Math.min(...filled.flatMap(({ stage }) => settings_K(stage.settings)));
  const highest = Math.max(
    ...filled.map(
      ({ stage, pulses }) =>
        Math.max(...settings_K(stage.settings)) * (1 + pulses.rise) ** pulses.per_setting,
    ),
  );
  const from = Math.max(0.35, Math.ceil(100 * lowest) / 100);
  const to = Math.min(1.15, Math.floor(100 * highest) / 100);
  return from === 0.35 && to === 1.15 ? null : [from, to];
}
