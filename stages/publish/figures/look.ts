import type { Config } from "vega-lite";

/**
 * Colours that differ in lightness as well as in hue, so that they part in grey print and for the colour-blind
 * (after Okabe and Ito, "Color universal design" (2008), darkened for thin marks). Shapes and dashes say it again.
 */
export const INK = "#1c2126";
export const DARK_BLUE = "#0b3c6f";
export const VERMILION = "#c8501e";
export const GREEN = "#0f7d62";
export const GREY = "#6b7278";

/** Nights in turn: colour i mod 6, shape shifted each time round, so that 36 nights look different. */
const NIGHT_COLOURS = [DARK_BLUE, "#d98a1f", GREEN, "#7b3f86", "#4b96c9", "#4a4f54"];
const NIGHT_SHAPES = ["circle", "square", "triangle-up", "diamond", "triangle-down", "cross"];

/** How each night is drawn. Nights are those that occur, in order of their names. */
export function nightStyles(run: readonly string[]) {
  const nights = [...new Set(run)].sort();
  const styles = new Map(
    nights.map((night, i) => [
      night,
      { colour: NIGHT_COLOURS[i % 6]!, shape: NIGHT_SHAPES[(i + Math.floor(i / 6)) % 6]! },
    ]),
  );
  return { nights, of: (night: string) => styles.get(night)! };
}

/**
 * Faces that some machine is sure to have; the last is whatever stands for sans-serif there. Those with all the raised
 * and lowered signs come before those without: a renderer that misses one sign may set the whole line in another face.
 */
export const FONT = "Helvetica Neue, Arial, Noto Sans, DejaVu Sans, Liberation Sans, sans-serif";

/** White ground: a figure is read the same on paper, on a light page and on a dark one. */
export const LOOK: Config = {
  background: "#ffffff",
  font: FONT,
  padding: 10,
  aria: false,
  view: { stroke: INK, strokeWidth: 0.8, fill: null },
  axis: {
    grid: false,
    domain: false,
    tickColor: INK,
    tickWidth: 0.8,
    labelColor: INK,
    labelFontSize: 12,
    labelPadding: 5,
    titleColor: INK,
    titleFontSize: 13,
    titleFontWeight: "normal",
    titlePadding: 9,
  },
  legend: {
    title: null,
    labelColor: INK,
    labelFontSize: 11.5,
    symbolSize: 55,
    symbolStrokeWidth: 1.2,
    rowPadding: 3,
    offset: 10,
    symbolLimit: 40,
  },
  text: { font: FONT, fontSize: 12, color: INK },
};
