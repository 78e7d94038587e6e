import { type Content, html, type Markup, trusted } from "../html.js";
import { significant } from "../rounding.js";
import type { CampaignReport } from "../types.js";
import { percent } from "../words.js";
import { numbers, table, typeset, words } from "./parts.js";

function signed(x: number, unit: string): string {
  if (!Number.isFinite(x)) return "–";
  const text = significant(x, 2);
  return `${x > 0 ? "+" : ""}${typeset(text)} ${unit}`;
}

/** A share of the variance, with a bar behind it as long as the share. */
function share(part: number): Content {
  if (!Number.isFinite(part)) return "–";
  const length = Math.min(100, Math.max(0, Math.round(100 * part)));
  return html`<span class="share" style="${trusted(`--part:${length}%`)}">${percent(part)}</span>`;
}

/** Where the uncertainty of u₁ and Δ comes from. */
export function budgetSection(report: CampaignReport): Markup {
  const { budget } = report;
  const rows = budget.lines.map((line) => ({
    cells: [
      line.title,
      line.relative_Cv === null ? "–" : percent(line.relative_Cv),
      signed(line.roton_gap_K, "K"),
      share(line.share_roton_gap),
      signed(line.sound_speed_m_per_s, "m/s"),
      share(line.share_sound_speed),
    ],
  }));
  const foot = [
    {
      cells: [
        "Together (root sum of squares)",
        "",
        `${significant(budget.u_roton_gap_K, 2)} K`,
        "",
        `${significant(budget.u_sound_speed_m_per_s, 2)} m/s`,
        "",
      ],
    },
  ];
  return html`<section id="budget"><h2>Uncertainty budget</h2>
${table(
  "Change of Δ/k and u₁ for one standard uncertainty of each source. Size: root mean square over the fitted points, relative to C.",
  [
    words("source"),
    numbers("size in C"),
    numbers("effect on Δ/k"),
    numbers("share"),
    numbers("effect on u₁"),
    numbers("share"),
  ],
  rows,
  foot,
)}
<p>Sources other than repeatability move all points together; the dataset carries one column for each, so that its whole covariance can be rebuilt.</p>
</section>
`;
}
