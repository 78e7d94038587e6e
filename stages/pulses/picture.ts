import type { TemperatureTrace } from "../thermometry/types.js";
import type { DriftStep, PulseSpan } from "./drift-step.js";
import type { PulsePicture } from "./types.js";
import { sampleRange, usableSamples } from "./window.js";

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
  const line = (fit: DriftStep["before"] | undefined, from: number, to: number) => {
    const time_s =
      fit === undefined
        ? new Float64Array(0)
        : Float64Array.from({ length: 25 }, (_, i) => from + ((to - from) * i) / 24);
    return { time_s, temperature_K: time_s.map((t) => fit!.value_K(t)) };
  };
  const step_s = result?.step.time_s ?? length_s / 2;
  const first = result?.beforeSamples.time_s[0] ?? 0;
  const last = result?.afterSamples.time_s.at(-1) ?? 0;
  return {
    pulse,
    time_s: Float64Array.from(kept, (i) => seen.time_s[i]!),
    temperature_K: Float64Array.from(kept, (i) => seen.temperature_K[i]!),
    before: line(result?.before, first, step_s),
    after: line(result?.after, step_s, last),
    step_s,
    duration_s: length_s,
  };
}
