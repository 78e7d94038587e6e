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
    flag: Int32Array.from(rows, (row) => row.flag),
  };
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
    return {
      start_s,
      duration_s,
      start_within_s: 0,
      energy_J,
      currentSquared_A2s: current * current * duration_s,
      resistance_Ohm: voltage / current,
      u_energy_J: 0,
      u_length_relative: 0,
      flag: doubt(energy_J, duration_s, current * voltage),
    };
  });
}

interface Span {
  /** First and last sample with the heater on. */
  readonly first: number;
  readonly last: number;
}

/**
 * A sampled log holds the pulses as runs of samples above the resting current. Where a pulse begins and ends
 * between two samples is not seen; each edge is put halfway. If the lengths so found agree to one sampling
 * interval they are repeats of one programmed length: its mean over the night is far better known than any one.
 */
function fromSamples(log: HeaterSamples, programmed: PulseLength | null): Electrical[] {
  const usable = usableSamples(log);
  if (usable.time_s.length < 4) return [];
  const { time_s, current_A, voltage_V } = usable;
  const n = time_s.length;
  const rest = restingLevel(current_A);
  const spans: Span[] = [];
  for (let i = 0; i < n; i++) {
    if (Math.abs(current_A[i]! - rest.level) <= rest.threshold) continue;
    let last = i;
    while (last + 1 < n && Math.abs(current_A[last + 1]! - rest.level) > rest.threshold) last++;
    spans.push({ first: i, last });
    i = last;
  }
  const offsets = restingOffsets(current_A, voltage_V, rest);
  const raw = spans.map((span) => integrate(usable, span, offsets));
  const shared: PulseLength | null =
    programmed ??
    sharedLength(
      raw.map((row) => row.duration_s),
      raw.map((row) => row.interval_s),
    );
  return raw.map((row, i) => {
    const duration_s = shared === null ? row.duration_s : shared.value;
    // Two edges, each anywhere within one interval: a triangle of half-width one interval.
    const u_own_s = shared === null ? row.interval_s / Math.sqrt(6) : 0;
    const energy_J = row.power_W * duration_s;
    const middle_s = row.start_s + row.duration_s / 2;
    const leftOn = spans[i]!.last === n - 1 ? PulseFlag.HeaterLeftOn : 0;
    return {
      start_s: middle_s - duration_s / 2,
      duration_s,
      // Where the length is known, both edges bound the start: what they leave open is the overlap of two intervals.
      start_within_s:
        shared === null
          ? row.interval_s / 2
          : Math.max(0, row.interval_s - Math.abs(row.duration_s - duration_s)) / 2,
      energy_J,
      currentSquared_A2s: row.current_A * row.current_A * duration_s,
      resistance_Ohm: row.resistance_Ohm,
      u_energy_J: Math.abs(row.power_W) * u_own_s,
      u_length_relative: shared === null ? 0 : shared.u / shared.value,
      flag: doubt(energy_J, duration_s, row.power_W) | leftOn,
    };
  });
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
 * of a thousand in power, so the threshold is set by the noise at rest, not by the largest pulse.
 */
function restingLevel(current_A: Float64Array): Rest {
  const sorted = current_A.slice().sort();
  const level = sorted[Math.floor(sorted.length / 2)]!;
  const deviation = current_A.map((value) => Math.abs(value - level)).sort();
  const mad = deviation[Math.floor(deviation.length / 2)]!;
  const largest = deviation[deviation.length - 1]!;
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
function restingOffsets(current_A: Float64Array, voltage_V: Float64Array, rest: Rest): Offsets {
  let n = 0;
  let sumI = 0;
  let sumV = 0;
  let pulseI = 0;
  let pulseV = 0;
  for (let i = 0; i < current_A.length; i++) {
    if (Math.abs(current_A[i]! - rest.level) <= rest.threshold) {
      n++;
      sumI += current_A[i]!;
      sumV += voltage_V[i]!;
    } else {
      pulseI += current_A[i]!;
      pulseV += voltage_V[i]!;
    }
  }
  if (n === 0) return { current_A: 0, voltage_V: 0, bias_W: 0 };
  const I0 = sumI / n;
  const V0 = sumV / n;
  const ohmic = Math.abs(V0 / I0 / (pulseV / pulseI) - 1) < 0.2;
  return ohmic
    ? { current_A: 0, voltage_V: 0, bias_W: V0 * I0 }
    : { current_A: I0, voltage_V: V0, bias_W: 0 };
}

interface RawPulse {
  readonly start_s: number;
  readonly duration_s: number;
  readonly interval_s: number;
  readonly power_W: number;
  readonly current_A: number;
  readonly resistance_Ohm: number;
}

function integrate(log: HeaterSamples, span: Span, offsets: Offsets): RawPulse {
  const { time_s } = log;
  const { first, last } = span;
  const edge = (before: number, after: number): number => (time_s[before]! + time_s[after]!) / 2;
  const n = time_s.length;
  const typical =
    last > first
      ? (time_s[last]! - time_s[first]!) / (last - first)
      : time_s[Math.min(n - 1, last + 1)]! - time_s[Math.max(0, first - 1)]!;
  const start_s = first > 0 ? edge(first - 1, first) : time_s[first]!;
  const end_s = last + 1 < n ? edge(last, last + 1) : time_s[last]!;
  let power = 0;
  let current2 = 0;
  let voltage = 0;
  let current = 0;
  const count = last - first + 1;
  for (let i = first; i <= last; i++) {
    const I = log.current_A[i]! - offsets.current_A;
    const V = log.voltage_V[i]! - offsets.voltage_V;
    power += V * I - offsets.bias_W;
    current2 += I * I;
    voltage += V;
    current += I;
  }
  return {
    start_s,
    duration_s: end_s - start_s,
    interval_s: typical,
    power_W: power / count,
    current_A: Math.sqrt(current2 / count),
    resistance_Ohm: voltage / current,
  };
}

/** One programmed length behind all pulses, if what was seen allows it. */
function sharedLength(duration_s: readonly number[], interval_s: readonly number[]): PulseLength | null {
  const n = duration_s.length;
  if (n < 3) return null;
  const interval = Math.max(...interval_s);
  const spread = Math.max(...duration_s) - Math.min(...duration_s);
  // Two edges, each seen to within one interval, differ by less than one interval between repeats.
  if (spread > 1.01 * interval) return null;
  const value = duration_s.reduce((sum, each) => sum + each, 0) / n;
  const scatter = Math.sqrt(duration_s.reduce((sum, each) => sum + (each - value) ** 2, 0) / (n - 1));
  // Lengths that vary by a sample average out. Lengths that never do are in step with the samples, and the edges
  // stay anywhere within their intervals, all night the same.
  const inStep = spread < 0.5 * interval;
  return { value, u: inStep ? interval / Math.sqrt(6) : scatter / Math.sqrt(n) };
}
