import { heatShape, totalShape } from "./cell-laws.js";
import type { ForwardFit, ForwardPlan, Prior } from "./forward-fit.js";
import type { Laws } from "./night-laws.js";
import type { ForwardNight, Prepared } from "./prepared-transient.js";
import type { CellShape } from "./transient-model.js";

/** What all transients of a night share. */
export interface Common {
  readonly shift: Prior;
  readonly lag: Prior;
}

/** What a fit may begin from. */
export interface Beginning {
  readonly laws: Laws;
  readonly common: Common;
  /** The same pulse and model, fitted before. */
  readonly before: ForwardFit | null;
  /** Where nothing was fitted yet: by the drift lines, or by how the trace settles after the pulse. */
  readonly by: "drift" | "settling";
}

export function planOf(
  night: ForwardNight,
  at: Prepared,
  bodies: "one" | "two",
  { laws, common, before, by }: Beginning,
): ForwardPlan {
  const { contents, interval_s } = night;
  const T = before?.T_K ?? at.T_K;
  const two = bodies === "two";
  const settling = before === null && by === "settling";
  const C = before?.C_J_per_K ?? (settling ? at.Q_J / at.lateRise_K : at.C_J_per_K);
  const heat = (two ? heatShape : totalShape)(contents, laws.T_K, laws.C, T);
  const shape: CellShape = { ...heat, linkPower: laws.link.power, boundaryPower: laws.boundary.power };
  const body = contents.kind === "filled" && contents.body !== null ? contents.body(T) : null;
  const share = body === null ? 0.4 : Math.min(0.95, body / C);
  const boundary_s =
    before?.bodies === "two"
      ? before.boundary_s
      : settling
        ? at.settling_s
        : Math.max(0.02 * interval_s, (Math.max(0, at.early_s) * share) / (1 - share));
  const u_lead_K = at.previousRise_K * Math.exp(-at.rested_s / (2 * boundary_s)) + 1e-3 * at.rise_K;
  return {
    bodies,
    reference_K: T,
    heater: { duration_s: at.duration_s, power_W: at.Q_J / at.duration_s },
    shape,
    linkPower: { value: laws.link.power, u: laws.link.u },
    bodyShare: body === null ? { value: 0.4, u: two ? 0.2 : 0 } : { body_J_per_K: body },
    C_J_per_K: C,
    link_per_s: before === null ? (settling ? 0 : at.link_per_s) : before.link_W_per_K / before.C_J_per_K,
    drift_K_per_s: before?.drift_K_per_s ?? (settling ? 0 : at.drift_K_per_s),
    start_K: before?.curve_K[0] ?? at.start_K,
    boundary_s: Math.max(boundary_s, 1e-3 * interval_s),
    u_lead_K,
    shift:
      night.u_start_s > 0 && before !== null ? { value: before.shift_s, u: common.shift.u } : common.shift,
    lag: common.lag,
    stageSlope: at.samples.stage_K === null ? "free" : "logged",
    fineStep_s: Math.max(at.duration_s / 32, interval_s / 4),
    interval_s,
  };
}
