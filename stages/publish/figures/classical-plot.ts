import type { TopLevelSpec } from "vega-lite";
import { linearDomain } from "./axis.js";
import type { PlotLine, PlotPoint } from "./classical-lines.js";
import { DARK_BLUE, INK, LOOK, VERMILION } from "./look.js";

const WIDTH = 460;

/** What a plot of points and one straight line needs. */
export interface ClassicalPlot {
  readonly points: readonly PlotPoint[];
  readonly line: PlotLine | null;
  readonly x: string;
  readonly y: string;
  /** "zero": the abscissa starts at 0, where the intercept is read. */
  readonly from: "zero" | "data";
  /** What the line says, written in a corner. */
  readonly words: string | null;
}

/** Full points carry the line, open ones are only shown; the line is dashed where it is only continued. */
export function classicalPlotSpec(plot: ClassicalPlot): TopLevelSpec {
  const { points, line } = plot;
  const [low, high] = linearDomain(
    points.map(({ x }) => x),
    0.04,
  );
  const x_domain: [number, number] = [plot.from === "zero" ? 0 : low, high];
  const at = (abscissa: number) => ({ x: abscissa, y: line!.intercept + line!.slope * abscissa });
  const heights = points.flatMap(({ low, high }) => [low, high]);
  // Beyond the last point that carries it, a line to an intercept says nothing more.
  const carrying = points.filter(({ carries }) => carries).map((point) => point.x);
  const span: [number, number] =
    carrying.length === 0 ? x_domain : [Math.min(...carrying), Math.max(...carrying)];
  const line_to = plot.from === "zero" ? span[1] : x_domain[1];
  const y_domain = linearDomain(
    line === null ? heights : [...heights, at(x_domain[0]).y, at(line_to).y],
    0.06,
  );

  const x = {
    field: "x",
    type: "quantitative",
    scale: { domain: x_domain, nice: false, zero: false },
    axis: { title: plot.x, tickCount: 6, labelFlush: false, labelOverlap: false },
  } as const;
  const y = {
    field: "y",
    type: "quantitative",
    scale: { domain: y_domain, nice: false, zero: false },
    axis: { title: plot.y, tickCount: 6, minExtent: 40 },
  } as const;
  const rules = {
    data: { values: points.map(({ x, low, high }) => ({ x, low, high })) },
    mark: { type: "rule" as const, strokeWidth: 0.8, color: DARK_BLUE },
    encoding: { x, y: { ...y, field: "low" }, y2: { field: "high" } },
  };
  // Open points go below the line, full ones below it too: where they crowd, the line must still be seen.
  const marks = [false, true].map((carries) => ({
    data: { values: points.filter((point) => point.carries === carries).map(({ x, y }) => ({ x, y })) },
    mark: {
      type: "point" as const,
      size: 26,
      strokeWidth: 1,
      stroke: DARK_BLUE,
      fill: carries ? DARK_BLUE : "#ffffff",
      opacity: 1,
    },
    encoding: { x, y },
  }));
  return {
    config: LOOK,
    width: WIDTH,
    height: 330,
    layer: [rules, ...marks, ...(line === null ? [] : lineLayers())],
  };

  function lineLayers() {
    const stretch = (from: number, to: number, dash: number[]) => ({
      data: { values: [at(from), at(to)] },
      mark: { type: "line" as const, color: VERMILION, strokeWidth: 1.6, strokeDash: dash },
      encoding: { x, y },
    });
    // In the corner that stays empty: phonon points rise to the right, roton points fall.
    const [place, align] = plot.from === "zero" ? ([14, "left"] as const) : ([WIDTH - 14, "right"] as const);
    const words = {
      data: { values: [{ words: plot.words ?? "" }] },
      mark: { type: "text" as const, align, color: INK },
      encoding: { x: { value: place }, y: { value: 20 }, text: { field: "words" } },
    };
    return [
      stretch(x_domain[0], span[0], [5, 3]),
      stretch(span[0], span[1], [1, 0]),
      stretch(span[1], line_to, [5, 3]),
      words,
    ];
  }
}
