import type { PulsePicture, PulseTable } from "../../pulses/types.js";
import type { Estimate, Separation } from "../../separate/types.js";
import { roundToUncertainty } from "../rounding.js";
import type { CampaignReport, NightReport } from "../types.js";
import { estimateText, temperatureText } from "../words.js";
import {
  type ClassicalLines,
  classicalLines,
  type PlotLine,
  phononPlotPoints,
  rotonPlotPoints,
} from "./classical-lines.js";
import { classicalPlotSpec } from "./classical-plot.js";
import { heatCapacitySpec } from "./heat-capacity.js";
import { nightOverviewSpec } from "./night-overview.js";
import { type PulseWords, pulsePictureSvg } from "./pulse-picture.js";
import { renderSvg } from "./render.js";

/** Keys of the campaign's own figures, each a file name without its ending. */
export const CAMPAIGN_FIGURES = ["heat-capacity", "phonon-plot", "roton-plot"] as const;

/** Key of a night's overview. */
export function overviewKey(run: string): string {
  return `${run}/overview`;
}

/** Key of a pulse's picture. */
export function pulseKey(run: string, pulse: number): string {
  return `${run}/pulse-${pulse}`;
}

/**
 * Every figure of a report as SVG, by its key. A figure whose data are missing is not there.
 * @returns the same bytes for the same report
 */
export async function renderFigures(report: CampaignReport): Promise<Record<string, string>> {
  const figures: Record<string, string> = {};
  const { separation } = report;
  if (report.dataset.Cv_J_per_mol_K.some((C) => C > 0))
    figures["heat-capacity"] = await renderSvg(
      heatCapacitySpec(report.dataset, separation),
      `Molar heat capacity of ${report.sample} against temperature, both logarithmic, with the fit, its phonon and roton parts, and the residuals in per cent`,
    );
  const lines = classicalLines(separation);
  const phonons = await phononPlot(separation, lines);
  if (phonons !== null) figures["phonon-plot"] = phonons;
  const rotons = await rotonPlot(separation, lines);
  if (rotons !== null) figures["roton-plot"] = rotons;
  for (const night of report.nights) Object.assign(figures, await nightFigures(night));
  return figures;
}

async function phononPlot(separation: Separation, lines: ClassicalLines): Promise<string | null> {
  const points = phononPlotPoints(separation, lines);
  if (points.length < 2) return null;
  const { phonon } = lines;
  const drawn = separation.graphical.sound_speed;
  const spec = classicalPlotSpec({
    points,
    line: phonon === null ? null : { intercept: 1e3 * phonon.intercept, slope: 1e3 * phonon.slope },
    x: "T² (K²)",
    y: "C/T³ (mJ mol⁻¹ K⁻⁴)",
    from: "zero",
    words:
      phonon === null || drawn === null
        ? null
        : `intercept ${interceptText(phonon, drawn)}: u₁ = ${estimateText(drawn)}`,
  });
  return renderSvg(
    spec,
    "Heat capacity over T cubed against T squared, with the line whose intercept gives the sound speed",
  );
}

/** In mJ mol⁻¹ K⁻⁴; A ∝ u₁⁻³, so three times the relative uncertainty of u₁. */
function interceptText(line: PlotLine, drawn: Estimate): string {
  const u = (3 * line.intercept * drawn.standard_uncertainty) / drawn.value;
  return roundToUncertainty(1e3 * line.intercept, 1e3 * u);
}

async function rotonPlot(separation: Separation, lines: ClassicalLines): Promise<string | null> {
  const gap = separation.graphical.roton_gap ?? separation.roton_gap;
  if (gap === null) return null;
  const points = rotonPlotPoints(separation, lines, gap.value);
  if (points.length < 2) return null;
  const spec = classicalPlotSpec({
    points,
    line: lines.roton,
    x: "1/T (K⁻¹)",
    y: "ln[(C − Cₚₕ) / √T(¾ + y + y²)]",
    from: "data",
    words: lines.roton === null ? null : `slope −Δ/k: Δ/k = ${estimateText(gap)}`,
  });
  return renderSvg(
    spec,
    "Logarithm of the reduced roton heat capacity against 1/T, with the line of slope minus Δ over k",
  );
}

async function nightFigures(night: NightReport): Promise<Record<string, string>> {
  const { table, run } = night;
  const figures: Record<string, string> = {};
  if (table === null) return figures;
  const drawable = table.C_total_J_per_K.some((C, i) => C > 0 && table.T_K[i]! > 0);
  if (drawable)
    figures[overviewKey(run)] = await renderSvg(
      nightOverviewSpec(table),
      `Total heat capacity of each pulse of ${run} against temperature, flagged pulses marked`,
    );
  for (const picture of night.pictures)
    figures[pulseKey(run, picture.pulse)] = pulsePictureSvg(picture, pulseWords(table, picture));
  return figures;
}

/** Pictures are of rows of the table; one without a row says only what it shows. */
function pulseWords(table: PulseTable, picture: PulsePicture): PulseWords {
  const i = table.pulse.indexOf(picture.pulse);
  const step = i < 0 ? Number.NaN : table.dT_K[i]!;
  const standing = i >= 0 && table.used[i] === 0 ? "left out" : "used";
  return {
    label: [
      `Pulse ${picture.pulse}: temperature against time, and residuals`,
      ...(Number.isFinite(step) ? [`step ${temperatureText(step)}`] : []),
      ...(standing === "left out" ? ["left out"] : []),
    ].join(", "),
    standing,
    boundary_time_s: i < 0 ? Number.NaN : table.boundary_time_s[i]!,
  };
}
