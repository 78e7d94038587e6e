import type { Separation } from "../../separate/types.js";
import { type Content, html, type Markup, NOTHING } from "../html.js";
import { roundToUncertainty, significant } from "../rounding.js";
import type { CampaignReport } from "../types.js";
import { unitText } from "../units.js";
import { estimateText, modelText } from "../words.js";
import { figure, numbers, table, typeset, words } from "./parts.js";

function parameterTable(separation: Separation): Markup {
  const { names, matrix } = separation.correlation;
  const columns = [
    words("parameter"),
    numbers("value"),
    words("unit"),
    ...names.map((name) => numbers(html`<abbr title="correlation with ${name}">r(${name})</abbr>`)),
  ];
  const rows = separation.parameters.map(({ name, value, standard_uncertainty, unit }) => {
    const i = names.indexOf(name);
    const correlations: Content[] = names.map((_, j) =>
      i < 0 ? "–" : typeset(finiteFixed(matrix[i]![j]!, 3)),
    );
    return {
      cells: [
        name,
        typeset(roundToUncertainty(value, standard_uncertainty)),
        unitText(unit),
        ...correlations,
      ],
    };
  });
  return table("Fitted parameters, standard uncertainty and correlation", columns, rows);
}

function finiteFixed(x: number, decimals: number): string {
  return Number.isFinite(x) ? x.toFixed(decimals) : "–";
}

type Fit = Separation["alternatives"][number];

function sideBySide(separation: Separation): Markup {
  const { model, phonon_powers, aicc, chi_squared, degrees_of_freedom, sound_speed, roton_gap } = separation;
  const own: Fit = { model, phonon_powers, aicc, chi_squared, degrees_of_freedom, sound_speed, roton_gap };
  const others = separation.alternatives.filter(
    (other) => other.model !== model || other.phonon_powers.join() !== phonon_powers.join(),
  );
  const fits = [own, ...others];
  const best = Math.min(...fits.map((fit) => fit.aicc).filter(Number.isFinite));
  const rows = fits.map((fit) => ({
    cells: [
      modelText(fit),
      typeset(estimateText(fit.sound_speed)),
      typeset(estimateText(fit.roton_gap)),
      `${significant(fit.chi_squared, 4)} / ${fit.degrees_of_freedom}`,
      finiteFixed(fit.aicc - best, 1),
    ],
    emphasis: fit === own ? ("chosen" as const) : ("none" as const),
  }));
  return table(
    "The same points under other forms; the reported one in bold. AICc counts from the best and ranks fits to the same points only.",
    [words("form"), numbers("u₁"), numbers("Δ/k"), numbers("χ² / ν"), numbers("AICc")],
    rows,
  );
}

/** The gap that the other form gives, less that of Landau's: how much the shape of the minimum matters here. */
function shapeBias(separation: Separation): string {
  const all: readonly Pick<Fit, "model" | "roton_gap" | "aicc">[] = [separation, ...separation.alternatives];
  const bestOf = (model: Separation["model"]) =>
    all
      .filter((fit) => fit.model === model && fit.roton_gap !== null)
      .reduce<(typeof all)[number] | null>(
        (best, fit) => (best === null || fit.aicc < best.aicc ? fit : best),
        null,
      );
  const landau = bestOf("landau")?.roton_gap?.value;
  const whole = bestOf("whole-curve")?.roton_gap?.value;
  if (landau === undefined || whole === undefined) return "";
  const difference = landau - whole;
  return `Here the Landau form gives ${significant(Math.abs(difference), 2)} K ${difference < 0 ? "less" : "more"} than the whole curve (${significant((100 * Math.abs(difference)) / whole, 2)} %): that is the model's own part, and no statistical uncertainty contains it.`;
}

/** Parameters, other forms, and the two plots that have been drawn by hand for decades. */
export function separationSection(report: CampaignReport, figures: Readonly<Record<string, string>>): Markup {
  const { separation } = report;
  const { graphical } = separation;
  return html`<section id="separation"><h2>Separation</h2>
<p>${modelText(separation)}; ${separation.points} points from ${separation.window.from} to ${separation.window.to} K; χ² = ${significant(
    separation.chi_squared,
    4,
  )} at ${separation.degrees_of_freedom} degrees of freedom. Phonon coefficient ${typeset(estimateText(separation.phonon_coefficient))}, roton amplitude ${typeset(estimateText(separation.roton_amplitude))}.</p>
${separation.missing.length === 0 ? NOTHING : html`<ul class="wrong">${separation.missing.map((why) => html`<li>${why}</li>`)}</ul>`}
${parameterTable(separation)}
<h3>Other forms, side by side</h3>
${sideBySide(separation)}
<p class="note">A gap from a heat capacity is an effective gap over its window: rotons soften as T rises, and the spectrum is more than two pieces. The Landau form takes the roton minimum for a parabola and so reads one to three per cent high; too few phonon powers raise u₁ by up to two per cent. The whole excitation curve avoids both, as far as the published curve is right. ${shapeBias(separation)}</p>
<h3>As drawn by hand</h3>
<p>Graphical estimates, as a check on the fit: u₁ = ${typeset(estimateText(graphical.sound_speed))}, Δ/k = ${typeset(estimateText(graphical.roton_gap))}.</p>
<div class="pair">
${figure(figures["phonon-plot"], "Phonons: C/T³ against T². The intercept gives u₁. Open: as measured; full: rotons taken off. The line is dashed where it is only continued.")}
${figure(figures["roton-plot"], "Rotons: what is left after the phonons, reduced by √T(¾ + y + y²), y = Δ/kT, so that activation is a straight line of slope −Δ/k. Full points carry the line; C in J mol⁻¹ K⁻¹.")}
</div>
${comparisonTable(report)}</section>
`;
}

function comparisonTable(report: CampaignReport): Markup {
  if (report.comparisons.length === 0) return NOTHING;
  return html`<h3>Against published values</h3>
${table(
  "Ours minus published, and the same over the standard uncertainty of the difference; up to two in size is agreement.",
  [words("quantity"), numbers("published"), words("source"), numbers("difference"), numbers("over u")],
  report.comparisons.map(({ quantity, value, u, unit, source, difference, normalisedDifference }) => ({
    cells: [
      quantity,
      `${roundToUncertainty(value, u)} ${unitText(unit)}`,
      source,
      `${typeset(significant(difference, 2))} ${unitText(unit)}`,
      Math.abs(normalisedDifference) > 2
        ? html`<strong class="wrong">${typeset(significant(normalisedDifference, 2))}</strong>`
        : typeset(significant(normalisedDifference, 2)),
    ],
  })),
)}`;
}
