import { mkdirSync, mkdtempSync, rmSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { dirname, join } from "node:path";
import { onTestFinished } from "vitest";

/** The examples of every kind of file, laid out as a small laboratory would. */
export const EXAMPLES: Readonly<Record<string, string>> = {
  "campaigns/fjord-7.yaml": `# campaign: one sample in one cell over many nights
campaign: fjord-7
cell: ../cells/thimble.yaml
sample: ../samples/fill-7.yaml
runs: ../nights/fjord-7/*/run.yaml
addenda:
  parts: [{ material: copper, mass: "24.1 ± 0.1 g" }]
reduction:
  pulses:   { method: auto }
  separate: { window: ["0.35 K", "1.15 K"], phonon_powers: auto, other_powers: [], model: auto }
output: ../out/fjord-7
`,
  "campaigns/measured-addenda.yaml": `campaign: measured-addenda
cell: ../cells/thimble.yaml
sample: ../samples/fill-7.yaml
runs: [../nights/fjord-7/2026-11-15-a/run.yaml, ../nights/fjord-7/2026-11-14-a/run.yaml]
addenda:
  runs: ../nights/thimble-empty/**/run.yaml
  powers: [1, 3]
`,
  "cells/thimble.yaml": `cell: thimble
volume: 3.015 ± 0.006 cm3
dead_volume: 0.20 ± 0.05 cm3          # fill line and room-temperature volumes, optional
relief_pressure: 20 bar               # rated relief of the fill line, optional
thermometer: ../thermometers/ge-31.yaml
heater: { lead_resistance: "2.4 ± 0.2 Ohm", lead_share: "0.5 ± 0.1" }
`,
  "samples/fill-7.yaml": `sample: fill-7
substance: helium-4
amount: 0.1093 ± 0.0004 mol           # or gas: { pressure, volume, temperature }
condition: constant-volume            # or saturated-vapour (then vapour_space is needed)
vapour_space: 0.40 ± 0.05 cm3
molar_volume: 27.58 ± 0.03 cm3/mol    # default: published value for the condition
`,
  "thermometers/ge-31.yaml": `thermometer: ge-31
scale: ITS-90
calibration:
  form: table                         # table | log-polynomial | chebyshev
  file: ge-31.csv
  temperature: { column: T_K, unit: K }
  resistance:  { column: R_ohm, unit: Ohm }
  standard_uncertainty: 0.4 mK
`,
  "thermometers/ge-31.csv": "T_K,R_ohm\n",
};

const RUN = (night: string): string => `run: ${night}
logs:
  thermometer:
    file: thermometer.csv
    time:       { column: t, unit: s }          # or unit: iso8601 | epoch
    resistance: { column: R, unit: Ohm }
  heater:
    file: heater.csv
    kind: events                                # events (one row a pulse) | sampled
    time:     { column: t, unit: s }            # events: start of the pulse
    duration: { column: duration, unit: s }     # events only
    current:  { column: I, unit: mA }
    voltage:  { column: V, unit: mV }
  stage: { file: stage.csv, time: { column: t, unit: s }, temperature: { column: T, unit: K } }
format: { delimiter: auto, decimal: auto, comment: "#" }
clock: { heater_offset: auto }
exclude: [{ from: "1200 s", to: "1500 s", reason: helium transfer }]
veto:    [{ pulse: 17, reason: door slammed }]
`;

function night(folder: string, name: string): Record<string, string> {
  return {
    [`${folder}/${name}/run.yaml`]: RUN(name),
    [`${folder}/${name}/thermometer.csv`]: "t,R\n",
    [`${folder}/${name}/heater.csv`]: "t,duration,I,V\n",
    [`${folder}/${name}/stage.csv`]: "t,T\n",
  };
}

export const LABORATORY: Readonly<Record<string, string>> = {
  ...EXAMPLES,
  ...night("nights/fjord-7", "2026-11-14-a"),
  ...night("nights/fjord-7", "2026-11-15-a"),
  ...night("nights/thimble-empty", "2026-11-01-a"),
};

/** The first night's file. */
export const RUN_FILE = "nights/fjord-7/2026-11-14-a/run.yaml";

/**
 * Writes files to a folder of their own, gone after the test.
 * @returns path in it
 */
export function benchWith(files: Readonly<Record<string, string | Uint8Array>>): (file: string) => string {
  const root = mkdtempSync(join(tmpdir(), "rotonwell-config-"));
  onTestFinished(() => rmSync(root, { recursive: true, force: true }));
  for (const [file, content] of Object.entries(files)) {
    mkdirSync(dirname(join(root, file)), { recursive: true });
    writeFileSync(join(root, file), content);
  }
  return (file) => join(root, file);
}
