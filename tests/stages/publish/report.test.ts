import { expect, test } from "vitest";
import { CAUTIONS } from "../../../stages/publish/cautions.js";
import { renderFigures } from "../../../stages/publish/figures/figures.js";
import { reportHtml } from "../../../stages/publish/report.js";
import { syntheticCampaign } from "./synthetic-campaign.js";

// Two hundred pulses of five nights: the size of a real campaign.
const campaign = syntheticCampaign({ nights: 5, pulsesPerNight: 40 });
const figures = await renderFigures(campaign);
const page = reportHtml(campaign, figures);

test("every section is there, and every link within the page has its target", () => {
  for (const id of [
    "separation",
    "budget",
    "gates",
    "nights",
    "addenda",
    "method",
    "configuration",
    "provenance",
    "cautions",
  ])
    expect(page).toContain(`<section id="${id}">`);
  const targets = [...page.matchAll(/href="#([^"]+)"/g)].map((match) => match[1]!);
  expect(targets.length).toBeGreaterThan(9);
  for (const target of targets) expect(page).toContain(`id="${target}"`);
});

test("the first screen holds Δ and u₁ with uncertainty, what they agree with, the verdict and C(T)", () => {
  const first = page.slice(0, page.indexOf("<nav"));
  expect(first).toContain("8.683 ± 0.011");
  expect(first).toContain("238.12 ± 0.61");
  expect(first).toContain("agrees with 238.30(10) m/s");
  expect(first).toContain("All 2 quality gates passed.");
  expect(first).toContain("1 night could not be reduced.");
  expect(first).toContain("molar heat capacity");
});

test("a gate that failed stands before the results", () => {
  const gates = [
    ...campaign.gates,
    { name: "scatter", passed: false, words: "Birge ratio 2.4; at most 1.5 wanted" },
  ];
  const marked = reportHtml({ ...campaign, gates }, figures);
  const place = marked.indexOf("1 quality gate failed");
  expect(place).toBeGreaterThan(0);
  expect(place).toBeLessThan(marked.indexOf("8.683 ± 0.011"));
  expect(marked.slice(place, place + 300)).toContain("Birge ratio 2.4");
});

test("every pulse has its picture, flags are in words, and so are vetoes and failures", () => {
  const pictures = campaign.nights.reduce((sum, night) => sum + night.pictures.length, 0);
  expect(page.match(/aria-label="Pulse \d+:/g)).toHaveLength(pictures);
  expect(page).toContain("too many spikes under the fit");
  expect(page).toContain("vetoed in run.yaml; door slammed");
  expect(page).toContain("thermometer.csv: the log is empty");
});

test("each picture is one SVG in a disclosure, opened by keyboard as by hand, of at most 6 kB with its words", () => {
  const figure =
    /<figure><details class="pulse"><summary><svg[\s\S]*?<\/svg><\/summary><p>[^<]+<\/p><\/details>\n<figcaption>[\s\S]*?<\/figcaption><\/figure>/g;
  const pictures = campaign.nights.reduce((sum, night) => sum + night.pictures.length, 0);
  const drawn = page.match(figure)!;
  expect(drawn).toHaveLength(pictures);
  for (const each of drawn) expect(Buffer.byteLength(each)).toBeLessThanOrEqual(6000);
});

test("captions name the method, the boundary time where there is one, and why a pulse is left out", () => {
  const captions = [...page.matchAll(/<figcaption><strong>(\d+)<\/strong>([\s\S]*?)<\/figcaption>/g)];
  const of = (pulse: number) =>
    captions.filter(([, number]) => Number(number) === pulse).map(([, , words]) => words!);
  for (const words of of(1)) expect(words).toContain("two bodies · boundary 9.00(21) s");
  for (const words of of(2)) {
    expect(words).toContain("drift lines");
    expect(words).not.toContain("boundary");
  }
  for (const words of of(4)) expect(words).toContain("left out: vetoed in run.yaml; door slammed");
  // Nothing was fitted, so no method is named.
  for (const words of of(9)) {
    expect(words).toContain("left out: samples missing under the fit");
    expect(words).not.toContain("drift lines");
  }
});

test("the forms stand side by side, with the model's own part of the gap", () => {
  expect(page).toContain("Landau form, phonons T³ T⁵ T⁷");
  // 8.731 K less 8.683 K, the two gaps of the synthetic campaign.
  expect(page).toContain("Here the Landau form gives 0.048 K more than the whole curve (0.55 %)");
  expect(page).toContain("effective gap");
});

test("cautions, configuration and hashes are on the page", () => {
  expect(CAUTIONS.length).toBeGreaterThan(4);
  for (const caution of CAUTIONS) expect(page).toContain(caution.replaceAll("'", "&#39;"));
  expect(page).toContain("window: [0.35 K, 1.15 K]");
  for (const { sha256 } of campaign.provenance.inputs) expect(page).toContain(sha256);
});

test("nothing is loaded from anywhere, and nothing runs", () => {
  expect(page).not.toMatch(/https?:|\/\/[a-z]/i);
  expect(page).not.toMatch(/<script|<link|<img|<iframe|@import|url\(|\son\w+=/i);
  expect(page).toContain("default-src 'none'");
});

test("nothing on the page is undefined or no number", () => {
  expect(page).not.toMatch(/undefined|NaN|Infinity|\[object|null/);
});

test("words of people are text, never markup", async () => {
  const evil = `<b onclick="x()">&'`;
  const nights = campaign.nights.map((night) => ({
    ...night,
    notes: [evil],
    error: evil,
    flags: [{ words: evil, count: 1 }],
    table: night.table === null ? null : { ...night.table, reason: night.table.reason.map(() => evil) },
  }));
  const hostile = {
    ...campaign,
    nights,
    campaign: evil,
    cell: evil,
    sample: evil,
    substance: evil,
    condition: evil,
    amount: evil,
    molar_volume: evil,
    temperature_scale: evil,
    configuration: evil,
    cautions: [evil],
    gates: [{ name: evil, passed: false, words: evil }],
    addenda: { ...campaign.addenda, description: evil },
    comparisons: campaign.comparisons.map((each) => ({ ...each, source: evil })),
    separation: { ...campaign.separation, missing: [evil], roton_gap: null },
    dataset: { ...campaign.dataset, run: campaign.dataset.run.map(() => evil) },
  };
  const escaped = reportHtml(hostile, await renderFigures(hostile));
  expect(escaped).not.toContain("<b ");
  expect(escaped).toContain("&lt;b onclick=&quot;x()&quot;&gt;&amp;&#39;");
});

test("figures are labelled and tables have captions and scopes", () => {
  expect(page.match(/<svg/g)!.length).toBe(page.match(/<svg [^>]*aria-label=/g)!.length);
  expect(page.match(/<table/g)!.length).toBe(page.match(/<caption>/g)!.length);
  expect(page.match(/<th[ >]/g)!.length).toBe(page.match(/<th scope="(row|col)"/g)!.length);
});

test("the page of two hundred pulses stays below 3 MB, and is the same each time", async () => {
  expect(Buffer.byteLength(page)).toBeLessThan(3_000_000);
  expect(reportHtml(campaign, await renderFigures(campaign))).toBe(page);
});

test("a page without figures or results still stands", () => {
  const { separation } = campaign;
  const bare = reportHtml(
    {
      ...campaign,
      nights: [],
      gates: [],
      comparisons: [],
      between_nights: undefined,
      separation: {
        ...separation,
        sound_speed: null,
        roton_gap: null,
        phonon_coefficient: null,
        roton_amplitude: null,
        parameters: [],
        alternatives: [],
        aicc: Number.POSITIVE_INFINITY,
        chi_squared: Number.NaN,
        correlation: { names: [], matrix: [] },
        graphical: { sound_speed: null, roton_gap: null },
        missing: ["too few points"],
      },
      budget: { lines: [], u_sound_speed_m_per_s: Number.NaN, u_roton_gap_K: Number.NaN },
    },
    {},
  );
  expect(bare).not.toMatch(/undefined|NaN|Infinity|\[object|null/);
  expect(bare).toContain("not found");
  expect(bare).toContain("too few points");
});
