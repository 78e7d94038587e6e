import type { BetweenNights } from "../../budget/types.js";
import { PULSE_FLAGS } from "../../pulses/flags.js";
import type { PulsePicture, PulseTable } from "../../pulses/types.js";
import { overviewKey, pulseKey } from "../figures/figures.js";
import { type Content, html, type Markup, NOTHING, trusted } from "../html.js";
import { roundToUncertainty, significant, withZeros } from "../rounding.js";
import type { CampaignReport, NightReport } from "../types.js";
import { nightAddendaShare, nightNoise_K, percent, temperatureText } from "../words.js";
import { counted, figure, inline, numbers, table, typeset, words } from "./parts.js";

const METHOD_WORDS = { drift: "drift lines", "two-body": "two bodies", relaxation: "relaxation" } as const;
const STATUS_WORDS = { reduced: "reduced", reused: "kept from before", failed: "failed" } as const;

function remarks(night: NightReport): Content {
  const lines: Content[] = [
    ...(night.error === undefined ? [] : [html`<span class="wrong">${night.error}</span>`]),
    ...night.flags.map((flag) => `${flag.count} × ${flag.words}`),
    ...night.notes,
  ];
  if (lines.length === 0) return "–";
  return html`<ul class="quiet">${lines.map((line) => html`<li>${line}</li>`)}</ul>`;
}

/** Weighted mean of a night's residuals in per cent of the fit. */
function offset(between: BetweenNights, run: string): string {
  const night = between.nights.find((each) => each.run === run);
  if (night === undefined) return "–";
  const { relative_offset, u_relative_offset } = night;
  return `${typeset(roundToUncertainty(100 * relative_offset, 100 * u_relative_offset))} %`;
}

/** Whether nights agree with each other as well as their repeatability says. */
function scatter(between: BetweenNights | undefined): Markup {
  const ratio = between?.birge_ratio ?? null;
  if (ratio === null) return NOTHING;
  return html`<p>Birge ratio between nights: ${significant(ratio, 3)}. One means that nights differ as their repeatability says; well above one, something changed from night to night.</p>
`;
}

function nightsTable(report: CampaignReport): Markup {
  return table(
    "Medians over the used pulses; every flag in words, with the pulses it befell.",
    [
      words("night"),
      words("cell"),
      words("state"),
      numbers("used"),
      numbers("vetoed"),
      numbers("addenda"),
      numbers("noise"),
      ...(report.between_nights === undefined ? [] : [numbers("off the fit")]),
      words("flags and notes"),
    ],
    report.nights.map((night, i) => ({
      cells: [
        html`<a href="#night-${i + 1}">${night.run}</a>`,
        night.kind === "empty" ? "empty" : "filled",
        night.status === "failed" ? html`<span class="wrong">failed</span>` : STATUS_WORDS[night.status],
        `${night.used} of ${night.pulses}`,
        night.vetoed,
        percent(nightAddendaShare(report, night.run)),
        temperatureText(nightNoise_K(night)),
        ...(report.between_nights === undefined ? [] : [offset(report.between_nights, night.run)]),
        remarks(night),
      ],
    })),
  );
}

/** Why a pulse is doubted, in words; "" where it is not. */
function doubts(table: PulseTable, i: number): string {
  const flags = PULSE_FLAGS.filter(({ bit }) => (table.flag[i]! & bit) !== 0).map((flag) => flag.words);
  const reason = table.reason[i]!;
  return [...flags, ...(reason === "" ? [] : [reason])].join("; ");
}

/** "boundary 9.00(21) s" where a forward model found one. */
function boundaryText(boundary_time_s: number, u_boundary_time_s: number): readonly string[] {
  if (!(boundary_time_s > 0)) return [];
  const found = u_boundary_time_s > 0;
  return [
    `boundary ${found ? roundToUncertainty(boundary_time_s, u_boundary_time_s, "concise") : significant(boundary_time_s, 2)} s`,
  ];
}

/** What the large picture has below it: what was measured, and what came out. */
function measured(table: PulseTable, i: number): string {
  const capacity = table.C_total_J_per_K[i]!;
  return [
    `${significant(1e6 * table.Q_J[i]!, 4)} µJ in ${significant(table.duration_s[i]!, 4)} s`,
    `${withZeros(table.T_before_K[i]!, 5)} to ${withZeros(table.T_after_K[i]!, 5)} K`,
    ...(Number.isFinite(capacity)
      ? [`C ${roundToUncertainty(1e3 * capacity, 1e3 * table.u_C_total_J_per_K[i]!, "concise")} mJ/K`]
      : []),
  ].join(" · ");
}

/** One SVG in a disclosure: small among others when closed, across the page when open. */
function pulseFigure(table: PulseTable, picture: PulsePicture, svg: string | undefined): Markup {
  if (svg === undefined) return NOTHING;
  const i = table.pulse.indexOf(picture.pulse);
  if (i < 0) return NOTHING;
  const facts = [
    `${withZeros(table.T_K[i]!, 4)} K`,
    `ΔT ${temperatureText(table.dT_K[i]!)}`,
    ...(picture.windows.length === 0 ? [] : [METHOD_WORDS[table.method[i]!]]),
    ...boundaryText(table.boundary_time_s[i]!, table.u_boundary_time_s[i]!),
  ].join(" · ");
  const doubt = doubts(table, i);
  const standing =
    table.used[i] === 0
      ? html`<br><span class="wrong">left out${doubt === "" ? "" : `: ${doubt}`}</span>`
      : doubt === ""
        ? NOTHING
        : html`<br>${doubt}`;
  return html`<figure><details class="pulse"><summary>${trusted(inline(svg))}</summary><p>${measured(table, i)}</p></details>
<figcaption><strong>${picture.pulse}</strong> · ${facts}${standing}</figcaption></figure>
`;
}

function nightDetails(night: NightReport, number: number, figures: Readonly<Record<string, string>>): Markup {
  const { table: pulses, run } = night;
  const overview = figure(
    figures[overviewKey(run)],
    "Total heat capacity of each pulse, cell and sample together, with repeatability.",
  );
  return html`<details class="night" id="night-${number}"><summary><strong>${run}</strong>: ${counted(night.pictures.length, "pulse picture")}, ${
    night.status === "failed" ? "night failed" : `${night.used} of ${counted(night.pulses, "pulse")} used`
  }</summary>
${night.error === undefined ? NOTHING : html`<p class="wrong">${night.error}</p>`}
${overview}
${
  pulses === null || night.pictures.length === 0
    ? NOTHING
    : html`<div class="pictures">
${night.pictures.map((picture) => pulseFigure(pulses, picture, figures[pulseKey(run, picture.pulse)]))}</div>`
}
</details>
`;
}

/** All nights in a table, then each with its overview and the picture of every pulse. */
export function nightsSection(report: CampaignReport, figures: Readonly<Record<string, string>>): Markup {
  return html`<section id="nights"><h2>Nights</h2>
${nightsTable(report)}${scatter(report.between_nights)}
<h3>Every pulse</h3>
<p>Dots: samples. Lines: drift lines carried on to the step (dashed), or a forward model through all of it. Band: heater on. Time is in seconds from the start of the pulse and stretched about it; a gap stands where its scale changes. Strip: residuals in units of the noise, −4 to 4, the band ±2; the rule below it spans what was fitted. Short strokes at an edge lie beyond it. A cross marks a pulse that is left out. Each picture opens large, with axes.</p>
${report.nights.map((night, i) => nightDetails(night, i + 1, figures))}</section>
`;
}
