import { mkdirSync, symlinkSync } from "node:fs";
import { expect, test } from "vitest";
import { loadCampaign } from "../../../pipeline/config/campaign.js";
import { defaultReduction } from "../../../pipeline/config/campaign-schema.js";
import { effectiveConfig, effectiveRun } from "../../../pipeline/config/effective.js";
import { detectKind, loadCell, loadRun, loadSample, loadThermometer } from "../../../pipeline/config/load.js";
import { benchWith, LABORATORY, RUN_FILE } from "./bench.js";

const CAMPAIGN = "campaigns/fjord-7.yaml";

test("a campaign comes with every file it names", () => {
  const path = benchWith(LABORATORY);
  const campaign = loadCampaign(path(CAMPAIGN));
  expect(campaign.campaign).toBe("fjord-7");
  expect(campaign.runs.map(({ run }) => run)).toEqual(["2026-11-14-a", "2026-11-15-a"]);
  expect(campaign.runs[0]!.logs.heater.path).toBe(path("nights/fjord-7/2026-11-14-a/heater.csv"));
  expect(campaign.thermometer.table?.path).toBe(path("thermometers/ge-31.csv"));
  expect(campaign.output.path).toBe(path("out/fjord-7"));
  expect(campaign.addenda).toMatchObject({ kind: "parts", parts: [{ material: "copper" }] });
  // 24.1 g in SI; one rounding of the product.
  expect(campaign.addenda.kind === "parts" && campaign.addenda.parts[0]!.mass.value).toBeCloseTo(0.0241, 15);
});

test("empty-cell nights, a list in its own order, output beside the campaign", () => {
  const path = benchWith(LABORATORY);
  const campaign = loadCampaign(path("campaigns/measured-addenda.yaml"));
  expect(campaign.runs.map(({ run }) => run)).toEqual(["2026-11-15-a", "2026-11-14-a"]);
  expect(campaign.addenda).toMatchObject({ kind: "runs", powers: [1, 3], runs: [{ run: "2026-11-01-a" }] });
  expect(campaign.output.path).toBe(path("campaigns/out/measured-addenda"));
});

test("files are shown as the user would type them", () => {
  const path = benchWith(LABORATORY);
  const before = process.cwd();
  process.chdir(path(""));
  try {
    const campaign = loadCampaign(CAMPAIGN);
    expect(campaign.file.shown).toBe("campaigns/fjord-7.yaml");
    expect(campaign.cell.file.shown).toBe("cells/thimble.yaml");
    expect(campaign.runs[0]!.logs.thermometer.shown).toBe("nights/fjord-7/2026-11-14-a/thermometer.csv");
  } finally {
    process.chdir(before);
  }
});

test("a run: each log carries its own format, moments are resolved", () => {
  const path = benchWith({
    ...LABORATORY,
    [RUN_FILE]: LABORATORY[RUN_FILE]!.replace(
      "{ column: t, unit: s }          # or",
      '{ column: 1, unit: iso8601, zone: "+02:00" } # or',
    )
      .replace("    file: heater.csv", "    file: heater.csv\n    format: { delimiter: tab }")
      .replace('comment: "#"', 'comment: "!"')
      .replace('from: "1200 s", to: "1500 s"', "from: 2026-11-14 23:00, to: 2026-11-14T23:00:00Z"),
  });
  const { config } = loadRun(path(RUN_FILE));
  expect(config.logs.thermometer.time).toEqual({ column: "#1", unit: "iso8601", zone: "+02:00" });
  expect(config.logs.thermometer.resistance).toEqual({ column: "R", unit: "Ohm", factor: 1 });
  expect(config.logs.heater).toMatchObject({ current: { unit: "mA", factor: 1e-3 } });
  expect(config.logs.heater.format).toEqual({
    delimiter: "tab",
    decimal: "auto",
    comment: "!",
    gap_words: [],
  });
  expect(config.logs.thermometer.format.delimiter).toBe("auto");
  // 2026-11-14 is day 20771 of the Unix era: 20771·86400 + 21 h (23:00 at +02:00) and + 23 h.
  expect(config.exclude).toEqual([
    {
      from: { kind: "instant", epoch_s: 20771 * 86400 + 21 * 3600, text: "2026-11-14 23:00" },
      to: { kind: "instant", epoch_s: 20771 * 86400 + 23 * 3600, text: "2026-11-14T23:00:00Z" },
      reason: "helium transfer",
    },
  ]);
  expect(config.veto).toEqual([{ pulse: 17, reason: "door slammed", keep: false }]);
  expect(config.clock.heater_offset).toBe("auto");
});

test("every default of a cell, a run and a reduction", () => {
  const path = benchWith({
    ...LABORATORY,
    "cells/bare.yaml": "cell: bare\nvolume: 1 cm3\nthermometer: ../thermometers/ge-31.yaml\n",
    "nights/n/run.yaml":
      "run: n\nlogs:\n  thermometer: { file: ../../thermometers/ge-31.csv, time: { column: t, unit: s }, resistance: { column: R, unit: kΩ } }\n" +
      "  heater: { kind: sampled, file: ../../thermometers/ge-31.csv, time: { column: t, unit: s }, current: { column: I, unit: µA }, voltage: { column: V, unit: V } }\n",
  });
  const { heater } = loadCell(path("cells/bare.yaml")).config;
  expect(
    [heater.lead_resistance, heater.lead_share, heater.current_gain, heater.voltage_gain].map(
      ({ value, u }) => [value, u],
    ),
  ).toEqual([
    [0, 0],
    [0.5, 0],
    [0, 0],
    [0, 0],
  ]);
  const run = loadRun(path("nights/n/run.yaml"));
  expect(run.logs.stage).toBeNull();
  expect(run.config).toMatchObject({ exclude: [], veto: [], clock: { heater_offset: "auto" } });
  const { separate, pulses, combine } = defaultReduction();
  expect(separate.window.map(({ value }) => value)).toEqual([0.35, 1.15]);
  expect(separate).toMatchObject({ phonon_powers: "auto", other_powers: [], model: "auto" });
  expect(pulses).toMatchObject({
    method: "auto",
    settle: "auto",
    window: "auto",
    smallest_rise: 0.002,
    largest_rise: 0.3,
  });
  expect(pulses.exclude_flags).not.toContain("truncated");
  expect(combine.bins_per_decade).toBe(20);
});

test("gas in place of an amount, and the other forms of calibration", () => {
  const path = benchWith({
    "gas.yaml":
      "sample: gas\nsubstance: helium-4\ngas: { pressure: 0.912 bar, volume: 3.00 ± 0.01 L, temperature: 296.2 ± 0.3 K }\ncondition: constant-volume\n",
    "poly.yaml":
      "thermometer: p\nscale: PLTS-2000\ncalibration: { form: log-polynomial, coefficients: [1, -0.5], resistance_range: [210 Ohm, 48 kOhm], standard_uncertainty: 1 mK }\n",
    "cheb.yaml":
      "thermometer: c\nscale: ITS-90\ncalibration: { form: chebyshev, coefficients: [1, -0.5], variable: log10 R, variable_range: [2, 4], quantity: ln T, standard_uncertainty: 1 mK }\n",
  });
  const { gas, amount } = loadSample(path("gas.yaml")).config;
  expect(amount).toBeUndefined();
  expect(gas?.pressure.value).toBe(91200);
  expect(loadThermometer(path("poly.yaml")).table).toBeNull();
  const { calibration } = loadThermometer(path("cheb.yaml")).config;
  // 10² and 10⁴ Ω: without a range of its own the series holds over its variable's.
  expect(calibration.form === "chebyshev" && calibration.resistance_range.map(({ value }) => value)).toEqual([
    100, 10000,
  ]);
});

test("a kind is told by its keys, even if its first key is misspelt", () => {
  const path = benchWith({
    ...LABORATORY,
    "slip.yaml": LABORATORY[CAMPAIGN]!.replace("campaign: fjord", "campain: fjord"),
    "other.yaml": "colour: blue\n",
  });
  const kinds = [
    CAMPAIGN,
    "cells/thimble.yaml",
    "samples/fill-7.yaml",
    "thermometers/ge-31.yaml",
    RUN_FILE,
    "slip.yaml",
    "other.yaml",
  ];
  expect(kinds.map((file) => detectKind(path(file)))).toEqual([
    "campaign",
    "cell",
    "sample",
    "thermometer",
    "run",
    "campaign",
    null,
  ]);
});

test("the effective configuration is plain JSON, complete, and names no folder of this computer", () => {
  const path = benchWith(LABORATORY);
  const campaign = loadCampaign(path(CAMPAIGN));
  const json = JSON.stringify(effectiveConfig(campaign));
  expect(JSON.parse(json)).toEqual(effectiveConfig(campaign));
  expect(json).not.toContain(path(""));
  expect(effectiveConfig(campaign)).toMatchObject({
    campaign: "fjord-7",
    cell: { volume: "3.015 ± 0.006 cm3", heater: { lead_share: "0.5 ± 0.1", current_gain: "0" } },
    runs: [
      { logs: { heater: { current: { column: "I", unit: "mA" } } }, clock: { heater_offset: "auto" } },
      {},
    ],
    addenda: { kind: "parts", parts: [{ material: "copper", mass: "24.1 ± 0.1 g" }] },
    reduction: { separate: { window: ["0.35 K", "1.15 K"] } },
  });
  expect(json).not.toContain('"factor"');
  expect(effectiveRun(campaign, campaign.runs[0]!)).toMatchObject({
    run: { run: "2026-11-14-a" },
    pulses: { method: "auto" },
  });
});

test("the same campaign has the same effective configuration wherever it lies", () => {
  const [a, b] = [benchWith(LABORATORY), benchWith(LABORATORY)];
  expect(effectiveConfig(loadCampaign(a(CAMPAIGN)))).toEqual(effectiveConfig(loadCampaign(b(CAMPAIGN))));
});

test("** goes to any depth, in order by code unit, and not in circles", () => {
  const run = LABORATORY["nights/thimble-empty/2026-11-01-a/run.yaml"]!;
  const logs = { "thermometer.csv": "", "heater.csv": "", "stage.csv": "" };
  const deep = (folder: string, name: string): Record<string, string> => ({
    [`${folder}/run.yaml`]: run.replace("2026-11-01-a", name),
    ...Object.fromEntries(Object.entries(logs).map(([file, text]) => [`${folder}/${file}`, text])),
  });
  const path = benchWith({
    ...LABORATORY,
    ...deep("nights/fjord-7/b", "b"),
    ...deep("nights/fjord-7/B", "upper-b"),
    ...deep("nights/fjord-7/week/7/ä", "umlaut"),
    ...deep("nights/fjord-7/.trash", "trash"),
    [CAMPAIGN]: LABORATORY[CAMPAIGN]!.replace("fjord-7/*/run.yaml", "fjord-7/**/run.yaml"),
  });
  symlinkSync(path("nights/fjord-7"), path("nights/fjord-7/loop"));
  mkdirSync(path("nights/fjord-7/none"));
  expect(loadCampaign(path(CAMPAIGN)).runs.map((night) => night.run)).toEqual([
    "2026-11-14-a",
    "2026-11-15-a",
    "upper-b",
    "b",
    "umlaut",
  ]);
});
