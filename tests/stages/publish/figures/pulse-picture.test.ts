import { expect, test } from "vitest";
import { normal, pcg32 } from "../../../../stages/numerics/random.js";
import { VERMILION } from "../../../../stages/publish/figures/look.js";
import { placeTime, timePieces } from "../../../../stages/publish/figures/pulse-axes.js";
import { type PulseWords, pulsePictureSvg } from "../../../../stages/publish/figures/pulse-picture.js";
import type { PulsePicture } from "../../../../stages/pulses/types.js";
import {
  driftPicture,
  notFitted,
  OVERHEATING,
  overheating,
  overheatingPicture,
} from "../synthetic-campaign.js";

const gauss = normal(pcg32(31));
const PULSE = { pulse: 1, base_K: 0.6441, dT_K: 0.0129, noise_K: 1.5e-4 };
const drift = driftPicture(PULSE, gauss);
const model = overheatingPicture(PULSE, gauss);
const about: PulseWords = { label: "a pulse", standing: "used", boundary_time_s: Number.NaN };

/** Every sample of one path: where it stands and the stroke it makes, "h0" or one from the edge. */
function samples(svg: string, name: "d" | "r") {
  const path = svg.match(new RegExp(`<path class="${name}" d="([^"]*)"`))![1]!;
  let [x, y] = [0, 0];
  return [...path.matchAll(/([Mm])(-?\d+)[ ]?(-?\d+)(h0|v-?\d+)/g)].map(([, move, dx, dy, stroke]) => {
    [x, y] = move === "M" ? [Number(dx), Number(dy)] : [x + Number(dx), y + Number(dy)];
    const at = { x, y, stroke: stroke! };
    if (stroke!.startsWith("v")) y += Number(stroke!.slice(1));
    return at;
  });
}

/** Where the numbers beside the strip stand, by their words. */
function residualNumbers(svg: string): Map<string, number> {
  const numbers = [...svg.matchAll(/<tspan x="-4" y="(\d+)">(−?\d+)<\/tspan>/g)].slice(-5);
  return new Map(numbers.map(([, y, words]) => [words!, Number(y) - 4]));
}

function withFirstResidual(picture: PulsePicture, units: number): PulsePicture {
  const residual_K = picture.residual_K.map((r) => (Number.isFinite(r) ? 0 : Number.NaN));
  residual_K[residual_K.findIndex(Number.isFinite)] = units * picture.noise_K;
  return { ...picture, residual_K };
}

test("drift lines: samples, two lines, the step and residuals where they were fitted", () => {
  const svg = pulsePictureSvg(drift, about);
  expect(samples(svg, "d")).toHaveLength(drift.time_s.length);
  expect(samples(svg, "r")).toHaveLength(drift.residual_K.filter(Number.isFinite).length);
  expect(svg).toContain("stroke-dasharray");
  expect(svg).toContain("residual / noise (noise 150 µK)");
  // No residuals within the pulse.
  const pieces = timePieces(
    { from_s: drift.time_s[0]!, to_s: drift.time_s.at(-1)! },
    { duration_s: 8, settled_s: 8 },
    8,
    472,
  );
  const [start, end] = [placeTime(pieces, 0.5), placeTime(pieces, 7.5)];
  expect(samples(svg, "r").filter(({ x }) => x > start && x < end)).toHaveLength(0);
});

test("a forward model: one curve through everything, with residuals during the pulse too", () => {
  const svg = pulsePictureSvg(model, { ...about, boundary_time_s: OVERHEATING.boundary_s });
  // The pulse has a piece of its own here; it ends where the heater's band does.
  const [, left, width] = svg.match(/<rect x="(\d+)" y="\d+" width="(\d+)"/)!.map(Number);
  const during = model.time_s.filter((t) => t > 0 && t < OVERHEATING.duration_s).length;
  expect(during).toBeGreaterThan(5);
  const shown = samples(svg, "r").filter(({ x }) => x > left! && x < left! + width!);
  expect(shown.length).toBeGreaterThanOrEqual(during - 1);
  // One curve, in four pieces of time.
  const curve = svg.match(new RegExp(`<path class="f" d="([^"]*)" stroke="${VERMILION}"`))![1]!;
  expect(curve.match(/M/g)).toHaveLength(4);
});

test("a residual of r noises stands at the height of the number r, more than four at the edge as a stroke", () => {
  for (const picture of [drift, model]) {
    const first = (units: number) =>
      samples(pulsePictureSvg(withFirstResidual(picture, units), about), "r")[0]!;
    const numbers = residualNumbers(pulsePictureSvg(picture, about));
    expect([...numbers.keys()]).toEqual(["−4", "−2", "0", "2", "4"]);
    const unit = (numbers.get("0")! - numbers.get("4")!) / 4;
    expect(unit).toBeGreaterThan(5);
    for (const units of [-4, -2, 0, 2, 3, 4]) {
      expect(first(units).y).toBe(numbers.get("0")! - units * unit);
      expect(first(units).stroke).toBe("h0");
    }
    // Strokes point inwards, so that they stay within the strip.
    expect(first(100)).toMatchObject({ y: numbers.get("4"), stroke: "v6" });
    expect(first(-4.3)).toMatchObject({ y: numbers.get("−4"), stroke: "v-6" });
  }
});

test("the light band spans two noises to either side, and a rule what was fitted", () => {
  const svg = pulsePictureSvg(drift, about);
  const numbers = residualNumbers(svg);
  const width = Number(svg.match(/stroke-opacity="\.09" stroke-width="(\d+)"/)![1]);
  expect(width).toBe(numbers.get("−2")! - numbers.get("2")!);
  const rule = svg.match(/<path d="([^"]*)" stroke="currentColor" stroke-width="1\.6"/)![1]!;
  const spans = [...rule.matchAll(/M([\d.]+) \d+H([\d.]+)/g)].map(([, from, to]) => [
    Number(from),
    Number(to),
  ]);
  const pieces = timePieces(
    { from_s: drift.time_s[0]!, to_s: drift.time_s.at(-1)! },
    { duration_s: 8, settled_s: 8 },
    8,
    472,
  );
  // Before; after the pulse up to the joint; the rest. Given to a tenth of a unit.
  expect(spans).toHaveLength(3);
  expect(Math.abs(spans[0]![0]! - placeTime(pieces, -60))).toBeLessThan(0.051);
  expect(Math.abs(spans[1]![0]! - placeTime(pieces, 8))).toBeLessThan(0.051);
  expect(Math.abs(spans[2]![1]! - placeTime(pieces, 188.6))).toBeLessThan(0.051);
});

test("samples stand where their ticks say", () => {
  const time_s = Float64Array.of(-60, -20, 0, 5, 25, 100, 150);
  const temperature_K = Float64Array.of(0.64, 0.645, 0.65, 0.65, 0.65, 0.65, 0.66);
  const residual_K = temperature_K.map(() => Number.NaN);
  const svg = pulsePictureSvg({ ...notFitted(drift), time_s, temperature_K, residual_K }, about);
  const numbers = new Map(
    [...svg.matchAll(/<tspan x="(\d+)">([−\d.]+)<\/tspan>/g)].map(([, x, words]) => [words!, Number(x)]),
  );
  const drawn = samples(svg, "d");
  for (const [i, words] of [
    [0, "−60"],
    [2, "0"],
    [3, "5"],
    [4, "25"],
    [5, "100"],
  ] as const)
    expect(drawn[i]!.x).toBe(numbers.get(words));
  // Ten mK apart, to the rounding of both to whole units.
  const heights = [...svg.matchAll(/<tspan x="-4" y="(\d+)">(−?\d+)</g)].map(([, y, words]) => [
    Number(words),
    Number(y),
  ]);
  const perMilliKelvin = (heights[0]![1]! - heights.at(-1)![1]!) / (heights.at(-1)![0]! - heights[0]![0]!);
  expect(Math.abs(drawn[2]!.y - drawn[1]!.y + 5 * perMilliKelvin)).toBeLessThan(2);
});

test("a pulse left out says so and is crossed, one used is not", () => {
  const out = pulsePictureSvg(drift, { ...about, standing: "left out" });
  expect(out.match(/>left out</g)).toHaveLength(2);
  expect(out).toContain("l20 20m0-20l-20 20");
  const used = pulsePictureSvg(drift, about);
  expect(used).not.toContain("left out");
  expect(used).not.toContain("l20 20m0-20l-20 20");
});

test("a pulse without fits, step, noise or samples is still drawn, and says what is missing", () => {
  const none = { time_s: new Float64Array(0), temperature_K: new Float64Array(0) };
  const unfitted = pulsePictureSvg(notFitted(drift), about);
  expect(unfitted).toContain(">nothing fitted<");
  expect(unfitted).not.toContain("stroke-dasharray");
  const poor: readonly PulsePicture[] = [
    notFitted(drift),
    { ...drift, noise_K: Number.NaN },
    { ...drift, step: { time_s: 4, from_K: Number.NaN, to_K: Number.NaN } },
    { ...drift, ...none, residual_K: none.time_s, fits: [none], windows: [], step: null },
    { ...drift, temperature_K: drift.temperature_K.map(() => Number.NaN) },
    { ...drift, temperature_K: drift.temperature_K.map(() => 0.5), fits: [], step: null },
    {
      ...model,
      fits: model.fits.map((fit) => ({ ...fit, temperature_K: fit.temperature_K.map(() => Number.NaN) })),
    },
  ];
  for (const picture of poor)
    expect(pulsePictureSvg(picture, { ...about, label: 'a <pulse> & "so"' })).not.toMatch(
      /NaN|undefined|Infinity|<pulse>|""/,
    );
});

test("a label is text", () => {
  expect(pulsePictureSvg(drift, { ...about, label: `<b>"&'` })).toContain(
    'aria-label="&lt;b&gt;&quot;&amp;&#39;"',
  );
});

test("a picture has both forms in at most 6 kB", () => {
  for (const picture of [drift, model, notFitted(drift)])
    for (const standing of ["used", "left out"] as const) {
      const svg = pulsePictureSvg(picture, { ...about, standing, boundary_time_s: 9 });
      expect(Buffer.byteLength(svg)).toBeLessThanOrEqual(6000);
      expect(svg).toContain("time from the start of the pulse / s");
      expect(svg).toContain('class="coarse" display="none"');
    }
});

// What the pictures are drawn from must be a cell: both exponentials solve the equations they are said to solve.
test("the overheating body keeps its heat: leak and rest add up to what went in", () => {
  const { body_share, boundary_s, link_s, duration_s } = OVERHEATING;
  // Before any leak counts, the body alone rises by heat over its own share.
  const early = 1e-3;
  expect(overheating(early) / (early / duration_s / body_share)).toBeCloseTo(1, 3);
  // All heat leaves by the link in the end: ∫ k θ_b dt = 1. Simpson's rule in two parts, past 30 link times.
  const simpson = (from: number, to: number, n: number) => {
    const h = (to - from) / n;
    let sum = overheating(from) + overheating(to);
    for (let i = 1; i < n; i++) sum += (i % 2 === 1 ? 4 : 2) * overheating(from + i * h);
    return (sum * h) / 3;
  };
  const area =
    simpson(0, duration_s, 400) +
    simpson(duration_s, 40 * boundary_s, 4000) +
    simpson(40 * boundary_s, 32 * link_s, 20_000);
  // e⁻³⁰ is left, and Simpson's rule is good to 1e-9 at these steps.
  expect(Math.abs(area / link_s - 1)).toBeLessThan(1e-8);
});
