import type { TemperatureTrace } from "../thermometry/types.js";
import type { DriftFit } from "./drift.js";
import type { DriftStep, PulseSpan } from "./drift-step.js";
import type { FittedCurve, PulsePicture } from "./types.js";
import { type Samples, sampleRange, usableSamples } from "./window.js";

const POINTS = 160;

/** Samples around a pulse, thinned evenly but whole around the pulse itself, and the two drifts. */
export function pulsePicture(
  trace: TemperatureTrace,
  pulse: number,
  span: PulseSpan,
  result: DriftStep | null,
): PulsePicture {
  const { start_s, end_s } = span;
  const seen = usableSamples(trace, sampleRange(trace.time_s, span.earliest_s, span.latest_s), start_s);
  const length_s = end_s - start_s;
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
  const parts =
    result === null
      ? []
      : [part(result.before, result.beforeSamples), part(result.after, result.afterSamples)];
  return {
    pulse,
    method: "drift",
    time_s,
    temperature_K,
    residual_K: temperature_K.map((T, i) => {
      const t = time_s[i]!;
      const under = parts.find(({ from_s, to_s }) => t >= from_s && t <= to_s);
      return under === undefined ? Number.NaN : T - under.fit.value_K(t);
    }),
    noise_K: result === null ? Number.NaN : result.after.noise_K,
    fits:
      result === null
        ? []
        : [
            line(result.before, parts[0]!.from_s, result.step.time_s),
            line(result.after, result.step.time_s, parts[1]!.to_s),
          ],
    windows: parts.map(({ from_s, to_s }) => ({ from_s, to_s })),
    step:
      result === null
        ? null
        : { time_s: result.step.time_s, from_K: result.T_before_K, to_K: result.T_after_K },
    duration_s: length_s,
  };
}

function part(fit: DriftFit, { time_s }: Samples) {
  return { fit, from_s: time_s[0]!, to_s: time_s[time_s.length - 1]! };
}

function line(fit: DriftFit, from_s: number, to_s: number): FittedCurve {
  const time_s = Float64Array.from({ length: 25 }, (_, i) => from_s + ((to_s - from_s) * i) / 24);
  return { time_s, temperature_K: time_s.map((t) => fit.value_K(t)) };
}
