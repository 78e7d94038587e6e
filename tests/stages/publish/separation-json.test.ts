import { expect, test } from "vitest";
import { separationJson } from "../../../stages/publish/separation-json.js";
import { nightsText, separationText } from "../../../stages/publish/terminal.js";
import { syntheticCampaign } from "./synthetic-campaign.js";

const campaign = syntheticCampaign({ nights: 3, pulsesPerNight: 8 });

test("the JSON has the settled keys, in a fixed order", () => {
  const record = JSON.parse(separationJson(campaign.separation));
  expect(Object.keys(record)).toEqual([
    "points",
    "window",
    "model",
    "phonon_powers",
    "sound_speed",
    "roton_gap",
    "phonon_coefficient",
    "roton_amplitude",
    "chi_squared",
    "degrees_of_freedom",
    "correlation",
    "graphical",
    "alternatives",
    "missing",
  ]);
  expect(record.window).toEqual({ from: 0.35, to: 1.15, unit: "K" });
  expect(record.sound_speed).toEqual({ value: 238.12, standard_uncertainty: 0.61, unit: "m/s" });
  expect(record.correlation.matrix).toHaveLength(3);
});

test("what could not be had is null, and so is what is no number", () => {
  const { separation } = campaign;
  const json = separationJson({
    ...separation,
    roton_gap: null,
    chi_squared: Number.NaN,
    missing: ["no rotons"],
  });
  expect(JSON.parse(json)).toMatchObject({ roton_gap: null, chi_squared: null, missing: ["no rotons"] });
});

test("the terminal shows one line a night, then both results and what they agree with", () => {
  const lines = nightsText(campaign).split("\n");
  expect(lines[0]).toMatch(/^night +pulses used +addenda share +noise$/);
  expect(lines.filter((line) => line.startsWith("2026-11-1"))).toHaveLength(3);
  expect(lines.find((line) => line.startsWith("2026-11-10-a"))).toMatch(/7 of 8 +\d\.\d+ % +42 µK$/);
  expect(lines).toContain("u₁   238.12 ± 0.61 m/s");
  expect(lines.join("\n")).toContain("agrees with 238.30(10) m/s");
  expect(lines.join("\n")).toContain("differs from 8.608(12) K");
  expect(lines).toContain("2026-11-30-a: thermometer.csv: the log is empty");
});

test("a separation as text holds every form, and says why something is missing", () => {
  const text = separationText({
    ...campaign.separation,
    sound_speed: null,
    missing: ["no phonons in the window"],
  });
  expect(text).toContain("Landau form, phonons T³ T⁵ T⁷");
  expect(text).toContain("8.683 ± 0.011 K");
  expect(text).toMatch(/sound speed u₁ +–/);
  expect(text).toContain("Not found: no phonons in the window");
});
