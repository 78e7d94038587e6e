import { quantileSorted } from "simple-statistics";
import type { FittedCurve, PulsePicture } from "../../pulses/types.js";
import { escapeText } from "../html.js";
import { significant } from "../rounding.js";
import { FONT, VERMILION } from "./look.js";

const WIDTH = 480;
const HEIGHT = 340;
const FRAME = { left: 6, right: 474, top: 8, bottom: 208 };
const STRIP = { top: 222, bottom: 302, reach: 5 };
/** Widths of the drift before, of the pulse and what follows it at once, and of the rest. */
const SHARES = [0.22, 0.4, 0.38] as const;
/** The pulse's part of the time axis lasts this many pulse lengths. */
const NEAR = 3;

type Place = (x: number) => number;

/** A linear map onto whole picture units, held within the frame. */
function scale(from: number, to: number, start: number, end: number): Place {
  const gain = (end - start) / (to - from || 1);
  const [low, high] = [Math.min(start, end), Math.max(start, end)];
  return (x) => Math.round(Math.min(high, Math.max(low, start + gain * (x - from))));
}

/**
 * Time in three linear pieces, stretched about the pulse: a transient of a quarter of an hour would hide what happens in its
 * first ten seconds. Marks at the joints say so.
 */
function timeAxis(from_s: number, to_s: number, duration_s: number): { place: Place; joint_s: number } {
  const joint_s = Math.min(NEAR * duration_s, to_s / 2);
  const width = FRAME.right - FRAME.left - 8;
  const ends = [0, SHARES[0], SHARES[0] + SHARES[1], 1].map((share) => FRAME.left + 4 + share * width);
  // A picture that begins with its pulse, or ends within it, has one piece.
  if (!(from_s < 0 && joint_s > 0)) return { place: scale(from_s, to_s, ends[0]!, ends[3]!), joint_s: to_s };
  const pieces = [
    scale(from_s, 0, ends[0]!, ends[1]!),
    scale(0, joint_s, ends[1]!, ends[2]!),
    scale(joint_s, to_s, ends[2]!, ends[3]!),
  ];
  return { place: (t) => pieces[t < 0 ? 0 : t < joint_s ? 1 : 2]!(t), joint_s };
}

/** The samples as dots: strokes of no length with round ends, each given from the one before, for few bytes. */
function dots(time_s: Float64Array, temperature_K: Float64Array, x: Place, y: Place): string {
  let path = "";
  let [px, py] = [0, 0];
  for (let i = 0; i < time_s.length; i++) {
    if (!Number.isFinite(temperature_K[i]!)) continue;
    const [cx, cy] = [x(time_s[i]!), y(temperature_K[i]!)];
    path += path === "" ? `M${cx} ${cy}h0` : `m${pair(cx - px, cy - py)}h0`;
    [px, py] = [cx, cy];
  }
  return path;
}

/** A curve as relative steps; those that do not move are left out. */
function curve(fit: FittedCurve, x: Place, y: Place): string {
  let path = "";
  let [px, py] = [0, 0];
  for (let i = 0; i < fit.time_s.length; i++) {
    if (!Number.isFinite(fit.temperature_K[i]!)) continue;
    const [cx, cy] = [x(fit.time_s[i]!), y(fit.temperature_K[i]!)];
    if (path === "") path = `M${cx} ${cy}`;
    else if (cx !== px || cy !== py) path += `l${pair(cx - px, cy - py)}`;
    [px, py] = [cx, cy];
  }
  return path;
}

function pair(dx: number, dy: number): string {
  return dy < 0 ? `${dx}${dy}` : `${dx} ${dy}`;
}

/** Range of temperatures: both fits whole, and all samples but the outermost per cent, which stop at the frame. */
function temperatureRange(picture: PulsePicture): [number, number] {
  const samples = picture.temperature_K.filter(Number.isFinite).sort();
  const fits = picture.fits.flatMap(({ temperature_K }) => [...temperature_K]).filter(Number.isFinite);
  const ends =
    samples.length === 0 ? [] : [quantileSorted([...samples], 0.01), quantileSorted([...samples], 0.99)];
  const all = [...ends, ...fits];
  if (all.length === 0) return [0, 1];
  const [low, high] = [Math.min(...all), Math.max(...all)];
  const room = 0.08 * (high - low) || 1e-6;
  return [low - room, high + room];
}

/** Residuals in units of the noise, and where samples lie under a fit. Empty without a fit. */
function residualStrip(picture: PulsePicture, x: Place): string {
  if (picture.windows.length === 0 || !(picture.noise_K > 0)) return "";
  const y = scale(-STRIP.reach, STRIP.reach, STRIP.bottom, STRIP.top);
  const inUnits = picture.residual_K.map((r) => r / picture.noise_K);
  const band = y(2);
  const rules = picture.windows
    .map(({ from_s, to_s }) => `M${x(from_s)} ${STRIP.bottom + 4}H${x(to_s)}`)
    .join("");
  return [
    `<rect x="${FRAME.left}" y="${band}" width="${FRAME.right - FRAME.left}" height="${y(-2) - band}" fill="currentColor" fill-opacity=".08"/>`,
    `<path d="M${FRAME.left} ${y(0)}H${FRAME.right}" stroke="${VERMILION}" stroke-width="2"/>`,
    `<path d="${dots(picture.time_s, inUnits, x, y)}" stroke="currentColor" stroke-width="3.5" stroke-linecap="round" stroke-opacity=".5"/>`,
    `<path d="${rules}" stroke="currentColor" stroke-width="3"/>`,
  ].join("");
}

/**
 * One pulse, small: samples as dots, what was fitted to them, the step, the heater's time as a band; below, the
 * residuals in units of the noise, clamped at ±5, with a band at ±2 and a rule under what was fitted. Strokes follow
 * the colour of the text around, so it reads on light and on dark.
 * @param label what it shows, for readers who do not see it
 * @param standing "left out" crosses it, for readers who do not see colours
 * @returns SVG of at most 5 kB
 */
export function pulsePictureSvg(
  picture: PulsePicture,
  label: string,
  standing: "used" | "left out" = "used",
): string {
  const [from_s, to_s] = [picture.time_s[0] ?? 0, picture.time_s.at(-1) ?? 1];
  const [low_K, high_K] = temperatureRange(picture);
  const { place: x, joint_s } = timeAxis(from_s, to_s, picture.duration_s);
  const y = scale(low_K, high_K, FRAME.bottom - 4, FRAME.top + 4);
  const heaterFrom = x(0);
  const heaterWidth = Math.max(2, x(picture.duration_s) - heaterFrom);
  const { step: read } = picture;
  const step =
    read === null
      ? ""
      : `<path d="M${x(read.time_s)} ${y(read.from_K)}V${y(read.to_K)}" stroke="currentColor" stroke-width="2.5" stroke-dasharray="6 4"/>`;
  const joints = [0, joint_s].filter((t) => t > from_s && t < to_s);
  const marks = joints.map((t) => `M${x(t)} ${FRAME.bottom}v7`).join("");
  const frame = `M${FRAME.left} ${FRAME.top}V${FRAME.bottom}H${FRAME.right}${marks}`;
  const cross =
    standing === "used"
      ? ""
      : `<path d="M${FRAME.left + 6} ${FRAME.top + 4}l22 22m0-22l-22 22" stroke="currentColor" stroke-width="3.5"/>`;
  return [
    `<svg xmlns="http://www.w3.org/2000/svg" viewBox="0 0 ${WIDTH} ${HEIGHT}" role="img" aria-label="${escapeText(label)}" fill="none" font-family="${FONT}" font-size="20">`,
    `<rect x="${heaterFrom}" y="${FRAME.top}" width="${heaterWidth}" height="${FRAME.bottom - FRAME.top}" fill="currentColor" fill-opacity=".12"/>`,
    `<path d="${frame}" stroke="currentColor" stroke-opacity=".5"/>`,
    `<path d="${dots(picture.time_s, picture.temperature_K, x, y)}" stroke="currentColor" stroke-width="4.5" stroke-linecap="round" stroke-opacity=".45"/>`,
    `<path d="${picture.fits.map((fit) => curve(fit, x, y)).join("")}" stroke="${VERMILION}" stroke-width="3" stroke-linejoin="round"/>`,
    step,
    cross,
    residualStrip(picture, x),
    `<g fill="currentColor"><text x="${FRAME.left}" y="334">${timeText(from_s)}</text>`,
    joints
      .filter((t) => t > 0)
      .map((t) => `<text x="${x(t)}" y="334" text-anchor="middle">${timeText(t)}</text>`)
      .join(""),
    `<text x="${FRAME.right}" y="334" text-anchor="end">${timeText(to_s)}</text></g></svg>`,
  ].join("");
}

function timeText(t_s: number): string {
  return `${significant(t_s, 3).replace("-", "−")} s`;
}
