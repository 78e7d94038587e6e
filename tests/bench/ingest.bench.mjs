// A night of 4 million thermometer rows: from bytes to columns to temperature, beside a plain read of the same bytes.
import { closeSync, createReadStream, openSync, statSync, writeSync } from "node:fs";
import { join } from "node:path";
import { readLogFile } from "../../dist/stages/ingest/columns.js";
import { assembleNight } from "../../dist/stages/ingest/night.js";
import { calibrationTable } from "../../dist/stages/thermometry/calibration-table.js";
import { selfHeatingOf } from "../../dist/stages/thermometry/self-heating.js";
import { toTemperature } from "../../dist/stages/thermometry/to-temperature.js";

const germanium = () => ({ ...calibrationTable(curve()), selfHeating: null });

/** A nA through kOhm, on a mount of 2e9 K/W at 0.5 K: some 10⁻⁴ of T and below. */
const WARM = {
  current: { value: 1e-9, u: 0 },
  thermal_resistance: { value: 2e9, u: 0 },
  at: { value: 0.5, u: 0 },
  power_law: -3,
};

export const title = "4 million rows of t, R, Tstage to columns and temperature";
export const repeats = 5;

const ROWS = 4_000_000;

/** Small repeatable noise, 0…1 (Numerical Recipes' quick generator); its quality does not matter here. */
function noise() {
  let state = 12345;
  return () => {
    state = (state * 1664525 + 1013904223) >>> 0;
    return state / 2 ** 32;
  };
}

export function prepare(folder) {
  const file = join(folder, "thermometer.csv");
  const random = noise();
  const out = openSync(file, "w");
  let text = "t,R,Tstage\n";
  for (let i = 0; i < ROWS; i++) {
    const resistance = 8000 - 7000 * (i / ROWS) + 0.3 * random();
    text += `${(i * 0.01).toFixed(4)},${resistance.toFixed(7)},${(0.35 + 1e-4 * random()).toFixed(6)}\n`;
    if (text.length > 1 << 20) {
      writeSync(out, text);
      text = "";
    }
  }
  writeSync(out, text);
  closeSync(out);
  return { file, bytes: statSync(file).size };
}

const format = { delimiter: "auto", decimal: "auto", comment: "#", gap_words: [] };
const time = { column: "t", unit: "s", zone: "UTC" };
const thermometer = {
  log: "thermometer",
  kind: "sampled",
  time,
  readings: [
    { column: { column: "R", unit: "Ohm", factor: 1 }, what: "a resistance in Ohm", bound: "above zero" },
  ],
  present: [],
  format,
};
const stage = {
  ...thermometer,
  log: "stage",
  readings: [
    { column: { column: "Tstage", unit: "K", factor: 1 }, what: "a temperature in K", bound: "above zero" },
  ],
};
const heater = {
  log: "heater",
  kind: "events",
  time,
  readings: ["duration", "I", "V"].map((column) => ({
    column: { column, unit: "", factor: 1 },
    what: column,
  })),
  present: [],
  format,
};

/** A germanium-like curve, ln T against ln R, of 60 points. */
function curve() {
  const n = 60;
  const resistance_Ohm = Float64Array.from({ length: n }, (_, i) => 900 * (30_000 / 900) ** (i / (n - 1)));
  return {
    file: "curve.csv",
    line: Int32Array.from({ length: n }, (_, i) => i + 2),
    resistance_Ohm,
    temperature_K: resistance_Ohm.map((r) => Math.exp(6 - 0.9 * Math.log(r) + 0.02 * Math.log(r) ** 2)),
  };
}

const stream = (file) => createReadStream(file, { highWaterMark: 65_536 });

async function toNight(file) {
  const logs = await readLogFile(stream(file), "thermometer.csv", [thermometer, stage]);
  const pulses = await readLogFile("t,duration,I,V\n100,4,0.1,0.1\n", "heater.csv", [heater]);
  return assembleNight([...logs, ...pulses], { exclude: [] });
}

export const cases = {
  "plain read of the bytes": async ({ file, bytes }) => {
    let seen = 0;
    for await (const chunk of stream(file)) seen += chunk.length;
    if (seen !== bytes) throw new Error(`read ${seen} of ${bytes} bytes`);
    return { rows: ROWS, bytes };
  },
  "to columns": async ({ file, bytes }) => {
    const [log] = await readLogFile(stream(file), "thermometer.csv", [thermometer, stage]);
    return { rows: log.time_s.length, bytes };
  },
  "to a night": async ({ file, bytes }) => {
    const night = await toNight(file);
    return { rows: night.thermometer.time_s.length, bytes };
  },
  "to temperature": async ({ file, bytes }) => {
    const night = await toNight(file);
    const trace = toTemperature(night.thermometer, germanium());
    return { rows: trace.time_s.length, bytes };
  },
  "temperature alone": async () => temperatureAlone(germanium()),
  "temperature alone, self-heating taken off": async () =>
    temperatureAlone({ ...germanium(), selfHeating: selfHeatingOf(WARM) }),
};

function temperatureAlone(calibration) {
  const time_s = Float64Array.from({ length: ROWS }, (_, i) => i * 0.01);
  const random = noise();
  const resistance_Ohm = time_s.map((_, i) => 8000 - 7000 * (i / ROWS) + 0.3 * random());
  toTemperature({ time_s, resistance_Ohm, flag: new Uint8Array(ROWS) }, calibration);
  return { rows: ROWS };
}
