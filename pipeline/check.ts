import type { LogSummary } from "../stages/ingest/types.js";
import { CAUTIONS } from "../stages/publish/cautions.js";
import type { CommonOptions, ExitCode } from "./cli/common.js";
import { loadCampaign } from "./config/campaign.js";
import type { Kind } from "./config/kind.js";
import {
  loadCell,
  loadRun,
  loadSample,
  loadScenario,
  loadThermometer,
  type Run,
  requireAnyKind,
} from "./config/load.js";
import { fillPressure } from "./fill-pressure.js";
import { consoleTeller } from "./progress.js";
import { readCalibration, readNight } from "./read-night.js";

/** What `check` found in one file. */
export interface CheckedFile {
  readonly file: string;
  readonly kind: Kind;
  /** For people, a line each. */
  readonly lines: readonly string[];
  readonly cautions: readonly string[];
  readonly logs: readonly (LogSummary & { readonly run: string; readonly pulses: number | null })[];
}

/** Reads a configuration and all that it names; computes nothing. @throws InputError for the first fault */
export async function checkFile(path: string): Promise<CheckedFile> {
  const kind = requireAnyKind(path);
  const found = { file: path, kind, cautions: [] as readonly string[], logs: [] as CheckedFile["logs"] };
  switch (kind) {
    case "campaign": {
      const campaign = loadCampaign(path);
      const calibration = await readCalibration(campaign.thermometer);
      const empty = campaign.addenda.kind === "runs" ? campaign.addenda.runs : [];
      const nights = [];
      for (const run of [...campaign.runs, ...empty]) nights.push(await checkRun(run));
      return {
        ...found,
        lines: [
          `campaign ${campaign.campaign}: ${campaign.runs.length} nights, ${empty.length} empty-cell nights`,
          rangeLine(calibration.temperatureRange_K, calibration.scale),
          ...nights.flatMap(({ lines }) => lines),
        ],
        cautions: [fillPressure(campaign.cell, campaign.sample).words, ...CAUTIONS],
        logs: nights.flatMap(({ logs }) => logs),
      };
    }
    case "run": {
      const night = await checkRun(loadRun(path));
      return { ...found, lines: night.lines, logs: night.logs };
    }
    case "thermometer": {
      const thermometer = loadThermometer(path);
      const calibration = await readCalibration(thermometer);
      return { ...found, lines: [rangeLine(calibration.temperatureRange_K, calibration.scale)] };
    }
    case "cell": {
      const { config } = loadCell(path);
      return { ...found, lines: [`cell ${config.cell}, ${config.volume.text}`], cautions: CAUTIONS };
    }
    case "sample": {
      const { config } = loadSample(path);
      return { ...found, lines: [`sample ${config.sample}, ${config.substance}`], cautions: CAUTIONS };
    }
    case "scenario":
      loadScenario(path);
      return { ...found, lines: ["scenario: complete"] };
  }
}

function rangeLine([from, to]: readonly [number, number], scale: string): string {
  return `thermometer calibrated from ${from.toPrecision(4)} K to ${to.toPrecision(4)} K, ${scale}`;
}

async function checkRun(run: Run): Promise<Pick<CheckedFile, "lines" | "logs">> {
  const raw = await readNight(run);
  const pulses = raw.heater.kind === "events" ? raw.heater.time_s.length : null;
  const logs = raw.summaries.map((summary) => ({
    ...summary,
    run: run.run,
    pulses: summary.log === "heater" ? pulses : null,
  }));
  const lines = logs.map((log) => {
    const gaps =
      log.gaps.length === 0 ? "no gaps" : `${log.gaps.length} gap${log.gaps.length === 1 ? "" : "s"}`;
    const events = log.pulses === null ? "" : `, ${log.pulses} pulses`;
    return `  ${run.run} ${log.log}: ${log.usable} of ${log.rows} rows usable, ${log.from_s.toFixed(1)} s to ${log.to_s.toFixed(1)} s, ${gaps}${events}`;
  });
  const notes = raw.notes.map(
    ({ file, line, count, text }) =>
      `    ${file}${line === undefined ? "" : `:${line}`}: ${text}${count > 1 ? ` (${count} times)` : ""}`,
  );
  return { lines: [...lines, ...notes], logs };
}

export async function checkCommandLine(options: CommonOptions, files: readonly string[]): Promise<ExitCode> {
  const teller = consoleTeller(options);
  const checked: CheckedFile[] = [];
  for (const file of files) {
    const found = await checkFile(file);
    checked.push(found);
    teller.say(`${found.file}: ${found.kind}, complete`);
    for (const line of found.lines) teller.say(line);
  }
  const cautions = [...new Set(checked.flatMap((found) => found.cautions))];
  if (cautions.length > 0) teller.say("\nCautions");
  for (const caution of cautions) teller.say(`  ${caution}`);
  teller.json({ files: checked });
  return 0;
}
