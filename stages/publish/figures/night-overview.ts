import type { TopLevelSpec } from "vega-lite";
import type { PulseTable } from "../../pulses/types.js";
import { capacityAxis, logDomain, temperatureAxis } from "./axis.js";
import { DARK_BLUE, LOOK, VERMILION } from "./look.js";

const STANDING = ["used", "used, flagged", "left out"] as const;
const COLOURS = [DARK_BLUE, "#d98a1f", VERMILION] as const;

function standing(used: number, flag: number): (typeof STANDING)[number] {
  if (used === 0) return "left out";
  return flag === 0 ? "used" : "used, flagged";
}

/** Total heat capacity of one night's pulses against temperature: used, used though flagged, and left out. */
export function nightOverviewSpec(table: PulseTable): TopLevelSpec {
  const pulses = Array.from(table.pulse, (pulse, i) => {
    const C = table.C_total_J_per_K[i]!;
    const u = table.u_C_total_J_per_K[i]!;
    return {
      pulse,
      T: table.T_K[i]!,
      C,
      low: C - u,
      high: C + u,
      standing: standing(table.used[i]!, table.flag[i]!),
    };
  }).filter(({ T, C }) => T > 0 && C > 0 && Number.isFinite(T) && Number.isFinite(C));
  const T_domain = logDomain(
    pulses.map(({ T }) => T),
    1.08,
  );
  const C_domain = logDomain(
    pulses.map(({ C }) => C),
    1.5,
  );
  const present = STANDING.filter((words) => pulses.some((pulse) => pulse.standing === words));
  const of = <Value>(values: readonly [Value, Value, Value]) =>
    present.map((words) => values[STANDING.indexOf(words)]!);
  const x = {
    field: "T",
    type: "quantitative",
    scale: { type: "log", domain: T_domain, nice: false },
    axis: { ...temperatureAxis(T_domain), title: "temperature T (K)" },
  } as const;
  const y = {
    field: "C",
    type: "quantitative",
    scale: { type: "log", domain: C_domain, nice: false },
    axis: { ...capacityAxis(C_domain), title: "total heat capacity (J K⁻¹)", minExtent: 44 },
  } as const;
  const colour = of(COLOURS);
  return {
    config: LOOK,
    width: 460,
    height: 285,
    layer: [
      {
        data: {
          values: pulses.map((pulse) => ({
            ...pulse,
            colour: COLOURS[STANDING.indexOf(pulse.standing)]!,
            low: Math.max(pulse.low, C_domain[0]),
            high: Math.min(pulse.high, C_domain[1]),
          })),
        },
        mark: { type: "rule", strokeWidth: 0.8 },
        encoding: {
          x,
          y: { ...y, field: "low" },
          y2: { field: "high" },
          stroke: { field: "colour", type: "nominal", scale: null },
        },
      },
      {
        data: { values: pulses },
        mark: { type: "point", filled: false, size: 40, strokeWidth: 1.2, fill: "#ffffff", opacity: 1 },
        encoding: {
          x,
          y,
          color: {
            field: "standing",
            type: "nominal",
            scale: { domain: present, range: colour },
            legend: { orient: "top-left" },
          },
          shape: {
            field: "standing",
            type: "nominal",
            scale: { domain: present, range: of(["circle", "diamond", CROSSED]) },
            legend: { orient: "top-left" },
          },
        },
      },
    ],
  };
}

/** An × of strokes: left out, and seen as such without colour. */
const CROSSED = "M-0.8,-0.8L0.8,0.8M-0.8,0.8L0.8,-0.8";
