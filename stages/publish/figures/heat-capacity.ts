import type { TopLevelSpec } from "vega-lite";
import type { HeatCapacity } from "../../combine/types.js";
import type { Separation } from "../../separate/types.js";
import { capacityAxis, logDomain, temperatureAxis } from "./axis.js";
import { DARK_BLUE, INK, LOOK, nightStyles, VERMILION } from "./look.js";
import { residualPanel } from "./residuals.js";

const WIDTH = 480;
const PARTS = {
  fit: { colour: INK, dash: [1, 0], width: 1.4 },
  phonons: { colour: DARK_BLUE, dash: [7, 4], width: 1.6 },
  rotons: { colour: VERMILION, dash: [2, 3], width: 1.6 },
} as const;
type Part = keyof typeof PARTS;

/** Points of all nights on logarithmic axes, the fit and its two parts; residuals in per cent below, if there is a fit. */
export function heatCapacitySpec(dataset: HeatCapacity, separation: Separation): TopLevelSpec {
  const styles = nightStyles(dataset.run);
  const T_domain = logDomain(dataset.T_K, 1.08);
  const fitted = separation.curve.T_K.length > 0;
  const x = (title: string | null) =>
    ({
      field: "T",
      type: "quantitative",
      scale: { type: "log", domain: T_domain, nice: false },
      axis: { ...temperatureAxis(T_domain), title, labels: title !== null },
    }) as const;
  const T_title = "temperature T (K)";
  const above = {
    width: WIDTH,
    height: 350,
    layer: curveLayers(dataset, separation, styles, x(fitted ? null : T_title)),
  };
  const below = { width: WIDTH, height: 115, layer: residualPanel(dataset, separation, styles, x(T_title)) };
  return { config: LOOK, spacing: 10, bounds: "flush", vconcat: fitted ? [above, below] : [above] };
}

function curveLayers<X>(
  dataset: HeatCapacity,
  separation: Separation,
  styles: ReturnType<typeof nightStyles>,
  x: X,
) {
  const C_domain = logDomain(dataset.Cv_J_per_mol_K, 1.5);
  const floor = C_domain[0];
  const y = {
    field: "C",
    type: "quantitative",
    scale: { type: "log", domain: C_domain, nice: false },
    axis: { ...capacityAxis(C_domain), title: "molar heat capacity Cᵥ (J mol⁻¹ K⁻¹)", minExtent: 44 },
  } as const;
  const points = Array.from(dataset.T_K, (T, i) => {
    const C = dataset.Cv_J_per_mol_K[i]!;
    const u = dataset.u_Cv_J_per_mol_K[i]!;
    const night = dataset.run[i]!;
    return { T, C, low: Math.max(C - u, floor), high: C + u, night, colour: styles.of(night).colour };
  }).filter(({ C }) => C > 0);

  const legend = { orient: "top-left", columns: styles.nights.length > 12 ? 2 : 1 } as const;
  const byNight = { field: "night", type: "nominal", legend } as const;
  const domain = styles.nights;
  const bars = {
    data: { values: points },
    mark: { type: "rule" as const, strokeWidth: 0.8 },
    // Taken from the rows as they are and by another channel, so that the points alone own the legend.
    encoding: {
      x,
      y: { ...y, field: "low" },
      y2: { field: "high" },
      stroke: { field: "colour", type: "nominal" as const, scale: null },
    },
  };
  const marks = {
    data: { values: points },
    mark: { type: "point" as const, size: 34, strokeWidth: 1.1, fill: "#ffffff", opacity: 1 },
    encoding: {
      x,
      y,
      color: { ...byNight, scale: { domain, range: domain.map((night) => styles.of(night).colour) } },
      shape: { ...byNight, scale: { domain, range: domain.map((night) => styles.of(night).shape) } },
    },
  };

  const { curve } = separation;
  const lines: Record<Part, Place[]> = {
    fit: places(curve.T_K, curve.fit_J_per_mol_K, floor),
    phonons: places(curve.T_K, curve.phonon_J_per_mol_K, floor),
    rotons: places(curve.T_K, curve.roton_J_per_mol_K, floor),
  };
  const strokes = (["fit", "phonons", "rotons"] as const).map((part) => ({
    data: { values: lines[part] },
    mark: {
      type: "line" as const,
      interpolate: "monotone" as const,
      strokeWidth: PARTS[part].width,
      color: PARTS[part].colour,
      strokeDash: [...PARTS[part].dash],
    },
    encoding: { x, y },
  }));
  // A name beside each part, some way along it from where it comes into sight.
  const name = (part: Part, fraction: number, dx: number, dy: number) => ({
    data: { values: lines[part].slice(Math.floor(fraction * lines[part].length)).slice(0, 1) },
    mark: {
      type: "text" as const,
      align: "left" as const,
      dx,
      dy,
      color: PARTS[part].colour,
      fontStyle: "italic",
      text: part,
    },
    encoding: { x, y },
  });
  return [bars, marks, ...strokes, name("phonons", 0.88, 6, 16), name("rotons", 0.12, 12, 6)];
}

interface Place {
  readonly T: number;
  readonly C: number;
}

/** A curve above the floor of the plot. Where points share a temperature it has one place: a spline wants them apart. */
function places(T_K: Float64Array, C: Float64Array, floor: number): Place[] {
  return Array.from(T_K, (T, i) => ({ T, C: C[i]! })).filter(
    ({ T, C }, i) => C >= floor && (i === 0 || T > T_K[i - 1]!),
  );
}
