import type { Estimate } from "../../separate/types.js";
import { html, type Markup, NOTHING } from "../html.js";
import { roundToUncertainty } from "../rounding.js";
import type { CampaignReport } from "../types.js";
import { unitText } from "../units.js";
import { agrees, comparisonText, modelText, percent } from "../words.js";
import { counted, figure, typeset } from "./parts.js";

/** Gates that failed stand before all else. */
export function failedGates(report: CampaignReport): Markup {
  const failed = report.gates.filter(({ passed }) => !passed);
  if (failed.length === 0) return NOTHING;
  return html`<div class="failed" role="alert"><h2>${counted(failed.length, "quality gate")} failed</h2>
<ul>${failed.map(({ name, words }) => html`<li><strong>${name}</strong>: ${words}</li>`)}</ul></div>
`;
}

function value(of: Estimate | null, missing: readonly string[]): Markup {
  if (of === null)
    return html`<span class="value">not found</span>${missing.map((why) => html`<span class="beside apart">${why}</span>`)}`;
  return html`<span class="value">${typeset(roundToUncertainty(of.value, of.standard_uncertainty))} <small>${unitText(of.unit)}</small></span>`;
}

function beside(report: CampaignReport, quantity: string): Markup[] {
  return report.comparisons
    .filter((comparison) => comparison.quantity === quantity)
    .map(
      (comparison) =>
        html`<span class="beside${agrees(comparison) ? "" : " apart"}">${comparisonText(comparison)}</span>`,
    );
}

function verdict(report: CampaignReport): string {
  const { gates, nights, dataset } = report;
  const failed = gates.filter(({ passed }) => !passed).length;
  const judged =
    gates.length === 0
      ? "No quality gate was set."
      : failed === 0
        ? gates.length === 1
          ? "The quality gate passed."
          : `All ${gates.length} quality gates passed.`
        : `${failed} of ${counted(gates.length, "quality gate")} failed: read the result with that in mind.`;
  const lost = nights.filter(({ status }) => status === "failed").length;
  const sampleNights = new Set(dataset.run).size;
  const counts = `${counted(dataset.T_K.length, "point")} from ${counted(sampleNights, "night")}`;
  const losses = lost === 0 ? "" : ` ${counted(lost, "night")} could not be reduced.`;
  return `${judged} ${counts}.${losses}`;
}

/** The first screen: Δ and u₁, what they agree with, the verdict and the curve. */
export function firstScreen(report: CampaignReport, figures: Readonly<Record<string, string>>): Markup {
  const { separation, addenda } = report;
  return html`<div class="first"><div>
<dl class="found">
<dt>Roton gap Δ/k</dt><dd>${value(separation.roton_gap, separation.missing)}${beside(report, "roton gap")}</dd>
<dt>Sound speed u₁, T → 0</dt><dd>${value(separation.sound_speed, separation.missing)}${beside(report, "sound speed")}</dd>
</dl>
<p class="verdict">${verdict(report)}</p>
<p class="beside">${modelText(separation)}, ${separation.window.from} to ${separation.window.to} K. Addenda: ${percent(addenda.mean_share)} of the total on average. Uncertainties are standard (k = 1).</p>
</div>
${figure(
  figures["heat-capacity"],
  "Molar heat capacity of each pulse by night. Solid: fit; dashed: phonons; dotted: rotons. Bars above: everything, below: repeatability, k = 1.",
)}</div>
`;
}
