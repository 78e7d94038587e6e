import { quantileSorted } from "simple-statistics";
import type { FittedCurve, PulsePicture } from "../../pulses/types.js";
import { escapeText } from "../html.js";
import { significant } from "../rounding.js";
import { FONT, VERMILION } from "./look.js";

const WIDTH = 480;
const HEIGHT = 250;
const FRAME = { left: 6, right: 474, top: 8, bottom: 218 };

type Place = (x: number) => number;

/** A linear map onto whole picture units, held within the frame. */
function scale(from: number, to: number, start: number, end: number): Place {
  const gain = (end - start) / (to - from || 1);
  const [low, high] = [Math.min(start, end), Math.max(start, end)];
  return (x) => Math.round(Math.min(high, Math.max(low, start + gain * (x - from))));
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

/**
 * One pulse, small: samples as dots, the fit on each side and on to the step, the step itself, the heater's time as
 * a band. Strokes follow the colour of the text around, so it reads on light and on dark.
 * @param label what it shows, for readers who do not see it
 * @returns SVG of at most 3 kB
 */
export function pulsePictureSvg(picture: PulsePicture, label: string): string {
  const [from_s, to_s] = [picture.time_s[0] ?? 0, picture.time_s.at(-1) ?? 1];
  const [low_K, high_K] = temperatureRange(picture);
  const x = scale(from_s, to_s, FRAME.left + 4, FRAME.right - 4);
  const y = scale(low_K, high_K, FRAME.bottom - 4, FRAME.top + 4);
  const heaterFrom = x(0);
  const heaterWidth = Math.max(2, x(picture.duration_s) - heaterFrom);
  const { step: read } = picture;
  const step =
    read === null
      ? ""
      : `<path d="M${x(read.time_s)} ${y(read.from_K)}V${y(read.to_K)}" stroke="currentColor" stroke-width="2.5" stroke-dasharray="6 4"/>`;
  const frame = `M${FRAME.left} ${FRAME.top}V${FRAME.bottom}H${FRAME.right}`;
  return [
    `<svg xmlns="http://www.w3.org/2000/svg" viewBox="0 0 ${WIDTH} ${HEIGHT}" role="img" aria-label="${escapeText(label)}" fill="none" font-family="${FONT}" font-size="20">`,
    `<rect x="${heaterFrom}" y="${FRAME.top}" width="${heaterWidth}" height="${FRAME.bottom - FRAME.top}" fill="currentColor" fill-opacity=".12"/>`,
    `<path d="${frame}" stroke="currentColor" stroke-opacity=".5"/>`,
    `<path d="${dots(picture.time_s, picture.temperature_K, x, y)}" stroke="currentColor" stroke-width="4.5" stroke-linecap="round" stroke-opacity=".45"/>`,
    `<path d="${picture.fits.map((fit) => curve(fit, x, y)).join("")}" stroke="${VERMILION}" stroke-width="3" stroke-linejoin="round"/>`,
    step,
    `<g fill="currentColor"><text x="${FRAME.left}" y="242">${timeText(from_s)}</text>`,
    `<text x="${FRAME.right}" y="242" text-anchor="end">${timeText(to_s)}</text></g></svg>`,
  ].join("");
}

function timeText(t_s: number): string {
  return `${significant(t_s, 3).replace("-", "−")} s`;
}
