import { readLogFile } from "../../../stages/ingest/columns.js";
import type { LogFormat, LogsConfig, RunConfig, TimeColumn } from "../../../stages/ingest/config.js";
import type { LogSource } from "../../../stages/ingest/encoding.js";
import { assembleNight } from "../../../stages/ingest/night.js";
import { requestsByFile } from "../../../stages/ingest/requests.js";
import type { RawNight } from "../../../stages/ingest/types.js";

export const auto: LogFormat = { delimiter: "auto", decimal: "auto", comment: "#", gap_words: [] };

export interface Night {
  readonly thermometer: LogSource;
  readonly heater?: LogSource;
  readonly stage?: LogSource;
  readonly time?: Partial<TimeColumn>;
  readonly heaterTime?: Partial<TimeColumn>;
  readonly format?: Partial<LogFormat>;
  readonly resistance?: LogsConfig["thermometer"]["resistance"];
  readonly sampled?: boolean;
  readonly excitation?: string;
  readonly exclude?: RunConfig["exclude"];
  /** Names of the files; logs of one name share the thermometer's file. */
  readonly files?: { readonly heater?: string; readonly stage?: string };
}

export function elapsed(from_s: number, to_s: number): RunConfig["exclude"][number] {
  return {
    from: { kind: "elapsed", time_s: from_s, text: `${from_s} s` },
    to: { kind: "elapsed", time_s: to_s, text: `${to_s} s` },
    reason: "helium transfer",
  };
}

/** Reads a small night as the pipeline does: file by file, then all together. */
export async function nightOf(given: Night): Promise<RawNight> {
  const format = { ...auto, ...given.format };
  const time: TimeColumn = { column: "t", unit: "s", zone: "UTC", ...given.time };
  const heaterTime: TimeColumn = { ...time, ...given.heaterTime };
  const current = { column: "I", unit: "mA", factor: 1e-3 };
  const voltage = { column: "V", unit: "mV", factor: 1e-3 };
  const file = given.files?.heater ?? "heater.csv";
  const logs: LogsConfig = {
    thermometer: {
      file: "thermometer.csv",
      time,
      resistance: given.resistance ?? { column: "R", unit: "Ohm", factor: 1 },
      excitation:
        given.excitation === undefined ? undefined : { column: given.excitation, unit: "V", factor: 1 },
      format,
    },
    heater: given.sampled
      ? { kind: "sampled", file, time: heaterTime, current, voltage, format }
      : {
          kind: "events",
          file,
          time: heaterTime,
          duration: { column: "duration", unit: "s", factor: 1 },
          current,
          voltage,
          format,
        },
    stage:
      given.stage === undefined && given.files?.stage === undefined
        ? null
        : {
            file: given.files?.stage ?? "stage.csv",
            time,
            temperature: { column: "Tstage", unit: "K", factor: 1 },
            format,
          },
  };
  const sources: Record<string, LogSource | undefined> = {
    "heater.csv": given.heater ?? "t,duration,I,V\n1,2,3,4\n",
    "stage.csv": given.stage,
    "thermometer.csv": given.thermometer,
  };
  const columns = [];
  for (const [name, requests] of requestsByFile(logs))
    columns.push(...(await readLogFile(sources[name]!, name, requests)));
  return assembleNight(columns, { exclude: given.exclude ?? [] });
}
