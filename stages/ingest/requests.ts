import type { LogFormat, LogsConfig, TimeColumn, ValueColumn } from "./config.js";

/** A number to read from each row of a log. */
export interface Reading {
  readonly column: ValueColumn;
  /** For messages: "a resistance in Ohm". */
  readonly what: string;
  /** "above zero": a number that is not is no reading. "not below zero": it is an error. */
  readonly bound?: "above zero" | "not below zero";
}

/** What to read for one log; several of them may share a file. */
export interface LogRequest {
  readonly log: "thermometer" | "heater" | "stage";
  readonly kind: "sampled" | "events";
  readonly time: TimeColumn;
  readonly readings: readonly Reading[];
  /** Columns that must be there, but are not read. */
  readonly present: readonly string[];
  readonly format: LogFormat;
}

function heaterRequest(heater: LogsConfig["heater"]): LogRequest {
  const current: Reading = { column: heater.current, what: `a current in ${heater.current.unit}` };
  const voltage: Reading = { column: heater.voltage, what: `a voltage in ${heater.voltage.unit}` };
  const common = { log: "heater", time: heater.time, present: [], format: heater.format } as const;
  if (heater.kind === "sampled") return { ...common, kind: "sampled", readings: [current, voltage] };
  const duration: Reading = {
    column: heater.duration,
    what: `a duration in ${heater.duration.unit}`,
    bound: "not below zero",
  };
  return { ...common, kind: "events", readings: [duration, current, voltage] };
}

/** The night's logs, file by file, so that each file is read once. Files are named as the configuration has them. */
export function requestsByFile(logs: LogsConfig): Map<string, LogRequest[]> {
  const { thermometer, heater, stage } = logs;
  const byFile = new Map<string, LogRequest[]>();
  const add = (file: string, request: LogRequest) => {
    const sharing = byFile.get(file);
    if (sharing === undefined) byFile.set(file, [request]);
    else sharing.push(request);
  };
  add(thermometer.file, {
    log: "thermometer",
    kind: "sampled",
    time: thermometer.time,
    readings: [
      {
        column: thermometer.resistance,
        what: `a resistance in ${thermometer.resistance.unit}`,
        bound: "above zero",
      },
    ],
    present: thermometer.excitation === undefined ? [] : [thermometer.excitation.column],
    format: thermometer.format,
  });
  add(heater.file, heaterRequest(heater));
  if (stage !== null)
    add(stage.file, {
      log: "stage",
      kind: "sampled",
      time: stage.time,
      readings: [
        {
          column: stage.temperature,
          what: `a temperature in ${stage.temperature.unit}`,
          bound: "above zero",
        },
      ],
      present: [],
      format: stage.format,
    });
  return byFile;
}
