// A whole night of 4 million thermometer rows and 1,000 pulses as a user runs it, beside a plain read of the bytes.
import { spawnSync } from "node:child_process";
import { closeSync, createReadStream, openSync, statSync, writeFileSync, writeSync } from "node:fs";
import { join, resolve } from "node:path";

export const title = "rotonwell reduce on 4 million rows (150 MB) and 1,000 pulses; the time of --help";
export const repeats = 3;

const ROWS = 4_000_000;
const INTERVAL_S = 0.05;
const PULSES = 1_000;
const SPACING_S = (ROWS * INTERVAL_S) / PULSES;
const MAIN = resolve(import.meta.dirname, "../../dist/pipeline/cli/main.js");

/** ln T = 4 − 0.5 ln R, so R = (e⁴/T)². */
const resistance = (T) => (Math.exp(4) / T) ** 2;

export function prepare(folder) {
  let state = 1;
  const noise = () => {
    state = (state * 1664525 + 1013904223) >>> 0;
    return state / 2 ** 32 - 0.5;
  };
  const file = join(folder, "thermometer.csv");
  const out = openSync(file, "w");
  let text = "t,R,Tstage\n";
  for (let i = 0; i < ROWS; i++) {
    const t = i * INTERVAL_S;
    const k = Math.floor(t / SPACING_S);
    const phase = t - (k + 0.5) * SPACING_S;
    // Ten cold ends a night; each pulse lifts 1 %, then the cell relaxes by a tenth of it.
    const step = phase < 0 ? 0 : phase < 4 ? phase / 4 : Math.exp(-(phase - 4) / 1000);
    const T = 0.35 * 1.01 ** ((k % 100) + step) * (1 + 2e-5 * noise());
    text += `${t.toFixed(3)},${resistance(T).toFixed(6)},${(0.35 * 1.01 ** (k % 100)).toFixed(15)}\n`;
    if (text.length > 1 << 20) {
      writeSync(out, text);
      text = "";
    }
  }
  writeSync(out, text);
  closeSync(out);
  const pulses = Array.from({ length: PULSES }, (_, k) => `${((k + 0.5) * SPACING_S).toFixed(3)},4,0.05,50`);
  writeFileSync(join(folder, "heater.csv"), ["t,duration,I,V", ...pulses].join("\n"));
  const log = (name) => `{ file: ${name}.csv, time: { column: t, unit: s }`;
  writeFileSync(
    join(folder, "run.yaml"),
    `run: long\nlogs:\n  thermometer: ${log("thermometer")}, resistance: { column: R, unit: Ohm } }\n` +
      `  heater: ${log("heater")}, kind: events, duration: { column: duration, unit: s }, current: { column: I, unit: mA }, voltage: { column: V, unit: mV } }\n` +
      `  stage: ${log("thermometer")}, temperature: { column: Tstage, unit: K } }\n`,
  );
  writeFileSync(
    join(folder, "thermometer.yaml"),
    "thermometer: law\nscale: ITS-90\ncalibration: { form: log-polynomial, coefficients: [4, -0.5], resistance_range: [100 Ohm, 100 kOhm], standard_uncertainty: 0.1 mK }\n",
  );
  writeFileSync(join(folder, "cell.yaml"), "cell: bench\nvolume: 3 cm3\nthermometer: thermometer.yaml\n");
  return { folder, file, bytes: statSync(file).size };
}

/** A child's own peak is what counts; this process only waits. */
function run(args) {
  const peak = "process.on('exit', () => console.error('PEAK', process.resourceUsage().maxRSS))";
  const done = spawnSync(
    process.execPath,
    ["--import", `data:text/javascript,${encodeURIComponent(peak)}`, MAIN, ...args],
    {
      encoding: "utf8",
      maxBuffer: 1 << 28,
    },
  );
  if (done.status !== 0) throw new Error(done.stderr);
  return { peakMB: Number(/PEAK (\d+)/.exec(done.stderr)[1]) / 1024 };
}

export const cases = {
  "plain read of the bytes": async ({ file, bytes }) => {
    let seen = 0;
    for await (const chunk of createReadStream(file, { highWaterMark: 65_536 })) seen += chunk.length;
    if (seen !== bytes) throw new Error(`read ${seen} of ${bytes} bytes`);
    return { rows: ROWS, bytes };
  },
  "reduce, 1,000 pulses": async ({ folder, bytes }) => {
    const at = (name) => join(folder, `${name}.yaml`);
    const { peakMB } = run([
      "reduce",
      at("run"),
      "--cell",
      at("cell"),
      "--out",
      join(folder, "points.csv"),
      "--quiet",
    ]);
    return { rows: ROWS, bytes, peakMB };
  },
  "--help": async () => run(["--help"]),
};
