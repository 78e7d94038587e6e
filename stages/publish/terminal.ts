import type { Separation } from "../separate/types.js";
import { significant } from "./rounding.js";
import type { CampaignReport } from "./types.js";
import {
  comparisonText,
  estimateText,
  modelText,
  nightAddendaShare,
  nightNoise_K,
  percent,
  temperatureText,
} from "./words.js";

type Side = "left" | "right";

/** Columns two spaces apart, each as wide as its widest cell. */
function columns(rows: readonly (readonly string[])[], sides: readonly Side[]): string[] {
  const length = (text: string) => [...text].length;
  const widths = sides.map((_, j) => Math.max(...rows.map((row) => length(row[j]!))));
  return rows.map((row) =>
    row
      .map((cell, j) => {
        const blank = " ".repeat(widths[j]! - length(cell));
        return sides[j] === "left" ? cell + blank : blank + cell;
      })
      .join("  ")
      .trimEnd(),
  );
}

/** A separation for a terminal: what was found, how well it fits, and what the other forms would say. */
export function separationText(separation: Separation): string {
  const { window, chi_squared, degrees_of_freedom: freedom } = separation;
  const lines = [
    `${modelText(separation)}: ${separation.points} points, ${significant(window.from, 4)} to ${significant(window.to, 4)} K`,
    ...columns(
      [
        ["sound speed u₁", estimateText(separation.sound_speed)],
        ["roton gap Δ/k", estimateText(separation.roton_gap)],
        ["phonon coefficient", estimateText(separation.phonon_coefficient)],
        ["roton amplitude", estimateText(separation.roton_amplitude)],
        ["χ² / degrees of freedom", `${significant(chi_squared, 4)} / ${freedom}`],
        ["u₁, drawn", estimateText(separation.graphical.sound_speed)],
        ["Δ/k, drawn", estimateText(separation.graphical.roton_gap)],
      ],
      ["left", "left"],
    ).map((line) => `  ${line}`),
  ];
  if (separation.alternatives.length > 0) {
    const rows = separation.alternatives.map((other) => [
      modelText(other),
      estimateText(other.sound_speed),
      estimateText(other.roton_gap),
      `${significant(other.chi_squared, 4)} / ${other.degrees_of_freedom}`,
      significant(other.aicc, 5),
    ]);
    const table = columns(
      [["form", "u₁", "Δ/k", "χ² / ν", "AICc"], ...rows],
      ["left", "left", "left", "right", "right"],
    );
    lines.push("Side by side", ...table.map((line) => `  ${line}`));
  }
  lines.push(...separation.missing.map((why) => `Not found: ${why}`));
  return `${lines.join("\n")}\n`;
}

/** The nights of a campaign for a terminal, then u₁ and Δ and what they agree with. */
export function nightsText(
  report: Pick<CampaignReport, "nights" | "dataset" | "separation" | "comparisons">,
): string {
  const { nights, separation, comparisons } = report;
  const rows = nights.map((night) => [
    night.run,
    night.status === "failed" ? "failed" : `${night.used} of ${night.pulses}`,
    night.kind === "empty" ? "empty cell" : percent(nightAddendaShare(report, night.run)),
    temperatureText(nightNoise_K(night)),
  ]);
  const table = columns(
    [["night", "pulses used", "addenda share", "noise"], ...rows],
    ["left", "right", "right", "right"],
  );
  const failures = nights.flatMap(({ run, error }) => (error === undefined ? [] : [`${run}: ${error}`]));
  const beside = (quantity: string) =>
    comparisons
      .filter((comparison) => comparison.quantity === quantity)
      .map((c) => `     ${comparisonText(c)}`);
  return `${[
    ...table,
    ...failures,
    "",
    `u₁   ${estimateText(separation.sound_speed)}`,
    ...beside("sound speed"),
    `Δ/k  ${estimateText(separation.roton_gap)}`,
    ...beside("roton gap"),
    ...separation.missing.map((why) => `Not found: ${why}`),
  ].join("\n")}\n`;
}
