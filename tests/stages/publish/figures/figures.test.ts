import { expect, test } from "vitest";
import { classicalLines } from "../../../../stages/publish/figures/classical-lines.js";
import { overviewKey, pulseKey, renderFigures } from "../../../../stages/publish/figures/figures.js";
import { svgToPng } from "../../../../stages/publish/figures/png.js";
import { expectRelative } from "../../../expect-relative.js";
import { syntheticCampaign } from "../synthetic-campaign.js";

const campaign = syntheticCampaign({ nights: 3, pulsesPerNight: 12 });
const figures = await renderFigures(campaign);
const { dataset, separation } = campaign;

/** Marks of one kind in each group of an SVG by vega, groups without any left out. */
function marks(svg: string, kind: "symbol" | "rule" | "line"): number[] {
  const groups = svg.split(/<g class="mark-/).filter((group) => group.startsWith(`${kind} role-mark`));
  return groups.map((group) => (group.slice(0, group.indexOf("</g>")).match(/<(path|line)/g) ?? []).length);
}

const total = (counts: readonly number[]) => counts.reduce((sum, each) => sum + each, 0);

test("C(T): axis titles with units, decade labels, a mark and a bar a point, three curves", () => {
  const svg = figures["heat-capacity"]!;
  for (const words of [
    "molar heat capacity Cᵥ (J mol⁻¹ K⁻¹)",
    "temperature T (K)",
    "(C − fit) / fit (%)",
    ">10⁻²<",
    "phonons",
    "rotons",
    "2026-11-10-a",
  ])
    expect(svg).toContain(words);
  expect(total(marks(svg, "symbol"))).toBe(dataset.T_K.length + separation.points);
  // One more: the line at zero.
  expect(total(marks(svg, "rule"))).toBe(dataset.T_K.length + separation.points + 1);
  expect(marks(svg, "line")).toEqual([1, 1, 1]);
});

test("C/T³ against T² and the roton plot: titles, marks and what their lines say", () => {
  const phonons = figures["phonon-plot"]!;
  for (const words of ["T² (K²)", "C/T³ (mJ mol⁻¹ K⁻⁴)", "u₁ = 239.4 ± 1.4 m/s"])
    expect(phonons).toContain(words);
  const carrying = classicalLines(separation).carriesPhonons.filter(Boolean).length;
  expect(total(marks(phonons, "symbol"))).toBeGreaterThanOrEqual(carrying);
  expect(total(marks(phonons, "symbol"))).toBe(total(marks(phonons, "rule")));
  const rotons = figures["roton-plot"]!;
  for (const words of ["1/T (K⁻¹)", "ln[(C − Cₚₕ) / √T(¾ + y + y²)]", "Δ/k = 8.720 ± 0.050 K"])
    expect(rotons).toContain(words);
  expect(total(marks(rotons, "symbol"))).toBe(total(marks(rotons, "rule")));
});

// A curve that is exactly the two lines: C = A T³ + B T⁵ + e^{a − Δ/T} √T (3/4 + y + y²). Then slope and level that the
// separation does not name must come back. Both parts are taken off each other in turn, forty times; the overlap of
// the two shrinks the error to rounding, a few hundred ulps on slopes drawn from differences: 1e-9.
test("the whole of both lines follows from one intercept and one slope", () => {
  const [A, B, level, gap] = [0.083, -0.03, 3, 8.7] as const;
  const T_K = Float64Array.from({ length: 80 }, (_, i) => 0.35 + 0.01 * i);
  const y = (T: number) => gap / T;
  const rotons = (T: number) => Math.exp(level - y(T)) * Math.sqrt(T) * (0.75 + y(T) + y(T) ** 2);
  const phonons = (T: number) => A * T ** 3 + B * T ** 5;
  const u1 = { value: 238, standard_uncertainty: 1, unit: "m/s" };
  const { phonon, roton } = classicalLines({
    ...separation,
    phonon_coefficient: { value: A * 1.01 ** -3, standard_uncertainty: 0, unit: "J/(mol.K4)" },
    sound_speed: { ...u1, value: 238 * 1.01 },
    graphical: { sound_speed: u1, roton_gap: { value: gap, standard_uncertainty: 0.01, unit: "K" } },
    curve: {
      row: Int32Array.from(T_K.keys()),
      T_K,
      Cv_J_per_mol_K: T_K.map((T) => phonons(T) + rotons(T)),
      u_repeat_J_per_mol_K: T_K.map(() => 1e-6),
      fit_J_per_mol_K: T_K.map((T) => phonons(T) + rotons(T)),
      // A fit of another form, a few per cent off in each part.
      phonon_J_per_mol_K: T_K.map((T) => 1.03 * phonons(T)),
      roton_J_per_mol_K: T_K.map((T) => 0.96 * rotons(T)),
    },
  });
  expectRelative([phonon!.intercept, phonon!.slope], [A, B], 1e-9);
  expectRelative([roton!.intercept, roton!.slope], [level, -gap], 1e-9);
});

test("a night's overview tells used, flagged and left-out pulses apart", () => {
  const svg = figures[overviewKey("2026-11-10-a")]!;
  for (const words of ["total heat capacity (J K⁻¹)", ">used<", ">used, flagged<", ">left out<"])
    expect(svg).toContain(words);
  expect(total(marks(svg, "symbol"))).toBe(12);
});

test("each pulse has a picture; the table says which is left out, and how long the boundary takes", () => {
  const { run, pictures, table } = campaign.nights[1]!;
  expect(pictures).toHaveLength(12);
  pictures.forEach((picture, i) => {
    const svg = figures[pulseKey(run, picture.pulse)]!;
    const out = table!.used[i] === 0;
    expect(svg.includes(">left out<")).toBe(out);
    expect(svg.match(/aria-label="([^"]*)"/)![1]).toMatch(
      out ? /^Pulse \d+: .*, left out$/ : /^Pulse \d+: .*, step [\d.]+ mK$/,
    );
    // Four boundary times of 9 s after 5 s of heat, rounded up: the joint is at 50 s.
    if (picture.method === "two-body") expect(svg).toMatch(/>50</);
  });
  expect(pictures.filter(({ method }) => method === "two-body")).toHaveLength(4);
});

test("a night that failed and a separation without results leave their figures out", async () => {
  const bare = await renderFigures({
    ...campaign,
    nights: campaign.nights.filter(({ status }) => status === "failed"),
    separation: {
      ...separation,
      points: 0,
      sound_speed: null,
      roton_gap: null,
      phonon_coefficient: null,
      graphical: { sound_speed: null, roton_gap: null },
      curve: {
        row: new Int32Array(0),
        T_K: new Float64Array(0),
        Cv_J_per_mol_K: new Float64Array(0),
        u_repeat_J_per_mol_K: new Float64Array(0),
        fit_J_per_mol_K: new Float64Array(0),
        phonon_J_per_mol_K: new Float64Array(0),
        roton_J_per_mol_K: new Float64Array(0),
      },
    },
  });
  // The points themselves are still worth a look.
  expect(Object.keys(bare)).toEqual(["heat-capacity"]);
  expect(total(marks(bare["heat-capacity"]!, "symbol"))).toBe(dataset.T_K.length);
});

test("drawing again gives the same bytes", async () => {
  expect(await renderFigures(campaign)).toEqual(figures);
});

test("no figure holds what is no number, and each says what it shows", () => {
  for (const [key, svg] of Object.entries(figures)) {
    expect(svg, key).not.toMatch(/NaN|undefined|Infinity/);
    expect(svg, key).toMatch(/^<svg [^>]*role="img"/);
    expect(svg, key).toContain("aria-label=");
  }
});

test("a figure becomes a PNG of the width asked for", async () => {
  const png = await svgToPng(figures["phonon-plot"]!, 640);
  expect([...png.slice(0, 8)]).toEqual([0x89, 0x50, 0x4e, 0x47, 0x0d, 0x0a, 0x1a, 0x0a]);
  // Width is the first field of the first chunk (PNG specification, IHDR).
  expect(new DataView(png.buffer, png.byteOffset).getUint32(16)).toBe(640);
});
