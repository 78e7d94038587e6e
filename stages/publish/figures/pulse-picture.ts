import { quantileSorted } from "simple-statistics";
import type { FittedCurve, PulsePicture } from "../../pulses/types.js";
import { escapeText } from "../html.js";
import { temperatureText } from "../words.js";
import { FONT, VERMILION } from "./look.js";
import {
  type Piece,
  placeTime,
  placeWithin,
  temperatureTicks,
  timePieces,
  timeTicks,
  timeWords,
} from "./pulse-axes.js";

/** The picture without axis titles and ticks: what is left of it when it stands small among others. */
export const SMALL = { width: 480, height: 340 } as const;
/** What the large form has around that. */
export const AROUND = { left: 42, right: 6, top: 22, bottom: 6 } as const;

const FRAME = { left: 4, right: 476, top: 6, bottom: 198 };
const STRIP = { top: 226, bottom: 290, reach: 4 };
/** A rule under what was fitted; ticks of the time axis; their words. */
const RULE = 295;
const TICKS = 300;
const WORDS = 317;
const TITLE = 336;
const SMALL_WORDS = 324;
/** Strokes for what lies beyond the frame. */
const BEYOND = 6;
/** Boundary times after which body and liquid differ by 2 % of what they did. */
const SETTLED = 4;

/** What the picture cannot tell from its own columns. */
export interface PulseWords {
  /** What it shows, for readers who do not see it. */
  readonly label: string;
  /** "left out" is said in the picture and marked by a cross, for readers who do not see colours. */
  readonly standing: "used" | "left out";
  /** Time in which body and liquid come to one temperature; NaN where it is not known. */
  readonly boundary_time_s: number;
}

type Place = (x: number) => number;

/** A linear map from values to picture units. */
function scale(from: number, to: number, start: number, end: number): Place {
  const gain = (end - start) / (to - from || 1);
  return (x) => start + gain * (x - from);
}

/**
 * Samples as dots: strokes of no length with round ends, each given from the one before, for few bytes. What lies
 * beyond the frame is a short stroke at its edge.
 */
function dots(
  time_s: Float64Array,
  value: Float64Array,
  x: Place,
  y: Place,
  frame: { top: number; bottom: number },
): string {
  let path = "";
  let [px, py] = [0, 0];
  for (let i = 0; i < time_s.length; i++) {
    const place = y(value[i]!);
    if (!Number.isFinite(place)) continue;
    const [cx, cy] = [
      Math.round(x(time_s[i]!)),
      Math.round(Math.min(frame.bottom, Math.max(frame.top, place))),
    ];
    path += path === "" ? `M${cx} ${cy}` : `m${pair(cx - px, cy - py)}`;
    const stroke = place < frame.top ? BEYOND : place > frame.bottom ? -BEYOND : 0;
    path += stroke === 0 ? "h0" : `v${stroke}`;
    [px, py] = [cx, cy + stroke];
  }
  return path;
}

function dotted(name: "d" | "r", path: string, pen: string): string {
  if (path === "") return "";
  return `<path class="${name}" d="${path}" stroke="currentColor" stroke-linecap="round" ${pen}/>`;
}

type Point = readonly [number, number];

/** A curve, broken where the time axis is. */
function curve(fit: FittedCurve, pieces: readonly Piece[], y: Place, duration_s: number): string {
  const known = Array.from(fit.time_s, (t, i) => [t, fit.temperature_K[i]!] as const).filter(([, T]) =>
    Number.isFinite(T),
  );
  return pieces
    .map((piece) => {
      const { from_s, to_s } = piece;
      const inside = known.filter(([t]) => t > from_s && t < to_s);
      const ends = [from_s, to_s].map((t) => valueAt(known, t, t === 0 || t === duration_s));
      const points = [...ends.slice(0, 1).flat(), ...inside, ...ends.slice(1).flat()];
      return polyline(thinned(points.map(([t, T]) => [placeWithin(piece, t), y(T)] as const)));
    })
    .join("");
}

/**
 * The curve's own point at t; none outside of it. Where heat sets in or stops the curve bends between two of its points,
 * so it is carried on from before; elsewhere it is a straight line between its neighbours.
 */
function valueAt(points: readonly Point[], t: number, bends: boolean): readonly Point[] {
  const next = points.findIndex(([time]) => time >= t);
  if (next < 0) return [];
  const [a, b, c] = [points[next - 2], points[next - 1], points[next]!];
  if (b === undefined || c[0] === t) return c[0] === t ? [c] : [];
  const [from, to] = bends && a !== undefined ? [a, b] : [b, c];
  return [[t, b[1] + ((to[1] - from[1]) * (t - b[0])) / (to[0] - from[0])]];
}

/** Points off the straight line between those kept, by more than the eye sees (Douglas and Peucker 1973). */
function thinned(points: readonly Point[]): readonly Point[] {
  if (points.length < 3) return points;
  const [[x0, y0], [x1, y1]] = [points[0]!, points.at(-1)!];
  const length = Math.hypot(x1 - x0, y1 - y0) || 1;
  let [far, most] = [0, 0.25];
  points.forEach(([px, py], i) => {
    const off = Math.abs((px - x0) * (y1 - y0) - (py - y0) * (x1 - x0)) / length;
    if (off > most) [far, most] = [i, off];
  });
  if (far === 0) return [points[0]!, points.at(-1)!];
  return [...thinned(points.slice(0, far + 1)), ...thinned(points.slice(far)).slice(1)];
}

/** To a tenth of a unit, in steps from point to point. */
function polyline(points: readonly Point[]): string {
  if (points.length < 2) return "";
  const tenths = points.map(([px, py]) => [Math.round(10 * px), Math.round(10 * py)] as const);
  return tenths
    .map(([px, py], i) => {
      if (i === 0) return `M${pair(px / 10, py / 10)}`;
      const [qx, qy] = tenths[i - 1]!;
      return `l${pair((px - qx) / 10, (py - qy) / 10)}`;
    })
    .join("");
}

function pair(dx: number, dy: number): string {
  const second = short(dy);
  return second.startsWith("-") ? short(dx) + second : `${short(dx)} ${second}`;
}

function short(x: number): string {
  return String(x).replace(/^(-?)0\./, "$1.");
}

/** Range of temperatures: fits and step whole, and all samples but the outermost per cent, which stop at the frame. */
function temperatureRange(picture: PulsePicture): [number, number] {
  const samples = picture.temperature_K.filter(Number.isFinite).sort();
  const read = picture.step === null ? [] : [picture.step.from_K, picture.step.to_K];
  const fits = [...picture.fits.flatMap(({ temperature_K }) => [...temperature_K]), ...read].filter(
    Number.isFinite,
  );
  const ends =
    samples.length === 0 ? [] : [quantileSorted([...samples], 0.01), quantileSorted([...samples], 0.99)];
  const all = [...ends, ...fits];
  if (all.length === 0) return [0, 1];
  const [low, high] = [Math.min(...all), Math.max(...all)];
  const room = 0.08 * (high - low) || 1e-6;
  return [low - room, high + room];
}

/** Words of the large form, and those of the small one, which a page shows instead. */
const fine = (texts: string) => `<g class="fine" fill="currentColor" font-size="12">${texts}</g>`;
const coarse = (texts: string) =>
  `<g class="coarse" display="none" fill="currentColor" font-size="21">${texts}</g>`;

function text(x: number, y: number, words: string, anchor: "start" | "middle" | "end" = "start"): string {
  const side = anchor === "start" ? "" : ` text-anchor="${anchor}"`;
  return `<text x="${Math.round(x)}" y="${Math.round(y)}"${side}>${escapeText(words)}</text>`;
}

/** Numbers below an axis of time, as one text. */
function numbersBelow(y: number, places: readonly { readonly at: number; readonly words: string }[]): string {
  const spans = places.map(({ at, words }) => `<tspan x="${Math.round(at)}">${words}</tspan>`);
  return `<text y="${y}" text-anchor="middle">${spans.join("")}</text>`;
}

/** Numbers left of an upright axis, as one text, each by its middle. */
function numbersBeside(places: readonly { readonly at: number; readonly words: string }[]): string {
  const spans = places.map(({ at, words }) => `<tspan x="-4" y="${Math.round(at) + 4}">${words}</tspan>`);
  return `<text text-anchor="end">${spans.join("")}</text>`;
}

function notches(path: string): string {
  return `<path d="${path}" stroke="currentColor"/>`;
}

/** Residuals in units of the noise, and where samples lie under a fit; words where there is no fit. */
function residualStrip(picture: PulsePicture, pieces: readonly Piece[], x: Place): string {
  if (picture.windows.length === 0 || !(picture.noise_K > 0)) {
    const words = picture.windows.length === 0 ? "nothing fitted" : "noise not known";
    const nothing = text(FRAME.left, (STRIP.top + STRIP.bottom) / 2 + 6, words);
    return fine(nothing) + coarse(nothing);
  }
  const y = scale(-STRIP.reach, STRIP.reach, STRIP.bottom, STRIP.top);
  const inUnits = picture.residual_K.map((r) => r / picture.noise_K);
  const across = (height: number) =>
    pieces.map(({ start, end }) => `M${tidy(start)} ${height}H${tidy(end)}`).join("");
  const rules = picture.windows
    .flatMap(({ from_s, to_s }) =>
      pieces
        .filter((piece) => to_s > piece.from_s && from_s < piece.to_s)
        .map((piece) => `M${tidy(placeWithin(piece, from_s))} ${RULE}H${tidy(placeWithin(piece, to_s))}`),
    )
    .join("");
  const units = [-4, -3, -2, -1, 0, 1, 2, 3, 4];
  const numbered = units.filter((r) => r % 2 === 0);
  const axis = [
    notches(units.map((r) => `M${FRAME.left} ${y(r)}h${r % 2 === 0 ? -5 : -3}`).join("")),
    numbersBeside(numbered.map((r) => ({ at: y(r), words: String(r).replace("-", "−") }))),
    text(FRAME.left, STRIP.top - 9, `residual / noise (noise ${temperatureText(picture.noise_K)})`),
  ].join("");
  return [
    `<path d="${across(y(0))}" stroke="currentColor" stroke-opacity=".09" stroke-width="${y(-2) - y(2)}"/>`,
    `<path d="${across(y(0))}" stroke="${VERMILION}" stroke-width="1.5"/>`,
    dotted("r", dots(picture.time_s, inUnits, x, y, STRIP), 'stroke-width="3" stroke-opacity=".6"'),
    `<path d="${rules}" stroke="currentColor" stroke-width="1.6"/>`,
    fine(axis),
  ].join("");
}

function tidy(x: number): string {
  return String(Math.round(10 * x) / 10);
}

/** Ticks and words of the time axis, for both forms. */
function timeMarks(pieces: readonly Piece[]): string {
  const ticks = timeTicks(pieces);
  const [first, last] = [pieces[0]!, pieces.at(-1)!];
  // Small, there is room for the start of the pulse and for the last change of scale.
  const joints = pieces.slice(1).filter((piece) => piece.from_s === 0 || piece === last);
  const large = [
    notches(ticks.map(({ at, words }) => `M${tidy(at)} ${TICKS}v${words === "" ? 3 : 5}`).join("")),
    numbersBelow(
      WORDS,
      ticks.filter(({ words }) => words !== ""),
    ),
    text((FRAME.left + FRAME.right) / 2, TITLE, "time from the start of the pulse / s", "middle"),
  ].join("");
  const small = [
    text(FRAME.left, SMALL_WORDS, timeWords(first.from_s)),
    numbersBelow(
      SMALL_WORDS,
      joints.map(({ from_s, start }) => ({ at: start, words: timeWords(from_s) })),
    ),
    text(FRAME.right, SMALL_WORDS, `${timeWords(last.to_s)} s`, "end"),
  ].join("");
  return fine(large) + coarse(small);
}

/**
 * One pulse: samples as dots, what was fitted to them, the step, the heater's time as a band; below, the residuals in
 * units of the noise, from −4 to 4, with a band at ±2 and a rule under what was fitted. What lies beyond either frame
 * is a stroke at its edge. Time is stretched about the pulse, with a gap wherever its scale changes. Strokes follow the
 * colour of the text around, so it reads on light and on dark.
 *
 * As it stands this is the large form, with titles and ticks (class "fine"). A page that shows it small hides those,
 * shows the few words of class "coarse" and crops to `SMALL`.
 * @returns SVG of at most 6 kB
 */
export function pulsePictureSvg(picture: PulsePicture, about: PulseWords): string {
  const [from_s, to_s] = [picture.time_s[0] ?? 0, picture.time_s.at(-1) ?? 1];
  const { duration_s, step } = picture;
  const [low_K, high_K] = temperatureRange(picture);
  const pieces = timePieces(
    { from_s, to_s },
    { duration_s, settled_s: settledBy_s(picture, about.boundary_time_s) },
    FRAME.left + 4,
    FRAME.right - 4,
  );
  const x: Place = (t) => placeTime(pieces, t);
  const y = scale(low_K, high_K, FRAME.bottom - 4, FRAME.top + 4);
  const { title, ticks } = temperatureTicks(low_K, high_K, step?.from_K ?? Number.NaN);
  const heaterFrom = Math.round(x(0));
  const heaterWidth = Math.max(2, Math.round(heaterTo(pieces, duration_s)) - heaterFrom);
  const ground = pieces
    .map(({ start, end }, i) => {
      const [a, b] = [i === 0 ? FRAME.left : start, i === pieces.length - 1 ? FRAME.right : end];
      return `M${tidy(a)} ${FRAME.bottom}H${tidy(b)}`;
    })
    .join("");
  const axis = [
    notches(ticks.map(({ temperature_K }) => `M${FRAME.left} ${tidy(y(temperature_K))}h-5`).join("")),
    numbersBeside(ticks.map(({ temperature_K, words }) => ({ at: y(temperature_K), words }))),
    text(FRAME.left, -8, title),
    text(FRAME.right - 22, -8, `heater on for ${timeWords(duration_s)} s`, "end"),
  ].join("");
  const viewBox = [
    -AROUND.left,
    -AROUND.top,
    SMALL.width + AROUND.left + AROUND.right,
    SMALL.height + AROUND.top + AROUND.bottom,
  ];
  return [
    `<svg xmlns="http://www.w3.org/2000/svg" viewBox="${viewBox.join(" ")}" role="img" aria-label="${escapeText(about.label)}" fill="none" font-family="${FONT}">`,
    `<rect x="${heaterFrom}" y="${FRAME.top}" width="${heaterWidth}" height="${FRAME.bottom - FRAME.top}" fill="currentColor" fill-opacity=".12"/>`,
    `<path d="M${FRAME.left} ${FRAME.top}V${FRAME.bottom}${ground}" stroke="currentColor" stroke-opacity=".5"/>`,
    dotted(
      "d",
      dots(picture.time_s, picture.temperature_K, x, y, FRAME),
      'stroke-width="3.5" stroke-opacity=".5"',
    ),
    fittedLines(picture, pieces, y),
    stepLine(step, x, y),
    leftOut(about.standing),
    fine(axis),
    residualStrip(picture, pieces, x),
    timeMarks(pieces),
    "</svg>",
  ].join("");
}

function fittedLines({ fits, duration_s }: PulsePicture, pieces: readonly Piece[], y: Place): string {
  const path = fits.map((fit) => curve(fit, pieces, y, duration_s)).join("");
  if (path === "") return "";
  return `<path class="f" d="${path}" stroke="${VERMILION}" stroke-width="2" stroke-linejoin="round"/>`;
}

function stepLine(step: PulsePicture["step"], x: Place, y: Place): string {
  if (step === null || !Number.isFinite(step.time_s + step.from_K + step.to_K)) return "";
  return `<path class="f" d="M${tidy(x(step.time_s))} ${tidy(y(step.from_K))}V${tidy(y(step.to_K))}" stroke="currentColor" stroke-width="2" stroke-dasharray="6 4"/>`;
}

/** When the cell is one body again: by the boundary time, and never before drift lines say so; 0 where neither is known. */
function settledBy_s({ duration_s, windows }: PulsePicture, boundary_time_s: number): number {
  const byBoundary = Number.isFinite(boundary_time_s) ? duration_s + SETTLED * boundary_time_s : 0;
  return Math.max(byBoundary, windows.at(-1)?.from_s ?? 0);
}

/** The right edge of the heater's band: the end of the pulse, before any gap that follows it. */
function heaterTo(pieces: readonly Piece[], duration_s: number): number {
  const piece = pieces.find(({ to_s }) => duration_s <= to_s) ?? pieces.at(-1)!;
  return placeWithin(piece, duration_s);
}

function leftOut(standing: PulseWords["standing"]): string {
  if (standing === "used") return "";
  const [left, top] = [FRAME.left + 8, FRAME.top + 6];
  return [
    `<path d="M${left} ${top}l20 20m0-20l-20 20" stroke="currentColor" stroke-width="3"/>`,
    fine(text(left + 28, top + 15, "left out")),
    coarse(text(left + 28, top + 18, "left out")),
  ].join("");
}
