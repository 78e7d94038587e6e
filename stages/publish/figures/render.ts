import type { TopLevelSpec } from "vega-lite";
import { escapeText } from "../html.js";

/**
 * A vega-lite figure as SVG. The libraries are loaded on first use: they cost a quarter of a second.
 * @param label what the figure shows, in a sentence, for readers who do not see it
 * @returns the same bytes for the same arguments
 */
export async function renderSvg(spec: TopLevelSpec, label: string): Promise<string> {
  const [{ parse, View }, { compile }] = await Promise.all([import("vega"), import("vega-lite")]);
  const view = new View(parse(compile(spec).spec), { renderer: "none" });
  try {
    return labelled(tidied(await view.toSVG()), label);
  } finally {
    view.finalize();
  }
}

/**
 * Places to a thousandth of a pixel: what differs beyond is the last bits of a processor's logarithm. Ticks without a
 * label leave an empty text each, more than half of the figure.
 */
function tidied(svg: string): string {
  return svg
    .replace(/<text [^>]*\/>/g, "")
    .replace(/ (?:transform|d|[xy]2?)="[^"]*"/g, (attribute) =>
      attribute.replace(/-?\d+\.\d{4,}(?:e-?\d+)?/g, (digits) => String(Number(Number(digits).toFixed(3)))),
    );
}

function labelled(svg: string, label: string): string {
  return svg.replace("<svg ", `<svg role="img" aria-label="${escapeText(label)}" `);
}
