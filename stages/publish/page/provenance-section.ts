import { html, type Markup } from "../html.js";
import type { CampaignReport } from "../types.js";
import { counted, table, words } from "./parts.js";

/** What was configured, every default filled in. */
export function configurationSection(report: CampaignReport): Markup {
  return html`<section id="configuration"><h2>Effective configuration</h2>
<details><summary>Every key with its value, defaults filled in</summary>
<pre>${report.configuration}</pre></details></section>
`;
}

/** What makes the result again. */
export function provenanceSection(report: CampaignReport): Markup {
  const { version, constants, seed, inputs } = report.provenance;
  return html`<section id="provenance"><h2>Provenance</h2>
<p>rotonwell ${version}; constants: ${constants}; ${seed === null ? "no random numbers" : html`random numbers from seed ${seed}`}. The same inputs give the same bytes.</p>
<details><summary>${counted(inputs.length, "input file")} by SHA-256</summary>
${table(
  "Inputs",
  [words("file"), words("SHA-256")],
  inputs.map(({ file, sha256 }) => ({ cells: [file, html`<code>${sha256}</code>`] })),
)}</details></section>
`;
}

export function gatesSection(report: CampaignReport): Markup {
  return html`<section id="gates"><h2>Quality gates</h2>
${
  report.gates.length === 0
    ? html`<p>None was set.</p>`
    : table(
        "What was asked of the result, failures first",
        [words("gate"), words("verdict"), words("found and wanted")],
        [...report.gates]
          .sort((a, b) => Number(a.passed) - Number(b.passed))
          .map(({ name, passed, words: found }) => ({
            cells: [name, passed ? "passed" : html`<strong class="wrong">failed</strong>`, found],
          })),
      )
}</section>
`;
}

export function cautionsSection(report: CampaignReport): Markup {
  return html`<section id="cautions"><h2>Cautions</h2>
<ul class="cautions">${report.cautions.map((caution) => html`<li>${caution}</li>`)}</ul></section>
`;
}
