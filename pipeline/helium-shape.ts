import { type CubicSpline, cubicSpline } from "../stages/numerics/cubic-spline.js";
import { molarVolume_m3_per_mol } from "../stages/physics/density.js";
import { heatCapacityOfCurve_J_per_mol_K, PUBLISHED_CURVE } from "../stages/physics/excitation-curve.js";
import type { HeatFunction } from "../stages/pulses/cell-laws.js";

const POINTS = 60;
const FROM_K = 0.1;
const TO_K = 2;

/**
 * How helium-4's heat capacity bends with temperature, J/(mol K): the integral over the published excitation curve (Godfrin
 * et al., Phys. Rev. B 103, 104516 (2021)), tabulated. It only serves to tell how C changes within one pulse; its
 * size and its slow parts come from the night. Beyond 0.1 K to 2 K it goes on as a power law.
 */
export function heliumShape(): HeatFunction {
  // Made when first asked for: a quiet night never asks.
  let spline: CubicSpline | null = null;
  const first = Math.log(FROM_K);
  const last = Math.log(TO_K);
  return (T_K) => {
    spline ??= tabulated(first, last);
    const x = Math.log(T_K);
    const within = Math.min(last, Math.max(first, x));
    return Math.exp(spline.value(within) + spline.slope(within) * (x - within));
  };
}

function tabulated(first: number, last: number): CubicSpline {
  const lnT = Float64Array.from({ length: POINTS }, (_, i) =>
    i === POINTS - 1 ? last : first + ((last - first) * i) / (POINTS - 1),
  );
  const C = heatCapacityOfCurve_J_per_mol_K(lnT.map(Math.exp), PUBLISHED_CURVE, molarVolume_m3_per_mol(0.5));
  return cubicSpline(lnT, C.map(Math.log), "natural");
}
