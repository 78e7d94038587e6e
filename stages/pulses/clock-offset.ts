import { median } from "simple-statistics";
import type { TemperatureTrace } from "../thermometry/types.js";
import { type GridMoments, gridMoments } from "./grid-moments.js";
import type { HeaterPulses } from "./heater-pulses.js";
import { type Onset, onsetOf, REACH_S, type Surroundings, surroundings } from "./onset.js";
import { samplingInterval_s } from "./window.js";

/** How far the heater's clock is from the thermometer's: offset + rate·(time − reference), time on the heater's. */
export interface ClockOffset {
  /** Added to heater times. 0 where it is not significant. */
  readonly offset_s: number;
  /** As estimated, applied or not; NaN where no pulse told. */
  readonly estimate_s: number;
  readonly u_s: number;
  /** By which the offset grows, s per s. 0 where it is not significant or not known. */
  readonly rate: number;
  /** As estimated, applied or not; NaN where too few pulses told, or too short a part of the night. */
  readonly rate_estimate: number;
  readonly u_rate: number;
  /** Heater time at which the offset is `offset_s`. */
  readonly reference_s: number;
  /** Pulses it was read from. */
  readonly pulses: number;
  /** Whether heater times are moved at all. */
  readonly applied: boolean;
}

export const NO_OFFSET: ClockOffset = {
  offset_s: 0,
  estimate_s: Number.NaN,
  u_s: Number.NaN,
  rate: 0,
  rate_estimate: Number.NaN,
  u_rate: Number.NaN,
  reference_s: 0,
  pulses: 0,
  applied: false,
};

/** So many pulses tell the offset; more of them only cost time. */
const ENOUGH = 16;
const FEWEST = 3;
/** A line needs more: with these, one that is far off does not turn it. */
const FEWEST_FOR_RATE = 8;
/** Part of the heater's night that they must span. */
const SPAN_FOR_RATE = 0.6;
/**
 * What a fit of one exponential leaves of cells that answer to a pulse as heat and conductance change with temperature,
 * a part of the pulse's length (measured on simulated nights).
 */
const MODEL = 2e-3;
/** Where the trace bends and nobody said whether the thermometer lags, the bend may be two: a part of the length, or s. */
const TWO_BENDS = 1e-2;
const TWO_BENDS_S = 0.1;
const SIGNIFICANT = 4;
/** Log-likelihood by which a clock is ruled out: a normal variable four standard deviations off. */
const RULED_OUT = 8;
/** Pulses whose onset is something else: a door, a spike, a step of the stage. */
const ASTRAY = 0.02;

interface Seen {
  readonly onset: Onset;
  /** Heater time from the reference. */
  readonly time_s: number;
  /** The heater's own start lies anywhere within ± this. */
  readonly within_s: number;
}

/**
 * Offset and rate of the heater's clock from the onsets that the thermometer sees, each applied only where the
 * trace rules out that it is zero: a correction that is noise moves every pulse of the night together.
 * @param lag_s by which the thermometer is known to follow the body; null where nobody knows
 */
export function clockOffset(
  trace: TemperatureTrace,
  heater: HeaterPulses,
  lag_s: number | null = null,
): ClockOffset {
  const interval_s = samplingInterval_s(trace.time_s);
  const found = clearest(heater)
    .map((i) => ({ i, about: surroundings(trace, heater, i, interval_s) }))
    .filter((each): each is { i: number; about: Surroundings } => each.about !== null);
  if (found.length < FEWEST) return NO_OFFSET;
  const times = found.map(({ i }) => heater.start_s[i]!);
  const span_s = Math.max(...times) - Math.min(...times);
  const reference_s = times.reduce((sum, t) => sum + t, 0) / times.length;
  const seen = found.map(({ i, about }) => ({
    onset: onsetOf(about, lag_s ?? 0),
    time_s: heater.start_s[i]! - reference_s,
    within_s: heater.start_within_s[i]!,
  }));
  const model_s = modelError_s(seen, median(found.map(({ about }) => about.duration_s)), lag_s);
  // An error that grows evenly from one end of the night to the other; its standard deviation is model_s.
  const modelRate = (model_s * Math.sqrt(12)) / span_s;

  const heaterSpan_s = heater.start_s[heater.start_s.length - 1]! - heater.start_s[0]!;
  const tellsRate = seen.length >= FEWEST_FOR_RATE && span_s >= SPAN_FOR_RATE * heaterSpan_s;
  const level = levelOf(seen);
  const line = tellsRate ? lineOf(seen) : null;
  const rated =
    line !== null &&
    Math.abs(line.rate.value) > SIGNIFICANT * modelRate &&
    rulesOut(seen, [line.offset.value, line.rate.value], [level.value, 0]);
  const offset = rated ? line.offset : level;
  const rate = rated ? line.rate.value : 0;
  const moved =
    Math.abs(offset.value) > SIGNIFICANT * model_s && rulesOut(seen, [offset.value, rate], [0, rate]);
  return {
    offset_s: moved ? offset.value : 0,
    estimate_s: offset.value,
    u_s: Math.hypot(offset.u, model_s),
    rate,
    rate_estimate: line === null ? Number.NaN : line.rate.value,
    u_rate: line === null ? Number.NaN : Math.hypot(line.rate.u, modelRate),
    reference_s,
    pulses: seen.length,
    applied: moved || rated,
  };
}

function modelError_s(seen: readonly Seen[], duration_s: number, lag_s: number | null): number {
  const bends = seen.filter(({ onset }) => onset.bends).length >= seen.length / 2;
  return lag_s === null && bends ? Math.min(TWO_BENDS * duration_s, TWO_BENDS_S) : MODEL * duration_s;
}

/** A bend is fitted to each pulse at each start, and follows its noise: half a unit each is no word of the clock's. */
const ruledOut = (seen: readonly Seen[]): number => RULED_OUT + seen.length / 2;

/** Offset at the reference, and rate. */
type Clock = readonly [offset_s: number, rate: number];

/**
 * Whether `found` is so much likelier than `other` that nobody would take the one for the other, and not on the word
 * of one pulse alone: the one that says so loudest is not heard.
 */
function rulesOut(seen: readonly Seen[], found: Clock, other: Clock): boolean {
  const word = (each: Seen): number =>
    logLikelihood(each, "bent_per_s", found) - logLikelihood(each, "bent_per_s", other);
  const words = seen.map(word);
  return words.reduce((sum, value) => sum + value, 0) - Math.max(...words) > ruledOut(seen);
}

interface Estimate {
  readonly value: number;
  readonly u: number;
}

/** The heater pulses, moved to the thermometer's clock. */
export function onThermometerClock(
  heater: HeaterPulses,
  clock: Pick<ClockOffset, "offset_s" | "rate" | "reference_s">,
): HeaterPulses {
  const { offset_s, rate, reference_s } = clock;
  if (offset_s === 0 && rate === 0) return heater;
  return { ...heater, start_s: heater.start_s.map((t) => t + offset_s + rate * (t - reference_s)) };
}

/** The strongest pulse of each part of the night: the strongest of all crowd at one end of it. */
function clearest(heater: HeaterPulses): number[] {
  const sound = [...heater.pulse.keys()].filter((i) => heater.flag[i] === 0);
  const parts = Math.min(ENOUGH, sound.length);
  return Array.from({ length: parts }, (_, k) => {
    const part = sound.slice(
      Math.round((k * sound.length) / parts),
      Math.round(((k + 1) * sound.length) / parts),
    );
    return part.reduce((best, i) => (heater.Q_J[i]! > heater.Q_J[best]! ? i : best));
  });
}

/** Offset alone. */
function levelOf(seen: readonly Seen[]): Estimate {
  const middle = median(seen.map(({ onset }) => onset.best_s));
  const half = roomAround(seen, () => middle);
  return judged(seen, [[middle - half, middle + half]])[0]!;
}

/** Offset at the reference, and rate. */
function lineOf(seen: readonly Seen[]): { readonly offset: Estimate; readonly rate: Estimate } {
  const slopes = seen.flatMap((a, k) =>
    seen.slice(k + 1).map((b) => (b.onset.best_s - a.onset.best_s) / (b.time_s - a.time_s)),
  );
  // Theil (1950) and Sen (J. Am. Stat. Assoc. 63, 1379 (1968)), to know where to look.
  const slope = median(slopes);
  const middle = median(seen.map(({ onset, time_s }) => onset.best_s - slope * time_s));
  const half = roomAround(seen, (time_s) => middle + slope * time_s);
  const steepest = half / Math.max(...seen.map(({ time_s }) => Math.abs(time_s)));
  const [offset, rate] = judged(seen, [
    [middle - half, middle + half],
    [slope - steepest, slope + steepest],
  ]);
  return { offset: offset!, rate: rate! };
}

/**
 * Plain corners put each onset between two samples, and whatever bends the trace by less than that moves it without
 * a sign. So the value is theirs where the bent ones do not rule it out, and the uncertainty is that of the bent ones.
 */
function judged(seen: readonly Seen[], box: readonly (readonly [number, number])[]): Estimate[] {
  const sumOf = (which: Which, [offset, rate]: readonly number[]): number =>
    seen.reduce((sum, each) => sum + logLikelihood(each, which, [offset!, rate ?? 0]), 0);
  const moments = (which: Which): GridMoments => gridMoments((at) => sumOf(which, at), box);
  const [plain, bent] = [moments("plain_per_s"), moments("bent_per_s")];
  const agree = sumOf("bent_per_s", plain.mean) > bent.top - ruledOut(seen);
  return bent.mean.map((value, k) =>
    agree
      ? { value: plain.mean[k]!, u: Math.hypot(bent.sd[k]!, plain.mean[k]! - value) }
      : { value, u: bent.sd[k]! },
  );
}

/** How far from a line the posterior may reach: its onsets' scatter, and what each of them leaves open. */
function roomAround(seen: readonly Seen[], line: (time_s: number) => number): number {
  const scatter = 1.4826 * median(seen.map(({ onset, time_s }) => Math.abs(onset.best_s - line(time_s))));
  const open = seen.map(({ onset, within_s }) => within_s + (onset.bent_per_s.length * onset.step_s) / 2);
  return 3 * scatter + median(open);
}

type Which = "bent_per_s" | "plain_per_s";

function logLikelihood({ onset, time_s, within_s }: Seen, which: Which, [offset_s, rate]: Clock): number {
  const density = densityAt(onset, onset[which], offset_s + rate * time_s, within_s);
  return Math.log((1 - ASTRAY) * density + ASTRAY / (2 * REACH_S));
}

/** Density of the onset at a time, or its mean within ± a half-width. */
function densityAt(
  { from_s, step_s }: Onset,
  density_per_s: Float64Array,
  at_s: number,
  within_s: number,
): number {
  const place = (t: number): number => (t - from_s) / step_s;
  if (within_s < step_s) return interpolated(density_per_s, place(at_s));
  const first = Math.max(0, Math.ceil(place(at_s - within_s)));
  const last = Math.min(density_per_s.length - 1, Math.floor(place(at_s + within_s)));
  let sum = 0;
  for (let j = first; j <= last; j++) sum += density_per_s[j]!;
  return (sum * step_s) / (2 * within_s);
}

function interpolated(values: Float64Array, place: number): number {
  const j = Math.floor(place);
  if (!(j >= 0 && j + 1 < values.length)) return 0;
  return values[j]! + (place - j) * (values[j + 1]! - values[j]!);
}
