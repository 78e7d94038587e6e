import { datasetTitle } from "./dataset.js";
import { html, trusted } from "./html.js";
import { budgetSection } from "./page/budget-section.js";
import { failedGates, firstScreen } from "./page/headline.js";
import { addendaSection, methodSection } from "./page/method-section.js";
import { nightsSection } from "./page/nights-section.js";
import {
  cautionsSection,
  configurationSection,
  gatesSection,
  provenanceSection,
} from "./page/provenance-section.js";
import { separationSection } from "./page/separation-section.js";
import { STYLE } from "./page/style.js";
import type { CampaignReport } from "./types.js";
import { raisedUnits } from "./units.js";

const SECTIONS = [
  ["separation", "Separation"],
  ["budget", "Uncertainty"],
  ["gates", "Gates"],
  ["nights", "Nights"],
  ["addenda", "Addenda"],
  ["method", "Method"],
  ["configuration", "Configuration"],
  ["provenance", "Provenance"],
  ["cautions", "Cautions"],
] as const;

// The page needs nothing from anywhere; this makes the reader's browser hold it to that.
const POLICY = "default-src 'none'; style-src 'unsafe-inline'; img-src data:";

/**
 * A campaign on one page: style and figures inside it, no scripts, nothing loaded from anywhere.
 * @param figures SVG by key, as renderFigures gives them; one that is not there leaves no gap
 * @returns HTML; the same bytes for the same arguments
 */
export function reportHtml(report: CampaignReport, figures: Readonly<Record<string, string>>): string {
  return html`<!doctype html>
<html lang="en">
<head>
<meta charset="utf-8">
<meta name="viewport" content="width=device-width, initial-scale=1">
<meta http-equiv="Content-Security-Policy" content="${trusted(POLICY)}">
<title>${report.campaign}: heat capacity of ${report.substance}</title>
<style>${trusted(STYLE)}</style>
</head>
<body>
<header>
<h1>${datasetTitle(report)}</h1>
<p class="under">Campaign ${report.campaign}. ${report.amount} of ${report.substance} in cell ${report.cell}, ${report.condition}, molar volume ${raisedUnits(report.molar_volume)}, ${report.temperature_scale}.</p>
${failedGates(report)}${firstScreen(report, figures)}<nav aria-label="Sections">${SECTIONS.map(
    ([id, title]) => html`<a href="#${id}">${title}</a>`,
  )}</nav>
</header>
<main>
${separationSection(report, figures)}${budgetSection(report)}${gatesSection(report)}${nightsSection(report, figures)}${addendaSection(report)}${methodSection()}${configurationSection(report)}${provenanceSection(report)}${cautionsSection(report)}</main>
<footer>Made by rotonwell ${report.provenance.version}. Standard uncertainties throughout, k = 1.</footer>
</body>
</html>
`.markup;
}
