// Kinds of night, simulated with known truth and reduced by the program itself: files written, read, reduced.
import { mkdirSync, mkdtempSync, rmSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { dirname, join } from "node:path";
import { loadCell, loadRun } from "../../dist/pipeline/config/load.js";
import { heliumShape, reduceRun } from "../../dist/pipeline/index.js";
import { pcg32 } from "../../dist/stages/numerics/random.js";
import { pulsesSchema } from "../../dist/stages/pulses/config.js";
import { issueCalibration } from "../../dist/stages/simulate/calibration.js";
import { scenarioSchema } from "../../dist/stages/simulate/config.js";
import { configFiles, folderOf } from "../../dist/stages/simulate/config-files.js";
import {
  addendaHeat_J_per_K,
  heatContent_J,
  heatOfCell,
  totalHeat_J_per_K,
} from "../../dist/stages/simulate/heat-of-cell.js";
import { tellNights } from "../../dist/stages/simulate/simulate.js";
import { writeNight } from "../../dist/stages/simulate/write-night.js";

/** Set points of a cell that follows its stage, and of one that climbs by its own pulses. */
const STEPPED = { stage: { settings: { from: "0.38 K", to: "1.05 K", count: 8 }, settle: "500 s" } };
const CLIMBING = (from) => ({
  stage: { settings: [from], settle: "200 s", start: "at-stage" },
  pulses: { per_setting: 12, length: "10 s", rise: 0.03, wait: "200 s" },
});
const LEAKY = { link: { conductance: "30 µW/K", power: 1 } }; // τ = 60 s at 0.38 K
const HALF = { link: { conductance: "8 µW/K", power: 1 } }; // τ = 220 s
const SLOW = { boundary_conductance: "0.12 mW/K" }; // 20 s at 0.4 K, 4 s at 1 K

/** What differs from a quiet night in a cell that hardly leaks. */
export const KINDS = {
  quiet: { night: CLIMBING("0.4 K") },
  "warm, quiet": { night: CLIMBING("0.75 K") },
  leaky: { cell: LEAKY, night: STEPPED },
  "leaky, stage not logged": { cell: LEAKY, night: { ...STEPPED, stage_log: { every: 0 } } },
  "leaky, body not known": { cell: LEAKY, night: STEPPED, body: "unknown" },
  "leaky empty cell": {
    cell: { link: { conductance: "8 µW/K", power: 1 } },
    night: { ...STEPPED, filled: false },
  },
  "slow boundary": { cell: SLOW, night: CLIMBING("0.4 K") },
  "leaky, slow boundary": { cell: { ...HALF, boundary_conductance: "0.2 mW/K" }, night: STEPPED },
  spikes: { cell: HALF, night: { ...STEPPED, faults: { spikes: { share: 4e-4, size: 0.05 } } } },
  "many spikes": { cell: HALF, night: { ...STEPPED, faults: { spikes: { share: 4e-3, size: 0.02 } } } },
  gaps: {
    cell: HALF,
    night: {
      ...STEPPED,
      faults: {
        gaps: [510, 1360, 2180, 3000].map((from) => ({ from: `${from + 20} s`, to: `${from + 45} s` })),
        over_range: 0.01,
      },
    },
  },
  "clock 0.7 s off": { cell: HALF, night: { ...STEPPED, clock: { heater_offset: "0.7 s" } } },
  "slow heater log": {
    cell: HALF,
    night: {
      ...STEPPED,
      pulses: { per_setting: 1, length: "40 s", rise: 0.02, wait: "300 s" },
      heater_log: {
        kind: "sampled",
        interval: "3 s",
        reading_noise: 2e-5,
        current_noise: "0.1 nA",
        voltage_noise: "0.1 µV",
      },
    },
  },
  "1/f noise": {
    night: CLIMBING("0.4 K"),
    thermometer: { slow_noise: { size: 3e-5, from: "2 s", to: "2000 s" } },
  },
  "1/f noise, leaky": {
    cell: HALF,
    night: STEPPED,
    thermometer: { slow_noise: { size: 3e-5, from: "2 s", to: "2000 s" } },
  },
  "thermometer 2 s late": { cell: HALF, night: STEPPED, thermometer: { lag: "2 s" } },
  // The next pulse comes after four boundary times, while the liquid is still on its way.
  overlapping: {
    cell: SLOW,
    night: {
      ...CLIMBING("0.45 K"),
      pulses: { per_setting: 12, length: "10 s", rise: 0.03, wait: "65 s" },
    },
  },
  "stage steps in mid-pulse": {
    cell: LEAKY,
    night: {
      ...STEPPED,
      stage: { ...STEPPED.stage, step_in_pulse: "1 mK", time_constant: "5 s" },
      stage_log: { every: 2 },
    },
  },
};

function scenarioOf(kind, seed) {
  const { cell = {}, night, thermometer = {} } = KINDS[kind];
  return {
    scenario: "battery",
    seed,
    cell: {
      cell: "drum",
      volume: "3.02 cm3",
      addenda: [{ heat_capacity: "0.5 mJ/K", power: 1 }],
      boundary_conductance: "20 mW/K",
      link: { conductance: "20 nW/K", power: 1 },
      heat_leak: "0.5 nW",
      heater: { resistance: "1 kOhm" },
      ...cell,
    },
    sample: { sample: "drop", amount: "0.1095 mol", molar_volume: "27.58 cm3/mol" },
    thermometer: {
      thermometer: "ge-9",
      noise: 1e-4,
      calibration: {
        form: "log-polynomial",
        from: "0.25 K",
        to: "1.8 K",
        points: 10,
        standard_uncertainty: "0 K",
      },
      ...thermometer,
    },
    every_night: {
      pulses: { per_setting: 1, length: "10 s", rise: 0.02, wait: "300 s" },
      thermometer_log: { interval: "0.5 s", jitter: "5 ms" },
      heater_log: { kind: "events", reading_noise: 2e-5, current_noise: "0.1 nA", voltage_noise: "0.1 µV" },
      stage_log: { every: 10 },
    },
    nights: [{ run: "n", ...night }],
  };
}

/**
 * One night of a kind.
 * @returns one row a pulse: relative error of C against the truth at the program's own T, its stated u, pull
 */
export async function night(kind, seed, options = {}) {
  const config = scenarioSchema.parse(scenarioOf(kind, seed));
  const [told] = tellNights(config, pcg32);
  const folder = mkdtempSync(join(tmpdir(), "rotonwell-battery-"));
  try {
    const place = join(folder, folderOf(config, told.night), told.night.run);
    const calibration = issueCalibration(config.thermometer, told.laboratory.calibrationError_K);
    const files = [...writeNight(told)].map(([file, text]) => [join(place, file), text]);
    for (const [file, text] of configFiles(config, calibration)) files.push([join(folder, file), text]);
    for (const [path, text] of files) {
      mkdirSync(dirname(path), { recursive: true });
      // The length of a pulse is programmed; a slow log alone knows it to its interval only.
      const length = `kind: sampled\n    pulse_length: ${told.night.pulses.length.text}`;
      writeFileSync(path, path.endsWith("run.yaml") ? text.replace("kind: sampled", length) : text);
    }
    const { scenario, simulated } = told;
    const heat = heatOfCell(scenario);
    const known = (T) => addendaHeat_J_per_K(scenario.cell, T);
    const contents = told.night.filled
      ? { kind: "filled", body: KINDS[kind].body === "unknown" ? null : known, shape: heliumShape() }
      : { kind: "empty" };
    const reduced = await reduceRun({
      run: loadRun(join(place, "run.yaml")),
      cell: loadCell(join(folder, "drum.yaml")),
      pulses: pulsesSchema.parse(options),
      contents,
    });
    const { table } = reduced;
    const rows = Array.from(table.pulse, (pulse, i) => {
      const T = table.T_K[i];
      const width = table.mean_over_K[i];
      const truth =
        width > 0
          ? (heatContent_J(heat, T + width / 2, T + width / 2) -
              heatContent_J(heat, T - width / 2, T - width / 2)) /
            width
          : totalHeat_J_per_K(heat, T);
      const error = table.C_total_J_per_K[i] / truth - 1;
      const u = table.u_C_total_J_per_K[i] / table.C_total_J_per_K[i];
      return {
        pulse,
        T,
        error,
        u,
        pull: error / u,
        method: table.method[i],
        used: table.used[i] === 1,
        table,
        row: i,
      };
    });
    return { rows, wanted: simulated.truth.pulses.start_s.length, night: reduced };
  } finally {
    rmSync(folder, { recursive: true, force: true });
  }
}

/** What many nights of a kind come to. */
export function summarise(nights) {
  const rows = nights.flatMap((each) => each.rows.filter(({ used }) => used));
  const n = rows.length;
  const mean = (pick) => rows.reduce((sum, row) => sum + pick(row), 0) / n;
  const bias = mean(({ error }) => error);
  const spreadOf = (pick, middle) =>
    Math.sqrt(rows.reduce((sum, row) => sum + (pick(row) - middle) ** 2, 0) / (n - 1));
  const pull = mean(({ pull: z }) => z);
  const methods = {};
  for (const { method } of rows) methods[method] = (methods[method] ?? 0) + 1;
  return {
    pulses: nights.reduce((sum, { wanted }) => sum + wanted, 0),
    used: n,
    wrongCount: nights.filter(({ rows: found, wanted }) => found.length !== wanted).length,
    bias,
    u_bias: spreadOf(({ error }) => error, bias) / Math.sqrt(n),
    u: mean(({ u }) => u),
    pull,
    spread: spreadOf(({ pull: z }) => z, pull),
    largest: rows.reduce((most, row) => (Math.abs(row.pull) > Math.abs(most.pull) ? row : most), rows[0]),
    methods,
  };
}

/** The bias a kind may have: a fifth of what is stated, or 0.05 %. */
export const allowedBias = ({ u }) => Math.max(u / 5, 5e-4);
