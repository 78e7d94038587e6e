import { Defect, InputError } from "../../stages/errors.js";
import type { RunConfig } from "../../stages/ingest/config.js";
import type { CellConfig, SampleConfig } from "../../stages/molar/config.js";
import type { ScenarioConfig } from "../../stages/simulate/config.js";
import type { ThermometerConfig } from "../../stages/thermometry/config.js";
import { readDocument } from "./document.js";
import type { Kind } from "./kind.js";
import { likelyKind } from "./likely-kind.js";
import { type Located, located } from "./located.js";
import { readConfig } from "./read-config.js";

export interface Thermometer {
  readonly file: Located;
  readonly config: ThermometerConfig;
  /** The calibration table, where the calibration has that form. */
  readonly table: Located | null;
}

export interface Cell {
  readonly file: Located;
  readonly config: CellConfig;
  readonly thermometer: Thermometer;
}

export interface Sample {
  readonly file: Located;
  readonly config: SampleConfig;
}

export interface Scenario {
  readonly file: Located;
  readonly config: ScenarioConfig;
}

export interface Run {
  readonly file: Located;
  /** The night's name: `run` in its file. */
  readonly run: string;
  readonly config: RunConfig;
  readonly logs: { readonly thermometer: Located; readonly heater: Located; readonly stage: Located | null };
}

/*
 * Each loader takes a path as typed, or a place found in another file, and throws InputError with file, line, key,
 * value, what was expected and a way out. Files named are looked for, not read.
 */

export function loadThermometer(path: string | Located): Thermometer {
  const file = toLocated(path);
  const { config, fileAt } = readConfig(file, "thermometer");
  const table = config.calibration.form === "table" ? fileAt(["calibration", "file"]) : null;
  return { file, config, table };
}

/** A cell with its thermometer. */
export function loadCell(path: string | Located): Cell {
  const file = toLocated(path);
  const { config, fileAt } = readConfig(file, "cell");
  return { file, config, thermometer: loadThermometer(fileAt(["thermometer"])) };
}

export function loadSample(path: string | Located): Sample {
  const file = toLocated(path);
  return { file, config: readConfig(file, "sample").config };
}

export function loadRun(path: string | Located): Run {
  const file = toLocated(path);
  const { config, fileAt } = readConfig(file, "run");
  return {
    file,
    run: config.run,
    config,
    logs: {
      thermometer: fileAt(["logs", "thermometer", "file"]),
      heater: fileAt(["logs", "heater", "file"]),
      stage: config.logs.stage === null ? null : fileAt(["logs", "stage", "file"]),
    },
  };
}

export function loadScenario(path: string | Located): Scenario {
  const file = toLocated(path);
  return { file, config: readConfig(file, "scenario").config };
}

/**
 * A sample must fit into its cell.
 * @throws InputError naming the sample's file
 */
export function requireFit(cell: Cell, sample: Sample): void {
  const { volume } = cell.config;
  const { condition, vapour_space } = sample.config;
  if (condition !== "saturated-vapour") return;
  if (vapour_space === undefined)
    throw new Defect("saturated vapour without a vapour space passed the schema");
  if (vapour_space.value < volume.value) return;
  throw readConfig(sample.file, "sample").fault(
    ["vapour_space"],
    `a volume below that of the cell, ${volume.text} in ${cell.file.shown}`,
    "give the volume above the liquid, or mend the cell's volume",
  );
}

/**
 * The kind of a configuration file, or null for one that has none of the telling keys.
 * @throws InputError if the file cannot be read as YAML
 */
export function detectKind(path: string): Kind | null {
  return likelyKind(readDocument(located(path)).keys);
}

function toLocated(path: string | Located): Located {
  return typeof path === "string" ? located(path) : path;
}

/** As {@link detectKind}, but a file that is no configuration at all is refused. */
export function requireAnyKind(path: string): Kind {
  const kind = detectKind(path);
  if (kind !== null) return kind;
  throw new InputError({
    file: path,
    expected: "a key campaign, cell, sample, thermometer, run or scenario at the beginning of a line",
    wayOut: "see `rotonwell schema` for the keys of each kind of file",
  });
}
