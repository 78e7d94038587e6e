import { createReadStream } from "node:fs";
import type { LogColumns } from "../stages/ingest/columns.js";
import { readLogFile } from "../stages/ingest/columns.js";
import { assembleNight } from "../stages/ingest/night.js";
import { requestsByFile } from "../stages/ingest/requests.js";
import { readTable } from "../stages/ingest/table.js";
import type { RawNight } from "../stages/ingest/types.js";
import { calibrationOf } from "../stages/thermometry/calibration.js";
import type { Calibration } from "../stages/thermometry/types.js";
import type { Run, Thermometer } from "./config/load.js";
import type { Located } from "./config/located.js";

const PIECE_BYTES = 64 * 1024;

/** Log files of a run, each once. */
export function logFiles(run: Run): Located[] {
  const { thermometer, heater, stage } = run.logs;
  const all = [thermometer, heater, ...(stage === null ? [] : [stage])];
  return all.filter((file, i) => all.findIndex(({ path }) => path === file.path) === i);
}

/** @throws InputError naming file, line, column and a way out */
export async function readNight(run: Run): Promise<RawNight> {
  const columns: LogColumns[] = [];
  const { thermometer, heater, stage } = run.logs;
  const { logs } = run.config;
  const placeOf = new Map<string, Located>([
    [logs.thermometer.file, thermometer],
    [logs.heater.file, heater],
  ]);
  if (stage !== null && logs.stage !== null) placeOf.set(logs.stage.file, stage);
  for (const [file, requests] of requestsByFile(logs)) {
    const place = placeOf.get(file) ?? thermometer;
    const stream = createReadStream(place.path, { highWaterMark: PIECE_BYTES });
    columns.push(...(await readLogFile(stream as AsyncIterable<Uint8Array>, place.shown, requests)));
  }
  return assembleNight(columns, run.config);
}

/** @throws InputError if the calibration is no monotonic curve */
export async function readCalibration(thermometer: Thermometer): Promise<Calibration> {
  const { calibration } = thermometer.config;
  if (calibration.form !== "table" || thermometer.table === null)
    return calibrationOf(thermometer.config, null);
  const { path, shown } = thermometer.table;
  const stream = createReadStream(path) as AsyncIterable<Uint8Array>;
  const wanted = [calibration.temperature, calibration.resistance];
  const { columns, line } = await readTable(stream, shown, wanted, calibration.format);
  const [temperature_K, resistance_Ohm] = columns;
  return calibrationOf(thermometer.config, {
    file: shown,
    line,
    temperature_K: temperature_K!,
    resistance_Ohm: resistance_Ohm!,
  });
}
