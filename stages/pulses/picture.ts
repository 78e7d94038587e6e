import type { TemperatureTrace } from "../thermometry/types.js";
import type { DriftFit } from "./drift.js";
import type { DriftStep, PulseSpan } from "./drift-step.js";
import type { ForwardFit } from "./forward-fit.js";
import type { ForwardFits } from "./forward-night.js";
import type { FittedCurve, PulseMethod, PulsePicture } from "./types.js";
import { firstAtOrAfter, type Samples, sampleRange, usableSamples } from "./window.js";

const POINTS = 160;
const MARGIN = 0.05;

/** How a pulse was read: drift lines, or a model on its own blocks of samples. */
export interface PictureSource {
  readonly method: PulseMethod;
  readonly drift: DriftStep | null;
  readonly fit: ForwardFit | null;
  readonly fits: ForwardFits | null;
  readonly T_before_K: number;
  readonly dT_K: number;
}

/** Samples around a pulse, thinned evenly but whole around the pulse itself, and what was fitted to them. */
export function pulsePicture(
  trace: TemperatureTrace,
  pulse: number,
  span: PulseSpan,
  source: PictureSource | null,
): PulsePicture {
  const { start_s, end_s } = span;
  const length_s = end_s - start_s;
  const fitted = fittedOf(source, length_s);
  const [first, last] = [fitted?.windows[0], fitted?.windows.at(-1)];
  // What was fitted and a little around it: a step of the stage long before would dwarf the pulse.
  const margin_s = first === undefined ? 0 : MARGIN * (last!.to_s - first.from_s);
  const from_s = Math.max(
    span.earliest_s,
    first === undefined ? span.earliest_s : start_s + first.from_s - margin_s,
  );
  const to_s = Math.min(span.latest_s, last === undefined ? span.latest_s : start_s + last.to_s + margin_s);
  const seen = usableSamples(trace, sampleRange(trace.time_s, from_s, to_s), start_s);
  const near = (t: number) => t > -length_s && t < 3 * length_s;
  const inside = seen.time_s.reduce((count, t) => (near(t) ? count + 1 : count), 0);
  const strideNear = Math.max(1, Math.ceil(inside / (POINTS / 2)));
  const strideFar = Math.max(1, Math.ceil((seen.time_s.length - inside) / (POINTS / 2)));
  const kept: number[] = [];
  seen.time_s.forEach((t, i) => {
    if (i % (near(t) ? strideNear : strideFar) === 0) kept.push(i);
  });
  const time_s = Float64Array.from(kept, (i) => seen.time_s[i]!);
  const temperature_K = Float64Array.from(kept, (i) => seen.temperature_K[i]!);
  return {
    pulse,
    method: source?.method ?? "drift",
    time_s,
    temperature_K,
    residual_K: temperature_K.map((T, i) => T - (fitted?.value_K(time_s[i]!) ?? Number.NaN)),
    noise_K: fitted?.noise_K ?? Number.NaN,
    fits: fitted?.curves ?? [],
    windows: fitted?.windows ?? [],
    step: fitted?.step ?? null,
    duration_s: length_s,
  };
}

interface Fitted extends Pick<PulsePicture, "windows" | "step" | "noise_K"> {
  readonly curves: readonly FittedCurve[];
  /** NaN outside the windows. */
  value_K(time_s: number): number;
}

function fittedOf(source: PictureSource | null, length_s: number): Fitted | null {
  if (source === null) return null;
  const { fit, fits, drift } = source;
  return fit === null || fits === null ? ofDrift(drift!) : ofModel(fit, fits, source, length_s);
}

function ofDrift(drift: DriftStep): Fitted {
  const parts = [part(drift.before, drift.beforeSamples), part(drift.after, drift.afterSamples)] as const;
  const t = drift.step.time_s;
  return {
    curves: [line(drift.before, parts[0].from_s, t), line(drift.after, t, parts[1].to_s)],
    windows: parts.map(({ from_s, to_s }) => ({ from_s, to_s })),
    step: { time_s: t, from_K: drift.T_before_K, to_K: drift.T_after_K },
    noise_K: drift.after.noise_K,
    value_K(time_s) {
      const under = parts.find(({ from_s, to_s }) => time_s >= from_s && time_s <= to_s);
      return under === undefined ? Number.NaN : under.fit.value_K(time_s);
    },
  };
}

/** A model is drawn through its own blocks, which are closest where the curve bends most. */
function ofModel(fit: ForwardFit, { samples }: ForwardFits, source: PictureSource, length_s: number): Fitted {
  const { time_s } = samples;
  const end = time_s.length - 1;
  const middle_s = fit.shift_s + length_s / 2;
  return {
    curves: [{ time_s, temperature_K: fit.curve_K }],
    windows: [{ from_s: time_s[0]!, to_s: time_s[end]! }],
    step: { time_s: middle_s, from_K: source.T_before_K, to_K: source.T_before_K + source.dT_K },
    noise_K: samples.noise_K,
    value_K(t) {
      if (t < time_s[0]! || t > time_s[end]!) return Number.NaN;
      const next = Math.min(end, Math.max(1, firstAtOrAfter(time_s, t)));
      const [a, b] = [time_s[next - 1]!, time_s[next]!];
      return fit.curve_K[next - 1]! + ((fit.curve_K[next]! - fit.curve_K[next - 1]!) * (t - a)) / (b - a);
    },
  };
}

function part(fit: DriftFit, { time_s }: Samples) {
  return { fit, from_s: time_s[0]!, to_s: time_s[time_s.length - 1]! };
}

function line(fit: DriftFit, from_s: number, to_s: number): FittedCurve {
  const time_s = Float64Array.from({ length: 25 }, (_, i) => from_s + ((to_s - from_s) * i) / 24);
  return { time_s, temperature_K: time_s.map((t) => fit.value_K(t)) };
}
