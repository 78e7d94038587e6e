import { median } from "simple-statistics";
import type { StageLog } from "../ingest/types.js";
import type { TemperatureTrace } from "../thermometry/types.js";
import { type ConductanceLaw, type Contents, conductanceLaw, heatShape, totalShape } from "./cell-laws.js";
import { type DriftStep, FEWEST_SAMPLES, type PulseSpan } from "./drift-step.js";
import { type ForwardFit, type ForwardPlan, fitForward, type Prior } from "./forward-fit.js";
import type { CellShape } from "./transient-model.js";
import { stageWindow, type TransientSamples, thinTransient } from "./transient-samples.js";
import { sampleRange, usableSamples } from "./window.js";

/** One pulse as the forward models need it. */
export interface Transient {
  readonly span: PulseSpan;
  readonly Q_J: number;
  readonly drift: DriftStep | null;
}

export interface ForwardNight {
  readonly trace: TemperatureTrace;
  readonly stage: StageLog | null;
  readonly contents: Contents;
  readonly interval_s: number;
  /** Standard uncertainty of a pulse's start on the thermometer's clock. */
  readonly u_start_s: number;
  /** null: found from the night. */
  readonly lag_s: number | null;
  /** Longest stretch on either side of a pulse; null: up to its neighbours. */
  readonly window_s: number | null;
}

/** Both models of one pulse, on the same samples. */
export interface ForwardFits {
  readonly samples: TransientSamples;
  readonly one: ForwardFit;
  /** null for an empty cell. */
  readonly two: ForwardFit | null;
}

const SCOUTS = 5;
const MOST_CELLS = 5;

/**
 * Fits the forward models to the pulses asked for. What pulses of a night have in common is passed on between them:
 * clock and lag of the thermometer, the laws of link and boundary, and where to begin.
 * @param wanted rows to fit, any order
 * @returns one a row of `wanted`; null where there are too few samples
 */
export function fitForwardNight(
  night: ForwardNight,
  transients: readonly Transient[],
  wanted: readonly number[],
): Map<number, ForwardFits> {
  const prepared = new Map<number, Prepared>();
  for (const row of wanted) {
    const ready = prepare(night, transients[row]!, transients[row - 1]);
    if (ready !== null) prepared.set(row, ready);
  }
  const rows = [...prepared.keys()].sort((a, b) => prepared.get(a)!.T_K - prepared.get(b)!.T_K);
  if (rows.length === 0) return new Map();
  const known = startingLaws(transients);
  const common = scout(night, prepared, rows, known);
  let laws = known;
  let fits = new Map<number, ForwardFits>();
  // Twice: the laws by which C, link and boundary change within a transient come from the night itself.
  for (const models of ["general", "both"] as const) {
    const next = new Map<number, ForwardFits>();
    let neighbour: ForwardFit | null = null;
    for (const row of rows) {
      const found = fitPulse(night, prepared.get(row)!, {
        laws,
        common,
        models,
        neighbour,
        before: fits.get(row) ?? null,
      });
      next.set(row, found);
      neighbour = found.two ?? found.one;
    }
    fits = next;
    laws = lawsOf(
      laws,
      rows.map((row) => fits.get(row)!),
    );
  }
  return fits;
}

interface Prepared {
  readonly samples: TransientSamples;
  readonly T_K: number;
  readonly Q_J: number;
  readonly duration_s: number;
  readonly C_J_per_K: number;
  readonly link_per_s: number;
  readonly drift_K_per_s: number;
  readonly start_K: number;
  /** By how much the equal areas put the step before mid-pulse: the overheating of the body, in seconds. */
  readonly early_s: number;
  readonly rise_K: number;
  /** From the end of the pulse before to the first sample; Infinity for the first pulse. */
  readonly rested_s: number;
  readonly previousRise_K: number;
}

function prepare(
  night: ForwardNight,
  transient: Transient,
  previous: Transient | undefined,
): Prepared | null {
  const { trace, stage, interval_s } = night;
  const { span, Q_J, drift } = transient;
  const duration_s = span.end_s - span.start_s;
  const lag_s = night.lag_s ?? 0;
  const previousEnd_s = previous?.span.end_s ?? Number.NEGATIVE_INFINITY;
  // Where the drift's window ends for another reason than the pulse before (a stage that is not logged, a
  // transfer), the model must not look further either.
  const cutBefore =
    drift !== null && drift.beforeSamples.time_s[0]! > span.earliest_s - span.start_s + 4 * interval_s;
  const longest_s = night.window_s ?? Number.POSITIVE_INFINITY;
  const from_s = cutBefore
    ? span.start_s + drift.beforeSamples.time_s[0]!
    : Math.max(
        trace.time_s[0]!,
        span.start_s - longest_s,
        Math.min(span.earliest_s, previousEnd_s + 3 * interval_s + 5 * lag_s),
      );
  const to_s =
    drift === null
      ? Math.min(span.latest_s, span.end_s + longest_s)
      : span.start_s + drift.afterSamples.time_s[drift.afterSamples.time_s.length - 1]!;
  const samples = usableSamples(trace, sampleRange(trace.time_s, from_s, to_s), span.start_s);
  const head = samples.time_s.reduce((count, t) => (t < 0 ? count + 1 : count), 0);
  const tail = samples.time_s.reduce((count, t) => (t >= duration_s ? count + 1 : count), 0);
  if (head < FEWEST_SAMPLES || tail < FEWEST_SAMPLES) return null;
  const window =
    stage === null ? null : stageWindow(stage, span.start_s, from_s - span.start_s, to_s - span.start_s);
  const thin = thinTransient(samples, duration_s, interval_s, window);
  const { temperature_K, time_s } = thin;
  const last = temperature_K.length - 1;
  const drop_K =
    drift === null ? temperature_K[last]! - temperature_K[0]! : drift.T_after_K - drift.T_before_K;
  const rise_K = Math.max(drop_K, 3 * thin.noise_K);
  const middle_s = duration_s / 2;
  const kink =
    drift === null ? 0 : drift.after.slope_K_per_s(middle_s) - drift.before.slope_K_per_s(middle_s);
  const T_before_K = drift === null ? temperature_K[0]! : drift.T_before_K;
  return {
    samples: thin,
    T_K: T_before_K + rise_K / 2,
    Q_J,
    duration_s,
    C_J_per_K: Q_J / rise_K,
    link_per_s: Math.max(0, -kink / rise_K),
    drift_K_per_s: drift === null ? 0 : drift.before.slope_K_per_s(0),
    start_K: drift === null ? temperature_K[0]! : drift.before.value_K(time_s[0]!),
    early_s: drift === null ? 0 : middle_s - drift.step.time_s,
    rise_K,
    rested_s: from_s - previousEnd_s,
    previousRise_K:
      previous?.drift === null || previous === undefined
        ? rise_K
        : Math.abs(previous.drift.T_after_K - previous.drift.T_before_K),
  };
}

interface Laws {
  readonly T_K: Float64Array;
  readonly C: Float64Array;
  readonly link: ConductanceLaw;
  readonly boundary: ConductanceLaw;
}

/** A metal link carries heat as T, a boundary as T³ (Pollack, Rev. Mod. Phys. 41, 48 (1969)): where to begin. */
const LINK: ConductanceLaw = { power: 1, u: 0.7 };
const BOUNDARY: ConductanceLaw = { power: 3, u: 0.7 };

function startingLaws(transients: readonly Transient[]): Laws {
  const rows = transients.filter(
    ({ drift, Q_J }) => drift !== null && Q_J > 0 && drift.T_after_K > drift.T_before_K,
  );
  return {
    T_K: Float64Array.from(rows, ({ drift }) => (drift!.T_after_K + drift!.T_before_K) / 2),
    C: Float64Array.from(rows, ({ drift, Q_J }) => Q_J / (drift!.T_after_K - drift!.T_before_K)),
    link: LINK,
    boundary: BOUNDARY,
  };
}

function lawsOf(before: Laws, fits: readonly ForwardFits[]): Laws {
  const chosen = fits.map(({ one, two }) => two ?? one);
  const T = chosen.map((fit) => fit.T_K);
  const C = chosen.map((fit) => fit.C_J_per_K);
  const twos = fits.flatMap(({ two }) => (two === null ? [] : [two]));
  // Pulses that were not fitted stay as they were read.
  const others = [...before.T_K.keys()].filter(
    (i) => !T.some((t) => Math.abs(t / before.T_K[i]! - 1) < 1e-3),
  );
  return {
    T_K: Float64Array.from([...T, ...others.map((i) => before.T_K[i]!)]),
    C: Float64Array.from([...C, ...others.map((i) => before.C[i]!)]),
    link: conductanceLaw(
      T,
      chosen.map((fit) => fit.link_W_per_K),
      chosen.map((fit) => fit.u_link_W_per_K),
      before.link,
    ),
    boundary: conductanceLaw(
      twos.map((fit) => fit.T_K),
      twos.map((fit) => fit.boundary_W_per_K),
      twos.map((fit) => (fit.boundary_W_per_K * fit.u_boundary_s) / fit.boundary_s),
      before.boundary,
    ),
  };
}

/** What all transients of a night share. */
interface Common {
  readonly shift: Prior;
  readonly lag: Prior;
}

/**
 * A few clear pulses tell the clock's remaining offset and, where nobody gave it, the thermometer's lag. Both are
 * sought from several starts, since a body that overheats at once makes the misfit jump when the onset crosses a
 * sample.
 */
function scout(
  night: ForwardNight,
  prepared: ReadonlyMap<number, Prepared>,
  rows: readonly number[],
  laws: Laws,
): Common {
  const { interval_s, u_start_s } = night;
  const known: Common = {
    shift: { value: 0, u: u_start_s },
    lag: { value: night.lag_s ?? 0, u: 0 },
  };
  const clear = [...rows]
    .sort((a, b) => clarity(prepared.get(b)!) - clarity(prepared.get(a)!))
    .slice(0, Math.max(SCOUTS, rows.length >> 1));
  const stride = Math.max(1, Math.floor(clear.length / SCOUTS));
  const chosen = clear.filter((_, rank) => rank % stride === 0).slice(0, SCOUTS);
  const shifts: number[] = [];
  const lags: { value: number; u: number }[] = [];
  const bodies = night.contents.kind === "empty" ? "one" : "two";
  for (const row of chosen) {
    const at = prepared.get(row)!;
    const plan = planOf(night, at, laws, known, null, null, bodies);
    let best: { fit: ForwardFit; plan: ForwardPlan } | null = null;
    for (const cell of cellsOf(at, 2 * u_start_s)) {
      const tried = { ...plan, shift: { value: 0, u: u_start_s, ...cell } };
      const fit = fitForward(at.samples, tried);
      if (best === null || fit.score < best.fit.score) best = { fit, plan: tried };
    }
    shifts.push(best!.fit.shift_s);
    if (night.lag_s === null) {
      const lag = { value: interval_s, u: Number.POSITIVE_INFINITY };
      const fit = fitForward(at.samples, { ...best!.plan, lag });
      lags.push({ value: fit.lag_s, u: fit.u_lag_s });
    }
  }
  const shift_s = median(shifts);
  // The pulses' own scatter is all that the clock leaves over; a sampled log's edges scatter by its interval.
  const scatter_s = 1.4826 * median(shifts.map((value) => Math.abs(value - shift_s)));
  return {
    shift: { value: shift_s, u: Math.min(u_start_s, Math.hypot(1.5 * scatter_s, 0.02 * interval_s)) },
    lag: known.lag,
    ...(lagOf(lags, interval_s) ?? {}),
  };
}

/** A lag below half a sampling interval is not told from a shift of the clock, and does no harm. */
function lagOf(lags: readonly { value: number; u: number }[], interval_s: number): { lag: Prior } | null {
  if (lags.length < 2) return null;
  const middle = median(lags.map(({ value }) => value));
  const u = median(lags.map((each) => each.u));
  return middle > 0.5 * interval_s && middle > 5 * u ? { lag: { value: middle, u: 0 } } : null;
}

interface Cell {
  readonly from_s: number;
  readonly to_s: number;
}

/** Spans of the heating's start within which neither of its edges crosses a sample; those that reach into ±reach_s. */
function cellsOf({ samples, duration_s }: Prepared, reach_s: number): Cell[] {
  const crossings = [...samples.time_s]
    .flatMap((t) => [t, t - duration_s])
    .filter((t) => Math.abs(t) < 1.5 * reach_s)
    .sort((a, b) => a - b);
  const ends = [-1.5 * reach_s, ...crossings, 1.5 * reach_s];
  return ends
    .slice(1)
    .map((to_s, i) => ({ from_s: ends[i]!, to_s }))
    .filter(({ from_s, to_s }) => to_s - from_s > 1e-6 && to_s > -reach_s && from_s < reach_s)
    .sort((a, b) => Math.abs(a.from_s + a.to_s) - Math.abs(b.from_s + b.to_s))
    .slice(0, MOST_CELLS);
}

/** The one that holds the shift, and its neighbours on either side. */
function cellsAbout(at: Prepared, shift_s: number): Record<"own" | "below" | "above", Cell> {
  const edges = [...at.samples.time_s].flatMap((t) => [t, t - at.duration_s]).sort((a, b) => a - b);
  // Edges of pulses in step with the samples coincide up to rounding.
  const distinct = edges.filter((t, i) => i === 0 || t - edges[i - 1]! > 1e-6);
  const k = Math.min(
    distinct.length - 3,
    Math.max(
      2,
      distinct.findIndex((t) => t > shift_s),
    ),
  );
  const cell = (end: number): Cell => ({ from_s: distinct[end - 1]!, to_s: distinct[end]! });
  return { own: cell(k), below: cell(k - 1), above: cell(k + 1) };
}

/** Fits within the cell of the expected start; where the fit ends on its border, the neighbour beyond is tried too. */
function fitAcrossCells(at: Prepared, plan: ForwardPlan): ForwardFit {
  const { own, below, above } = cellsAbout(at, plan.shift.value);
  const fitIn = (cell: Cell): ForwardFit =>
    fitForward(at.samples, { ...plan, shift: { ...plan.shift, ...cell } });
  const fit = fitIn(own);
  const border = 0.02 * (own.to_s - own.from_s);
  const next = fit.shift_s < own.from_s + border ? below : fit.shift_s > own.to_s - border ? above : null;
  if (next === null) return fit;
  const other = fitIn(next);
  return other.score < fit.score ? other : fit;
}

function clarity(at: Prepared): number {
  return at.rise_K / at.samples.noise_K;
}

function planOf(
  night: ForwardNight,
  at: Prepared,
  laws: Laws,
  common: Common,
  before: ForwardFit | null,
  neighbour: ForwardFit | null,
  bodies: "one" | "two",
): ForwardPlan {
  const { contents, interval_s } = night;
  const T = before?.T_K ?? at.T_K;
  const two = bodies === "two";
  const C = before?.C_J_per_K ?? at.C_J_per_K;
  const heat = two
    ? heatShape(contents, laws.T_K, laws.C, T)
    : totalShape(
        laws.T_K,
        laws.C,
        T,
        contents.kind === "empty" ? { power: 1, bend: 0 } : { power: 3, bend: 0 },
      );
  const shape: CellShape = { ...heat, linkPower: laws.link.power, boundaryPower: laws.boundary.power };
  const body = contents.kind === "filled" && contents.body !== null ? contents.body(T) : null;
  const share = body === null ? 0.4 : Math.min(0.95, body / C);
  const atNeighbour = neighbour === null || neighbour.bodies === "one" ? null : neighbour;
  const boundary_s =
    before?.bodies === "two"
      ? before.boundary_s
      : (atNeighbour?.boundary_s ??
        Math.max(0.02 * interval_s, (Math.max(0, at.early_s) * share) / (1 - share)));
  const u_lead_K = at.previousRise_K * Math.exp(-at.rested_s / (2 * boundary_s)) + 1e-3 * at.rise_K;
  return {
    bodies,
    reference_K: T,
    heater: { duration_s: at.duration_s, power_W: at.Q_J / at.duration_s },
    shape,
    linkPower: { value: laws.link.power, u: laws.link.u },
    bodyShare: body === null ? { value: 0.4, u: two ? 0.2 : 0 } : { body_J_per_K: body },
    C_J_per_K: C,
    link_per_s: before === null ? at.link_per_s : before.link_W_per_K / before.C_J_per_K,
    drift_K_per_s: before?.drift_K_per_s ?? at.drift_K_per_s,
    start_K: before?.curve_K[0] ?? at.start_K,
    boundary_s: Math.max(boundary_s, 1e-3 * interval_s),
    u_lead_K,
    shift: { value: before?.shift_s ?? common.shift.value, u: common.shift.u, from_s: 0, to_s: 0 },
    lag: common.lag,
    stageSlope: at.samples.stage_K === null ? "free" : "logged",
    fineStep_s: Math.max(at.duration_s / 32, interval_s / 4),
    interval_s,
  };
}

interface Round {
  readonly laws: Laws;
  readonly common: Common;
  /** "general" leaves out the model of one body where there are two: it only serves for the final choice. */
  readonly models: "general" | "both";
  readonly neighbour: ForwardFit | null;
  readonly before: ForwardFits | null;
}

function fitPulse(night: ForwardNight, at: Prepared, round: Round): ForwardFits {
  const { laws, common, models, neighbour, before } = round;
  const fitWith = (bodies: "one" | "two", last: ForwardFit | null): ForwardFit =>
    fitAcrossCells(at, planOf(night, at, laws, common, last, neighbour, bodies));
  const { samples } = at;
  if (night.contents.kind === "empty")
    return { samples, two: null, one: fitWith("one", before?.one ?? null) };
  const two = fitWith("two", before?.two ?? null);
  return { samples, two, one: models === "both" ? fitWith("one", null) : two };
}
