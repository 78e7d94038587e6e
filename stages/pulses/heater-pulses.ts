import { median } from "simple-statistics";
import type { HeaterEvents, HeaterLog, HeaterSamples } from "../ingest/types.js";
import { PulseFlag } from "./types.js";

/** How the heater is wired; what the cell's configuration says of it. */
export interface HeaterWiring {
  /** Of the current leads between the voltage taps and the cold end, both together. */
  readonly lead_resistance_Ohm: number;
  /** Part of the lead heat that flows into the cell. One half is common practice, no source. */
  readonly lead_share: number;
}

/** The pulses a heater log holds, on the heater's own clock. Every column has length n. */
export interface HeaterPulses {
  /** 1-based, in order of time. */
  readonly pulse: Int32Array;
  readonly start_s: Float64Array;
  readonly duration_s: Float64Array;
  /** The start lies anywhere within ± this: half of what two samples leave open. 0 for events. */
  readonly start_within_s: Float64Array;
  /** Heat that reaches the cell: ∫VI dt and the inward part of the lead heat. */
  readonly Q_J: Float64Array;
  readonly lead_heat_J: Float64Array;
  /** ∫I² dt, what a lead of 1 Ohm dissipates. */
  readonly currentSquared_A2s: Float64Array;
  /** Repeatability, k = 1. */
  readonly u_Q_J: Float64Array;
  /** Relative standard uncertainty of the pulse length, where it is common to all pulses of the night. */
  readonly u_length_relative: Float64Array;
  readonly resistance_Ohm: Float64Array;
  /** Power of the last third of the pulse less that of the first, over the mean; 0 for events, which do not tell. */
  readonly power_change: Float64Array;
  /** Bits of PulseFlag that the heater log alone decides. */
  readonly flag: Int32Array;
}

interface Electrical {
  readonly start_s: number;
  readonly duration_s: number;
  readonly start_within_s: number;
  /** ∫VI dt and ∫I² dt. */
  readonly energy_J: number;
  readonly currentSquared_A2s: number;
  readonly resistance_Ohm: number;
  /** From reading noise and from where the pulse begins and ends between samples. */
  readonly u_energy_J: number;
  readonly u_length_relative: number;
  readonly power_change: number;
  readonly flag: number;
}

/** A pulse length that somebody knows better than the log. */
export interface PulseLength {
  readonly value: number;
  readonly u: number;
}

/** @returns one row a pulse; a pulse of zero length or energy stays, flagged. */
export function heaterPulses(
  log: HeaterLog,
  wiring: HeaterWiring,
  programmed: PulseLength | null = null,
): HeaterPulses {
  const rows = log.kind === "events" ? fromEvents(log) : fromSamples(log, programmed);
  const readingNoise = relativeReadingNoise(rows);
  const lead = rows.map((row) => row.currentSquared_A2s * wiring.lead_resistance_Ohm * wiring.lead_share);
  return {
    pulse: Int32Array.from(rows, (_, i) => i + 1),
    start_s: Float64Array.from(rows, (row) => row.start_s),
    duration_s: Float64Array.from(rows, (row) => row.duration_s),
    start_within_s: Float64Array.from(rows, (row) => row.start_within_s),
    Q_J: Float64Array.from(rows, (row, i) => row.energy_J + lead[i]!),
    lead_heat_J: Float64Array.from(lead),
    currentSquared_A2s: Float64Array.from(rows, (row) => row.currentSquared_A2s),
    u_Q_J: Float64Array.from(rows, (row) => Math.hypot(row.u_energy_J, readingNoise * row.energy_J)),
    u_length_relative: Float64Array.from(rows, (row) => row.u_length_relative),
    resistance_Ohm: Float64Array.from(rows, (row) => row.resistance_Ohm),
    power_change: Float64Array.from(rows, (row) => row.power_change),
    flag: Int32Array.from(rows, (row) => row.flag),
  };
}

/**
 * The pulses, with those named that go on beyond the thermometer's log: it does not see them end.
 * @param lastSample_s of the thermometer, on the pulses' clock
 */
export function leftOnAtEnd(heater: HeaterPulses, lastSample_s: number): HeaterPulses {
  const flag = heater.flag.map((bits, i) =>
    heater.start_s[i]! + heater.duration_s[i]! > lastSample_s ? bits | PulseFlag.HeaterLeftOn : bits,
  );
  return { ...heater, flag };
}

/**
 * Scatter of V·I from pulse to pulse, relative. The heater itself is steady, so V/I shows the reading noise;
 * neighbours are compared, which leaves out a slow change of R with temperature.
 */
function relativeReadingNoise(rows: readonly Electrical[]): number {
  const steps: number[] = [];
  for (let i = 1; i < rows.length; i++) {
    const step = Math.log(rows[i]!.resistance_Ohm / rows[i - 1]!.resistance_Ohm);
    if (Number.isFinite(step)) steps.push(Math.abs(step));
  }
  // A median of |differences| of a normal variable is 0.6745·√2 of its standard deviation. V/I and V·I have
  // the same relative noise where V and I are read independently.
  return steps.length < 3 ? 0 : median(steps) / (0.6745 * Math.SQRT2);
}

function doubt(energy_J: number, duration_s: number, product: number): number {
  if (product < 0) return PulseFlag.VoltageInverted;
  return energy_J > 0 && duration_s > 0 ? 0 : PulseFlag.ZeroEnergy;
}

function fromEvents(log: HeaterEvents): Electrical[] {
  return Array.from(log.time_s, (start_s, i) => {
    const current = log.current_A[i]!;
    const voltage = log.voltage_V[i]!;
    const duration_s = log.duration_s[i]!;
    const energy_J = current * voltage * duration_s;
    const next_s = log.time_s[i + 1] ?? Number.POSITIVE_INFINITY;
    const leftOn = start_s + duration_s > next_s ? PulseFlag.HeaterLeftOn : 0;
    return {
      start_s,
      duration_s,
      start_within_s: 0,
      energy_J,
      currentSquared_A2s: current * current * duration_s,
      resistance_Ohm: voltage / current,
      u_energy_J: 0,
      u_length_relative: 0,
      power_change: 0,
      flag: doubt(energy_J, duration_s, current * voltage) | leftOn,
    };
  });
}

/** Samples in a row with the heater on. */
interface Run {
  readonly first: number;
  readonly last: number;
}

/** When something happened: between two samples. */
interface Between {
  readonly from_s: number;
  readonly to_s: number;
}

/** A run as the log shows it. */
interface Seen {
  readonly samples: number;
  readonly start: Between;
  readonly end: Between;
  /** On with the log's first sample, or still on with its last. */
  readonly cut: boolean;
  /** Samples are missing in the run, or where it begins or ends. */
  readonly gap: boolean;
  /** Means over the samples, and what the first and the last of them read. */
  readonly power_W: number;
  readonly currentSquared_A2: number;
  readonly firstPower_W: number;
  readonly lastPower_W: number;
  readonly power_change: number;
  readonly resistance_Ohm: number;
}

/** So many intervals from one sample to the next are a gap. */
const GAP = 2.5;

/**
 * A sampled log holds the pulses as runs of samples above the resting current. Where a pulse begins and ends
 * between two samples is not seen; each edge is put halfway. If the lengths so found agree to one sampling
 * interval they are repeats of one programmed length: its mean over the night is far better known than any one. A run
 * that cannot be such a repeat keeps its own.
 */
function fromSamples(log: HeaterSamples, programmed: PulseLength | null): Electrical[] {
  const usable = usableSamples(log);
  const { time_s, current_A } = usable;
  if (time_s.length < 4) return [];
  const rest = restingLevel(current_A);
  const isOn = (i: number): boolean => Math.abs(current_A[i]! - rest.level) > rest.threshold;
  const runs: Run[] = [];
  for (let i = 0; i < time_s.length; i++) {
    if (!isOn(i)) continue;
    let last = i;
    while (last + 1 < time_s.length && isOn(last + 1)) last++;
    runs.push({ first: i, last });
    i = last;
  }
  const interval_s = medianStep(time_s);
  const offsets = restingOffsets(usable, isOn);
  const seen = runs.map((run) => seenAs(usable, run, offsets, interval_s));
  const length = programmed ?? sharedLength(seen.filter(isWhole).map(halfway), interval_s);
  return seen.map((run) => electrical(run, length, interval_s));
}

const isWhole = ({ cut, gap }: Seen): boolean => !cut && !gap;

const middleOf = ({ from_s, to_s }: Between): number => (from_s + to_s) / 2;
const widthOf = ({ from_s, to_s }: Between): number => to_s - from_s;

/** Length with each edge halfway between its two samples. */
const halfway = ({ start, end }: Seen): number => middleOf(end) - middleOf(start);

/** One run as a pulse, of the night's common length where it can be that. */
function electrical(run: Seen, length: PulseLength | null, interval_s: number): Electrical {
  const common = length !== null && fits(run, length, interval_s) ? length : null;
  const start = common === null ? run.start : startOf(run, common.value);
  const duration_s = common === null ? halfway(run) : common.value;
  const energy_J = run.power_W * duration_s;
  const { firstPower_W, lastPower_W } = run;
  // Each edge lies anywhere between its two samples. A common length puts both in one place, and its own uncertainty
  // is not this pulse's alone.
  const u_energy_J =
    common === null
      ? Math.hypot(firstPower_W * widthOf(run.start), lastPower_W * widthOf(run.end)) / Math.sqrt(12)
      : (Math.abs(lastPower_W - firstPower_W) * widthOf(start)) / Math.sqrt(12);
  // A power that rises or falls is not the mean at the edges. Meters that average over their interval read less there.
  const steepness = Math.max(1, (firstPower_W + lastPower_W) / 2 / run.power_W);
  let flag = doubt(energy_J, duration_s, run.power_W);
  if (run.cut) flag |= PulseFlag.HeaterLeftOn;
  if (run.gap && common === null) flag |= PulseFlag.SamplesMissing;
  // Where a pulse takes several samples, one alone is a slip of the source or the meter, of no length that is seen.
  if (run.samples === 1 && common === null && length !== null && length.value > GAP * interval_s)
    flag |= PulseFlag.ZeroEnergy;
  return {
    start_s: middleOf(start),
    duration_s,
    start_within_s: widthOf(start) / 2,
    energy_J,
    currentSquared_A2s: run.currentSquared_A2 * duration_s,
    resistance_Ohm: run.resistance_Ohm,
    u_energy_J,
    u_length_relative: common === null ? 0 : (steepness * common.u) / common.value,
    power_change: run.power_change,
    flag,
  };
}

/** Whether a pulse of that length can have made the run: its edges leave room for it. */
function fits({ start, end, cut }: Seen, { value, u }: PulseLength, interval_s: number): boolean {
  const slack_s = 3 * u + 1e-3 * interval_s;
  return !cut && value > end.from_s - start.to_s - slack_s && value < end.to_s - start.from_s + slack_s;
}

/** Both edges bound the start of a pulse of known length: what they leave open is the overlap of two intervals. */
function startOf({ start, end }: Seen, length_s: number): Between {
  const from_s = Math.max(start.from_s, end.from_s - length_s);
  const to_s = Math.min(start.to_s, end.to_s - length_s);
  if (from_s <= to_s) return { from_s, to_s };
  // Apart by no more than the slack of the length.
  return { from_s: (from_s + to_s) / 2, to_s: (from_s + to_s) / 2 };
}

function medianStep(time_s: Float64Array): number {
  const steps: number[] = [];
  for (let i = 1; i < time_s.length; i++) steps.push(time_s[i]! - time_s[i - 1]!);
  return median(steps);
}

function usableSamples(log: HeaterSamples): HeaterSamples {
  const keep: number[] = [];
  for (let i = 0; i < log.time_s.length; i++) {
    if (Number.isFinite(log.current_A[i]!) && Number.isFinite(log.voltage_V[i]!)) keep.push(i);
  }
  if (keep.length === log.time_s.length) return log;
  const take = (column: Float64Array) => Float64Array.from(keep, (i) => column[i]!);
  return {
    kind: "sampled",
    time_s: take(log.time_s),
    current_A: take(log.current_A),
    voltage_V: take(log.voltage_V),
  };
}

interface Rest {
  readonly level: number;
  readonly threshold: number;
}

/**
 * Current while the heater rests, and how far from it a sample must be to count as a pulse.
 * The heater rests most of the night, so the median is its level; pulses of a night may differ by a factor
 * of a thousand in power, so the threshold is set by the noise at rest, not by the largest pulse. Left on for more than
 * half of the night, the median is what it was left at, and the rest is what lies well below.
 */
function restingLevel(current_A: Float64Array): Rest {
  const rest = levelOf(current_A, current_A);
  const below: number[] = [];
  for (const I of current_A) {
    if (Math.abs(I) < Math.abs(rest.level) / 2 && Math.abs(I - rest.level) > rest.threshold) below.push(I);
  }
  return below.length >= FEWEST_AT_REST ? levelOf(Float64Array.from(below), current_A) : rest;
}

const FEWEST_AT_REST = 4;

function levelOf(resting_A: Float64Array, all_A: Float64Array): Rest {
  const middle = (values: Float64Array): number => values.sort()[Math.floor(values.length / 2)]!;
  const level = middle(resting_A.slice());
  const mad = middle(resting_A.map((I) => Math.abs(I - level)));
  const largest = all_A.reduce((most, I) => Math.max(most, Math.abs(I - level)), 0);
  // 10 standard deviations, and never below a ten-thousandth of the strongest pulse: digitised logs have no noise.
  return { level, threshold: Math.max(10 * 1.4826 * mad, 1e-4 * largest) };
}

interface Offsets {
  readonly current_A: number;
  readonly voltage_V: number;
  /** Power that flows all the time: part of the drift, not of the pulse. */
  readonly bias_W: number;
}

/**
 * What the instruments read at rest. A thermal voltage without current is an offset of the voltmeter's and is
 * taken off; a current with its own voltage is a bias that really heats, and only its power is taken off.
 */
function restingOffsets(log: HeaterSamples, isOn: (i: number) => boolean): Offsets {
  const { current_A, voltage_V } = log;
  let n = 0;
  let sumI = 0;
  let sumV = 0;
  const ratios: number[] = [];
  for (let i = 0; i < current_A.length; i++) {
    if (isOn(i)) {
      ratios.push(voltage_V[i]! / current_A[i]!);
    } else {
      n++;
      sumI += current_A[i]!;
      sumV += voltage_V[i]!;
    }
  }
  if (n === 0 || ratios.length === 0) return { current_A: 0, voltage_V: 0, bias_W: 0 };
  const I0 = sumI / n;
  const V0 = sumV / n;
  // A median of ratios: sums would cancel where the polarity is reversed from pulse to pulse.
  const ohmic = Math.abs(V0 / I0 / median(ratios) - 1) < 0.2;
  return ohmic
    ? { current_A: 0, voltage_V: 0, bias_W: V0 * I0 }
    : { current_A: I0, voltage_V: V0, bias_W: 0 };
}

function seenAs(log: HeaterSamples, { first, last }: Run, offsets: Offsets, interval_s: number): Seen {
  const { time_s } = log;
  const n = time_s.length;
  const samples = last - first + 1;
  const power_W = new Float64Array(samples);
  let current2 = 0;
  let VI = 0;
  let longest_s = 0;
  for (let k = 0; k < samples; k++) {
    const i = first + k;
    const I = log.current_A[i]! - offsets.current_A;
    const V = log.voltage_V[i]! - offsets.voltage_V;
    power_W[k] = V * I - offsets.bias_W;
    current2 += I * I;
    VI += V * I;
    if (k > 0) longest_s = Math.max(longest_s, time_s[i]! - time_s[i - 1]!);
  }
  const between = (before: number, after: number): Between => ({
    from_s: time_s[Math.max(0, before)]!,
    to_s: time_s[Math.min(n - 1, after)]!,
  });
  const start = between(first - 1, first);
  const end = between(last, last + 1);
  const mean = (from: number, to: number): number =>
    power_W.subarray(from, to).reduce((sum, P) => sum + P, 0) / (to - from);
  const third = Math.max(1, Math.floor(samples / 3));
  const whole_W = mean(0, samples);
  return {
    samples,
    start,
    end,
    cut: first === 0 || last === n - 1,
    gap: Math.max(longest_s, widthOf(start), widthOf(end)) > GAP * interval_s,
    power_W: whole_W,
    currentSquared_A2: current2 / samples,
    firstPower_W: power_W[0]!,
    lastPower_W: power_W[samples - 1]!,
    power_change: (mean(samples - third, samples) - mean(0, third)) / whole_W,
    // Least squares, and good for a polarity that is reversed within the pulse.
    resistance_Ohm: VI / current2,
  };
}

/** Part of the pulses that must agree on one length. */
const MOST = 0.7;

/** One programmed length behind most pulses, if what was seen allows it. */
function sharedLength(duration_s: readonly number[], interval_s: number): PulseLength | null {
  // Two edges, each seen to within one interval, differ by less than one interval between repeats.
  const room_s = 1.01 * interval_s;
  const sorted = [...duration_s].sort((a, b) => a - b);
  let repeats: readonly number[] = [];
  for (let from = 0, to = 0; from < sorted.length; from++) {
    while (to < sorted.length && sorted[to]! - sorted[from]! <= room_s) to++;
    if (to - from > repeats.length) repeats = sorted.slice(from, to);
  }
  const n = repeats.length;
  if (n < 3 || n < MOST * sorted.length) return null;
  const value = repeats.reduce((sum, each) => sum + each, 0) / n;
  const scatter = Math.sqrt(repeats.reduce((sum, each) => sum + (each - value) ** 2, 0) / (n - 1));
  // Lengths that vary by a sample average out. Lengths that never do are in step with the samples, and the edges
  // stay anywhere within their intervals, all night the same.
  const inStep = repeats[n - 1]! - repeats[0]! < 0.5 * interval_s;
  return { value, u: inStep ? interval_s / Math.sqrt(6) : scatter / Math.sqrt(n) };
}
