import type { HeatCapacity } from "../../combine/types.js";
import type { Separation } from "../../separate/types.js";
import { linearDomain } from "./axis.js";
import { GREY, type nightStyles } from "./look.js";

/** Layers of (C − fit)/fit in per cent against temperature, bars of repeatability, and the line at zero. */
export function residualPanel<X>(
  dataset: HeatCapacity,
  separation: Separation,
  styles: ReturnType<typeof nightStyles>,
  x: X,
) {
  const { curve } = separation;
  const residuals = Array.from(curve.T_K, (T, i) => {
    const fit = curve.fit_J_per_mol_K[i]!;
    const percent = 100 * (curve.Cv_J_per_mol_K[i]! / fit - 1);
    const u = (100 * curve.u_repeat_J_per_mol_K[i]!) / fit;
    return { T, percent, low: percent - u, high: percent + u, night: dataset.run[curve.row[i]!]! };
  });
  // As far down as up: a bias shows as points on one side.
  const reach = linearDomain(
    residuals.flatMap(({ low, high }) => [low, -low, high, -high]),
    0.05,
  );
  const y = {
    field: "percent",
    type: "quantitative",
    scale: { domain: reach, nice: false },
    axis: { title: "(C − fit) / fit (%)", tickCount: 5, minExtent: 44 },
  } as const;
  const zero = {
    data: { values: [{ zero: 0 }] },
    mark: { type: "rule" as const, color: GREY, strokeWidth: 0.8 },
    encoding: { y: { ...y, field: "zero" } },
  };
  const ofNight = (night: string) => {
    const values = residuals.filter((each) => each.night === night);
    const { colour, shape } = styles.of(night);
    return [
      {
        data: { values },
        mark: { type: "rule" as const, strokeWidth: 0.8, color: colour },
        encoding: { x, y: { ...y, field: "low" }, y2: { field: "high" } },
      },
      {
        data: { values },
        mark: {
          type: "point" as const,
          shape,
          stroke: colour,
          size: 28,
          strokeWidth: 1.1,
          fill: "#ffffff",
          opacity: 1,
        },
        encoding: { x, y },
      },
    ];
  };
  return [zero, ...styles.nights.flatMap(ofNight)];
}
