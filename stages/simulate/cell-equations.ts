import type { HeatTable } from "./heat-table.js";
import type { StiffSystem } from "./rodas4.js";
import type { Cell } from "./scenario.js";

/** Order of the temperatures in the state. */
export const STAGE = 0;
export const BODY = 1;
export const LIQUID = 2;
export const SENSOR = 3;

export interface CellEquations extends StiffSystem {
  /** What the night's programme changes; between changes the equations have no explicit time. */
  readonly drive: { heater_W: number; setting_K: number };
  /** Heat from body to stage. */
  linkHeat_W(body_K: number, stage_K: number): number;
  /** Heat from body to liquid. */
  boundaryHeat_W(body_K: number, liquid_K: number): number;
}

/**
 * Stage, body, liquid and sensor:
 *
 *   dT_s/dt = (setting − T_s)/τ_stage
 *   C_b dT_b/dt = P + leak − ∫K dT (from T_s to T_b) − ∫G dT (from T_l to T_b)
 *   C_l dT_l/dt = ∫G dT (from T_l to T_b)
 *   dT_th/dt = (T_b − T_th)/lag
 *
 * K = κT^p and G = gT³ act through their integrals, as a bar or a boundary with a temperature along it does
 * (for G that is Kapitza's law, heat ∝ T_b⁴ − T_l⁴). The Jacobian is exact, as a Rosenbrock method wants it.
 */
export function cellEquations(
  cell: Cell,
  heat: { readonly body: HeatTable; readonly liquid: HeatTable | null },
  times: { readonly stage_s: number; readonly lag_s: number },
): CellEquations {
  const { coefficient: kappa, power: p } = cell.link;
  const g = heat.liquid === null ? 0 : cell.boundary_W_per_K4;
  const { body, liquid } = heat;
  const perStage = 1 / times.stage_s;
  const perLag = times.lag_s > 0 ? 1 / times.lag_s : 0;
  const drive = { heater_W: 0, setting_K: 0 };

  const linkPotential =
    p === -1 ? (T: number) => kappa * Math.log(T) : (T: number) => (kappa / (p + 1)) * T ** (p + 1);
  const linkHeat_W = (b: number, s: number) => linkPotential(b) - linkPotential(s);
  // Factored, since b − l may be a millionth of b.
  const boundaryHeat_W = (b: number, l: number) => (g / 4) * (b - l) * (b + l) * (b * b + l * l);

  // The matrix shift·1 − J, of which only these entries are not 0.
  let ss = 0;
  let bs = 0;
  let bb = 0;
  let bl = 0;
  let lb = 0;
  let ll = 0;
  let tt = 0;
  let determinant = 0;

  return {
    size: 4,
    drive,
    linkHeat_W,
    boundaryHeat_W,
    derivative(y, out) {
      const s = y[STAGE]!;
      const b = y[BODY]!;
      const l = y[LIQUID]!;
      const across_W = liquid === null ? 0 : boundaryHeat_W(b, l);
      out[STAGE] = (drive.setting_K - s) * perStage;
      out[BODY] = (drive.heater_W + cell.heatLeak_W - linkHeat_W(b, s) - across_W) / body.at(b);
      out[LIQUID] = liquid === null ? 0 : across_W / liquid.at(l);
      out[SENSOR] = (b - y[SENSOR]!) * perLag;
    },
    factor(y, shift) {
      const s = y[STAGE]!;
      const b = y[BODY]!;
      const l = y[LIQUID]!;
      const Cb = body.at(b);
      const across_W = liquid === null ? 0 : boundaryHeat_W(b, l);
      const rate = (drive.heater_W + cell.heatLeak_W - linkHeat_W(b, s) - across_W) / Cb;
      const Gb = g * b * b * b;
      const Gl = g * l * l * l;
      ss = shift + perStage;
      bs = (-kappa * s ** p) / Cb;
      bb = shift + (kappa * b ** p + Gb + rate * body.slope(b)) / Cb;
      bl = -Gl / Cb;
      if (liquid === null) {
        lb = 0;
        ll = shift;
      } else {
        const Cl = liquid.at(l);
        lb = -Gb / Cl;
        ll = shift + (Gl + (across_W / Cl) * liquid.slope(l)) / Cl;
      }
      tt = shift + perLag;
      determinant = bb * ll - bl * lb;
    },
    solve(v) {
      const s = v[STAGE]! / ss;
      const atBody = v[BODY]! - bs * s;
      const atLiquid = v[LIQUID]!;
      const b = (atBody * ll - bl * atLiquid) / determinant;
      v[STAGE] = s;
      v[BODY] = b;
      v[LIQUID] = (bb * atLiquid - lb * atBody) / determinant;
      v[SENSOR] = (v[SENSOR]! + perLag * b) / tt;
    },
  };
}
