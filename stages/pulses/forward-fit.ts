import { effectiveSampleSize } from "../numerics/autocorrelation.js";
import { levenbergMarquardt, type NonlinearFit } from "../numerics/levenberg-marquardt.js";
import { medianOf } from "./order.js";
import {
  type CellShape,
  linkPotential_W,
  restingLead_K,
  sensorTransient,
  type TransientCell,
  type TransientPlan,
} from "./transient-model.js";
import type { TransientSamples } from "./transient-samples.js";

/** A number that is found by the fit from a first guess, with what is known of it beforehand. */
export interface Prior {
  readonly value: number;
  /** Standard uncertainty of `value`; 0: it is known and held, Infinity: nothing is known. */
  readonly u: number;
}

/** What is sought in one transient, and from where. */
export interface ForwardPlan {
  readonly bodies: "one" | "two";
  readonly reference_K: number;
  readonly heater: { readonly duration_s: number; readonly power_W: number };
  readonly shape: CellShape;
  /** Exponent of the link, which is not the same for every metal and every joint. */
  readonly linkPower: Prior;
  /** Part of the total heat capacity that is the body's own; two bodies only. */
  readonly bodyShare: Prior | { readonly body_J_per_K: number };
  readonly C_J_per_K: number;
  /** Link over heat capacity, 1/τ. */
  readonly link_per_s: number;
  /** Drift just before the pulse. */
  readonly drift_K_per_s: number;
  readonly start_K: number;
  /** First guess. */
  readonly boundary_s: number;
  /** What the liquid may have been off its rest by at the first sample. */
  readonly u_lead_K: number;
  /** Start of the heating on the samples' clock. */
  readonly shift: Prior;
  readonly lag: Prior;
  /** The stage is not logged: its slope is found with the rest. */
  readonly stageSlope: "logged" | "free";
  readonly fineStep_s: number;
  readonly interval_s: number;
}

export interface ForwardFit {
  readonly bodies: "one" | "two";
  /** Where C, link and boundary hold. */
  readonly T_K: number;
  /** Of body and liquid in balance, at the start of the pulse. */
  readonly T_before_K: number;
  readonly C_J_per_K: number;
  /** Relative. */
  readonly u_C: number;
  readonly link_W_per_K: number;
  readonly u_link_W_per_K: number;
  /** Time in which body and liquid come to one temperature; 0 for one body. */
  readonly boundary_s: number;
  readonly u_boundary_s: number;
  readonly boundary_W_per_K: number;
  readonly shift_s: number;
  readonly u_shift_s: number;
  readonly lag_s: number;
  readonly u_lag_s: number;
  readonly drift_K_per_s: number;
  /** Body and sensor at the first sample, and everything else that draws the curve. */
  readonly curve_K: Float64Array;
  /** Standard deviation of each block as found: white noise and the floor. Length n. */
  readonly u_K: Float64Array;
  /** 0 where a block is left out as a spike. Length n. */
  readonly weight: Float64Array;
  /** Misfit that white noise does not explain, over the white noise of one sample. */
  readonly misfit: number;
  readonly spikes: number;
  /** Σ of squared residuals over the white noise, each capped as a spike would be: to compare starts by. */
  readonly score: number;
  /** Free parameters. */
  readonly parameters: number;
  /** Independent blocks over blocks. */
  readonly independence: number;
  readonly converged: boolean;
}

/** A parameter as the solver sees it: 1 + (value − first)/scale, so that all steps are alike. */
interface Knob {
  readonly name: string;
  readonly first: number;
  readonly scale: number;
  readonly lower: number;
  readonly upper: number;
}

const OUTSTANDING = 5;
/** A last step of a part in 10⁵ of each scale leaves less than its square behind. */
const SMALLEST_STEP = 1e-5;
const DIFFERENCE = 1e-5;
/**
 * The difference of two levels in noise of a spectrum near 1/f scatters by this many times the floor to which block means
 * sink: √2 for two of them, and a little for what the fit takes to itself.
 */
const LEVELS = 1.5;
const SMALLEST_SHARE = 0.003;

/**
 * The forward model, fitted to one whole transient: drift before, pulse and decay.
 * @param samples at least as many blocks as parameters, on both sides of the pulse
 */
export function fitForward(samples: TransientSamples, plan: ForwardPlan): ForwardFit {
  const { time_s, temperature_K: T, count } = samples;
  const n = time_s.length;
  const knobs = knobsOf(plan, time_s);
  let priors = priorsOf(plan, knobs);
  const transientPlan = (shift_s: number): TransientPlan => ({
    time_s,
    stage_K: plan.stageSlope === "logged" ? samples.stage_K : null,
    heater: { from_s: shift_s, to_s: shift_s + plan.heater.duration_s, power_W: plan.heater.power_W },
    fineStep_s: plan.fineStep_s,
  });
  const stageAtStart_K =
    plan.stageSlope === "logged" && samples.stage_K !== null ? stageBefore(samples.stage_K, time_s) : null;
  const model = new Float64Array(n);
  const draw = (z: Float64Array): Physical => {
    const physical = physicalOf(plan, knobs, z, stageAtStart_K);
    sensorTransient(physical.cell, physical.start, transientPlan(physical.shift_s), model);
    return physical;
  };

  draw(new Float64Array(knobs.length).fill(1));
  if (!model.every(Number.isFinite)) return nowhere(plan, samples);
  const u = count.map((m) => samples.noise_K / Math.sqrt(m));
  const weight = new Float64Array(n).fill(1);
  // The samples next to the heater's edges alone tell an early start from an overheating body. They misfit until both
  // are right, and are not taken for spikes until then.
  const edge = time_s.map((t) =>
    Math.min(Math.abs(t), Math.abs(t - plan.heater.duration_s)) < 1.5 * plan.interval_s ? 1 : 0,
  );
  let z: Float64Array = new Float64Array(knobs.length).fill(1);
  const residual = (trial: Float64Array, out: Float64Array): void => {
    const physical = draw(trial);
    for (let i = 0; i < n; i++) out[i] = (weight[i]! * (model[i]! - T[i]!)) / u[i]!;
    priors.forEach((prior, j) => {
      out[n + j] = prior(physical, trial);
    });
  };
  const residuals = n + priors.length;
  const at = new Float64Array(residuals);
  const beside = new Float64Array(residuals);
  const solve = (most: number) =>
    levenbergMarquardt(
      {
        residuals,
        residual,
        // One-sided: the step is a part in 10⁵ of what each parameter may sensibly move, and so is the error; central
        // differences would double the cost of a night.
        jacobian(trial, out) {
          residual(trial, at);
          const moved = Float64Array.from(trial);
          for (let j = 0; j < knobs.length; j++) {
            const step = trial[j]! + DIFFERENCE > knobs[j]!.upper ? -DIFFERENCE : DIFFERENCE;
            moved[j] = trial[j]! + step;
            residual(moved, beside);
            moved[j] = trial[j]!;
            for (let i = 0; i < residuals; i++) out.set(i, j, (beside[i]! - at[i]!) / step);
          }
        },
      },
      z,
      {
        lower: knobs.map((knob) => knob.lower),
        upper: knobs.map((knob) => knob.upper),
        covariance: "absolute",
        mostIterations: most,
        smallestStep: SMALLEST_STEP,
      },
    );
  let fit = solve(60);
  let floor_K = 0;
  let spikes = 0;
  for (let round = 0; round < 5; round++) {
    z = fit.value;
    draw(z);
    const left = T.map((value, i) => value - model[i]!);
    const normalised = left.map((r, i) => Math.abs(r) / u[i]!);
    const spread = 1.4826 * medianOf(normalised.slice());
    let changed = false;
    spikes = 0;
    for (let i = 0; i < n; i++) {
      const tolerated = edge[i] === 1 && round < 2;
      const w = !tolerated && normalised[i]! > OUTSTANDING * spread && standsAlone(normalised, i) ? 0 : 1;
      if (w === 0) spikes++;
      if (w !== weight[i]) changed = true;
      weight[i] = w;
    }
    const next = floorOf(left, count, weight, samples.noise_K, knobs.length);
    if (Math.abs(next - floor_K) > 0.03 * samples.noise_K + 0.1 * floor_K) changed = true;
    floor_K = next;
    for (let i = 0; i < n; i++) u[i] = Math.hypot(samples.noise_K / Math.sqrt(count[i]!), floor_K);
    if (round === 1) {
      // The edges have told the start. Should one of them now be found to be a spike, the start must not wander off.
      const j = knobs.findIndex(({ name }) => name === "shift");
      if (j >= 0) {
        const { first, scale } = knobs[j]!;
        const found = first + (z[j]! - 1) * scale;
        const u_found = Math.max(scale * (fit.standardDeviation[j]! || 0), plan.interval_s / 500);
        priors = priorsOf({ ...plan, shift: { value: found, u: Math.min(u_found, plan.shift.u) } }, knobs);
      }
    }
    if (!changed && round >= 2) break;
    if (!changed) continue;
    fit = solve(20);
  }
  const physical = draw(fit.value);
  const score = T.reduce((sum, value, i) => {
    const squared = ((value - model[i]!) / samples.noise_K) ** 2 * count[i]!;
    return sum + (edge[i] === 1 ? squared : Math.min(OUTSTANDING ** 2, squared));
  }, 0);
  const normalised = T.map((value, i) => (weight[i] === 0 ? 0 : (value - model[i]!) / u[i]!));
  const independence = Math.min(1, effectiveSampleSize(normalised, weight) / (n - spikes));
  const inflation = 1 / Math.sqrt(independence);
  // What is there for certain of noise that averaging does not reduce.
  const left = T.map((value, i) => value - model[i]!);
  const slow_K = floorOf(left, count, weight, samples.noise_K, knobs.length, 2);
  const index = (name: string): number => knobs.findIndex((knob) => knob.name === name);
  const uOf = (name: string): number => {
    const j = index(name);
    if (j < 0) return 0;
    return knobs[j]!.scale * Math.max(fit.standardDeviation[j]! * inflation, clusteredU(fit, j, normalised));
  };
  const { cell } = physical;
  const C = cell.body_J_per_K + cell.liquid_J_per_K;
  const before = balanceBefore(physical, transientPlan(physical.shift_s), stageAtStart_K);
  const dT = (plan.heater.power_W * plan.heater.duration_s) / C;
  const T_K = before + dT / 2;
  const x = Math.log(T_K / plan.reference_K);
  const law = (at: number, power: number, bend: number) => at * Math.exp(x * (power + (bend * x) / 2));
  return {
    bodies: plan.bodies,
    T_K,
    T_before_K: before,
    C_J_per_K:
      law(cell.body_J_per_K, plan.shape.bodyPower, plan.shape.bodyBend) +
      law(cell.liquid_J_per_K, plan.shape.liquidPower, plan.shape.liquidBend),
    u_C: Math.hypot(uOf("C"), (LEVELS * slow_K) / dT),
    link_W_per_K: cell.link_W_per_K * Math.exp(cell.shape.linkPower * x),
    u_link_W_per_K: uOf("link") * C,
    boundary_s: physical.boundary_s,
    u_boundary_s: uOf("boundary"),
    boundary_W_per_K:
      plan.bodies === "one" ? Number.NaN : cell.boundary_W_per_K * Math.exp(plan.shape.boundaryPower * x),
    shift_s: physical.shift_s,
    u_shift_s: uOf("shift"),
    lag_s: cell.lag_s,
    u_lag_s: uOf("lag"),
    drift_K_per_s: physical.drift_K_per_s,
    curve_K: model.slice(),
    u_K: u,
    weight,
    misfit: floor_K / samples.noise_K,
    spikes: spikes + samples.spikes,
    score,
    parameters: knobs.length,
    independence,
    converged: fit.converged,
  };
}

/** Neighbouring blocks that are taken to share their noise. */
const CLUSTERS = 16;

/**
 * Standard uncertainty of a parameter from what neighbouring residuals together do to it: slow noise moves them all one
 * way, which no count of blocks knows (cluster-robust covariance: Liang and Zeger, Biometrika 73, 13 (1986)).
 * @param residual of the blocks, in units of their u
 */
function clusteredU(fit: NonlinearFit, parameter: number, residual: Float64Array): number {
  const n = residual.length;
  const p = fit.value.length;
  const pull = new Float64Array(CLUSTERS);
  for (let i = 0; i < n; i++) {
    let gain = 0;
    for (let k = 0; k < p; k++) {
      const c = fit.covariance.get(parameter, k);
      if (Number.isFinite(c)) gain += c * fit.jacobian.get(i, k);
    }
    pull[Math.floor((CLUSTERS * i) / n)]! += gain * residual[i]!;
  }
  const sum = pull.reduce((total, value) => total + value * value, 0);
  return Math.sqrt((sum * CLUSTERS * n) / ((CLUSTERS - 1) * (n - p)));
}

/** A start from which the model runs out of any temperature: no fit, and every other one is better. */
function nowhere(plan: ForwardPlan, { time_s, noise_K }: TransientSamples): ForwardFit {
  const none = Number.POSITIVE_INFINITY;
  return {
    bodies: plan.bodies,
    T_K: plan.reference_K,
    T_before_K: plan.start_K,
    C_J_per_K: plan.C_J_per_K,
    u_C: none,
    link_W_per_K: plan.link_per_s * plan.C_J_per_K,
    u_link_W_per_K: none,
    boundary_s: plan.boundary_s,
    u_boundary_s: none,
    boundary_W_per_K: Number.NaN,
    shift_s: plan.shift.value,
    u_shift_s: none,
    lag_s: plan.lag.value,
    u_lag_s: none,
    drift_K_per_s: plan.drift_K_per_s,
    curve_K: new Float64Array(time_s.length).fill(plan.start_K),
    u_K: new Float64Array(time_s.length).fill(noise_K),
    weight: new Float64Array(time_s.length).fill(1),
    misfit: none,
    spikes: 0,
    score: none,
    parameters: 0,
    independence: 1,
    converged: false,
  };
}

/** A spike hits one sample; a run of them on one side is a misfit, and no reason to look away. */
function standsAlone(magnitude: Float64Array, i: number): boolean {
  const half = magnitude[i]! / 2;
  return (magnitude[i - 1] ?? 0) < half && (magnitude[i + 1] ?? 0) < half;
}

function knobsOf(plan: ForwardPlan, time_s: Float64Array): Knob[] {
  const { interval_s } = plan;
  const span_s = time_s[time_s.length - 1]! - time_s[0]!;
  const rise_K = (plan.heater.power_W * plan.heater.duration_s) / plan.C_J_per_K;
  const free = Number.POSITIVE_INFINITY;
  const knob = (name: string, first: number, scale: number, lowest = -free, highest = free): Knob => ({
    name,
    first,
    scale,
    lower: 1 + (lowest - first) / scale,
    upper: 1 + (highest - first) / scale,
  });
  const lnC = Math.log(plan.C_J_per_K);
  const knobs = [
    // Bounds that no sane fit meets keep a wild step from overflowing.
    knob("C", lnC, 1, lnC - 3, lnC + 3),
    knob("link", plan.link_per_s, Math.abs(plan.link_per_s) + 0.1 / span_s, -3 / span_s, 1),
    knob("drift", plan.drift_K_per_s, rise_K / span_s),
    knob("start", plan.start_K, rise_K, plan.start_K / 2, 2 * plan.start_K),
  ];
  if (plan.bodies === "two") {
    knobs.push(
      knob(
        "boundary",
        plan.boundary_s,
        plan.boundary_s,
        Math.min(plan.boundary_s, 1e-4 * interval_s),
        10 * span_s,
      ),
      knob("lead", 0, rise_K, -10 * rise_K, 10 * rise_K),
    );
    if ("u" in plan.bodyShare) knobs.push(knob("share", plan.bodyShare.value, 1, SMALLEST_SHARE, 0.98));
  }
  if (plan.shift.u > 0) {
    const [from_s, to_s] = shiftBounds(plan, time_s);
    const { value, u } = plan.shift;
    knobs.push(knob("shift", value, Math.min(interval_s, u), from_s, to_s));
  }
  if (plan.lag.u > 0) knobs.push(knob("lag", plan.lag.value, interval_s, 0, 0.3 * span_s));
  if (plan.linkPower.u > 0)
    knobs.push(
      knob("linkPower", plan.linkPower.value, 1, plan.linkPower.value - 2, plan.linkPower.value + 2),
    );
  if (plan.stageSlope === "free") knobs.push(knob("ramp", 0, rise_K / span_s ** 2));
  return knobs;
}

/**
 * Not far, and not across a sample: where an edge of the pulse crosses one, the misfit of an overheating body jumps, and
 * no solver finds back. A crossing within one standard uncertainty must be allowed.
 */
function shiftBounds(plan: ForwardPlan, time_s: Float64Array): [number, number] {
  const { value, u } = plan.shift;
  let from_s = value - 4 * u;
  let to_s = value + 4 * u;
  for (const t of time_s) {
    for (const crossing of [t, t - plan.heater.duration_s]) {
      if (crossing < value - u) from_s = Math.max(from_s, crossing);
      if (crossing > value + u) to_s = Math.min(to_s, crossing);
    }
  }
  return [from_s, to_s];
}

/** Everything the parameters stand for. */
interface Physical {
  readonly cell: TransientCell;
  readonly start: { readonly body_K: number; readonly liquid_K: number; readonly sensor_K: number };
  readonly shift_s: number;
  readonly boundary_s: number;
  readonly drift_K_per_s: number;
  /** Liquid over its resting lead at the first sample. */
  readonly excess_K: number;
}

function physicalOf(
  plan: ForwardPlan,
  knobs: readonly Knob[],
  z: Float64Array,
  stageAtStart_K: number | null,
): Physical {
  const value = (name: string, otherwise: number): number => {
    const j = knobs.findIndex((knob) => knob.name === name);
    return j < 0 ? otherwise : knobs[j]!.first + (z[j]! - 1) * knobs[j]!.scale;
  };
  const C = Math.exp(value("C", Number.NaN));
  const drift_K_per_s = value("drift", 0);
  const body_K = value("start", 0);
  const boundary_s = plan.bodies === "two" ? value("boundary", 0) : 0;
  const two = plan.bodies === "two";
  const share =
    "u" in plan.bodyShare ? value("share", plan.bodyShare.value) : plan.bodyShare.body_J_per_K / C;
  const body = two ? Math.min(share, 0.995) * C : C;
  const liquid = two ? C - body : 0;
  const open: TransientCell = {
    reference_K: plan.reference_K,
    body_J_per_K: body,
    liquid_J_per_K: liquid,
    link_W_per_K: value("link", 0) * C,
    boundary_W_per_K: two ? (body * liquid) / (C * boundary_s) : 0,
    leak_W: 0,
    leakRamp_W_per_s: value("ramp", 0) * C,
    lag_s: Math.max(0, value("lag", plan.lag.value)),
    shape: { ...plan.shape, linkPower: value("linkPower", plan.linkPower.value) },
  };
  // The drift before the pulse is what leak and link leave over; so the leak follows from the drift.
  const leak_W =
    drift_K_per_s * C +
    linkPotential_W(open, body_K) -
    (stageAtStart_K === null ? 0 : linkPotential_W(open, stageAtStart_K));
  const cell = { ...open, leak_W };
  const excess_K = value("lead", 0);
  return {
    cell,
    start: {
      body_K,
      liquid_K: body_K + (two ? restingLead_K(cell, drift_K_per_s) + excess_K : 0),
      sensor_K: body_K - cell.lag_s * drift_K_per_s,
    },
    shift_s: value("shift", plan.shift.value),
    boundary_s,
    drift_K_per_s,
    excess_K,
  };
}

type PriorResidual = (physical: Physical, z: Float64Array) => number;

function priorsOf(plan: ForwardPlan, knobs: readonly Knob[]): PriorResidual[] {
  const priors: PriorResidual[] = [];
  const on = (name: string, { value, u }: Prior) => {
    const j = knobs.findIndex((knob) => knob.name === name);
    if (j < 0 || !Number.isFinite(u)) return;
    const { first, scale } = knobs[j]!;
    priors.push((_, z) => (first + (z[j]! - 1) * scale - value) / u);
  };
  on("shift", plan.shift);
  on("lag", plan.lag);
  on("linkPower", plan.linkPower);
  on("lead", { value: 0, u: plan.u_lead_K });
  if ("u" in plan.bodyShare) on("share", plan.bodyShare);
  return priors;
}

/** Stage at the first sample, to which the leak refers. */
function stageBefore(stage_K: Float64Array, time_s: Float64Array): number {
  // A mean over what precedes the pulse: one noisy reading would go into the leak, and so into the drift.
  let sum = 0;
  let count = 0;
  for (let i = 0; i < stage_K.length && time_s[i]! < 0; i++) {
    sum += stage_K[i]!;
    count++;
  }
  return count === 0 ? stage_K[0]! : sum / count;
}

/** Body and liquid brought together at the start of the heating. */
function balanceBefore(physical: Physical, plan: TransientPlan, stage_K: number | null): number {
  const { cell, start, shift_s } = physical;
  const first_s = plan.time_s[0]!;
  const steps = 24;
  // Fine at first, where the liquid still comes to rest.
  const time_s = Float64Array.from(
    { length: steps + 1 },
    (_, i) => first_s + (shift_s - first_s) * (i / steps) ** 2,
  );
  const end = sensorTransient(
    cell,
    start,
    {
      time_s,
      stage_K: stage_K === null ? null : new Float64Array(steps + 1).fill(stage_K),
      heater: { from_s: Number.POSITIVE_INFINITY, to_s: Number.POSITIVE_INFINITY, power_W: 0 },
      fineStep_s: plan.fineStep_s,
    },
    new Float64Array(steps + 1),
  );
  const { body_J_per_K: b, liquid_J_per_K: l } = cell;
  return (b * end.body_K + l * end.liquid_K) / (b + l);
}

/**
 * Scatter of block means that does not fall with the number of samples in a block: slow noise, or a misfit. Found so
 * that the normalised residuals have the variance they ought to; 0 where the white noise alone explains them.
 * @param margin standard deviations of χ² that are left to chance
 */
function floorOf(
  residual: Float64Array,
  count: Float64Array,
  weight: Float64Array,
  noise_K: number,
  parameters: number,
  margin = 0,
): number {
  const n = residual.length;
  let used = 0;
  for (let i = 0; i < n; i++) if (weight[i]! > 0) used++;
  const excess = (floor: number): number => {
    let sum = 0;
    for (let i = 0; i < n; i++) {
      if (weight[i]! > 0)
        sum += (weight[i]! * residual[i]!) ** 2 / ((noise_K * noise_K) / count[i]! + floor * floor);
    }
    const freedom = Math.max(1, used - parameters);
    return sum - freedom - margin * Math.sqrt(2 * freedom);
  };
  if (excess(0) <= 0) return 0;
  let low = 0;
  let high = noise_K;
  while (excess(high) > 0 && high < 1e6 * noise_K) high *= 2;
  for (let round = 0; round < 40; round++) {
    const middle = (low + high) / 2;
    if (excess(middle) > 0) low = middle;
    else high = middle;
  }
  return high;
}
