import { issueCalibration } from "./calibration.js";
import type { CompleteNight, ScenarioConfig } from "./config.js";
import { type LogColumn, timeColumn, writeLog } from "./dialect.js";
import { decimalsOf, printer } from "./digits.js";
import type { Laboratory } from "./laboratory.js";
import type { SimulatedNight } from "./night.js";
import { runFile } from "./run-file.js";
import type { Scenario } from "./scenario.js";
import { OVER_RANGE } from "./thermometer.js";
import { truthFile } from "./truth-file.js";

/** A night and all that is known of it. */
export interface ToldNight {
  readonly config: ScenarioConfig;
  readonly night: CompleteNight;
  readonly seed: number;
  readonly laboratory: Laboratory;
  readonly scenario: Scenario;
  readonly simulated: SimulatedNight;
}

/**
 * The files of one night: run.yaml, its logs, calibration.csv where the calibration is a table, truth.json.
 * @returns file name → content; the same night gives the same bytes everywhere
 */
export function writeNight(told: ToldNight): Map<string, string> {
  const { config, night, simulated, scenario, laboratory } = told;
  const { format, start } = night;
  const { thermometer, heater, stage } = simulated;
  const comments = (what: string) => [
    `${config.laboratory}, cell ${config.cell.cell}, ${night.filled ? `sample ${config.sample.sample}` : "empty"}`,
    `${what}; simulated, seed ${told.seed}`,
  ];
  const files = new Map<string, string>();
  files.set("run.yaml", runFile(night, simulated));

  const beside = stage !== null && format.files === "together" ? stage : null;
  const thermometerColumns = [
    timeColumn(format, start, thermometer.time_s),
    resistanceColumn(thermometer.resistance_Ohm, scenario.thermometer.resolution_Ohm),
    ...(beside === null ? [] : [stageColumn("T_stage", beside.temperature_K)]),
  ];
  files.set(
    "thermometer.csv",
    writeLog(
      format,
      comments(`thermometer ${config.thermometer.thermometer}, R in Ohm`),
      thermometerColumns,
      thermometer.time_s.length,
    ),
  );

  const { currentResolution_A, voltageResolution_V } = scenario.heater;
  const heaterColumns: LogColumn[] = [timeColumn(format, start, heater.time_s)];
  if (heater.kind === "events") heaterColumns.push(numberColumn("duration", heater.duration_s, 1, 3));
  heaterColumns.push(
    numberColumn("I", heater.current_A, 1e3, decimalsOf(currentResolution_A * 1e3)),
    numberColumn("V", heater.voltage_V, 1e3, decimalsOf(voltageResolution_V * 1e3)),
  );
  files.set(
    "heater.csv",
    writeLog(format, comments("heater, I in mA, V in mV"), heaterColumns, heater.time_s.length),
  );

  if (stage !== null && beside === null) {
    const columns = [timeColumn(format, start, stage.time_s), stageColumn("T", stage.temperature_K)];
    files.set("stage.csv", writeLog(format, comments("stage, T in K"), columns, stage.time_s.length));
  }
  const { table } = issueCalibration(config.thermometer, laboratory.calibrationError_K);
  if (table !== null) files.set("calibration.csv", table);
  files.set("truth.json", truthFile(night.run, told.seed, laboratory, scenario, simulated));
  return files;
}

function numberColumn(
  heading: string,
  values: Float64Array,
  factor: number,
  decimals: number | null,
): LogColumn {
  const print = printer(decimals);
  return { heading, kind: "number", row: (i) => print(values[i]! * factor) };
}

const stageColumn = (heading: string, T_K: Float64Array) => numberColumn(heading, T_K, 1, 5);

function resistanceColumn(R_Ohm: Float64Array, resolution_Ohm: number): LogColumn {
  const print = printer(decimalsOf(resolution_Ohm));
  const row = (i: number) => (R_Ohm[i] === OVER_RANGE ? "9.9E37" : print(R_Ohm[i]!));
  return { heading: "R", kind: "number", row };
}
