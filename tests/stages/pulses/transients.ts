import { normal, pcg32 } from "../../../stages/numerics/random.js";
import type { TemperatureTrace } from "../../../stages/thermometry/types.js";

/** One body on a weak link: C dT/dt = P(t) − K(T − T_s). */
export interface OneBody {
  readonly C_J_per_K: number;
  readonly K_W_per_K: number;
  readonly stage_K: number;
  readonly start_K: number;
}

export interface Heat {
  readonly start_s: number;
  readonly duration_s: number;
  readonly power_W: number;
}

/**
 * Closed form of the one-body response (Bachmann et al., Rev. Sci. Instrum. 43, 205 (1972)): the start's own decay,
 * and for each pulse (P/K)(1 − e^{−t/τ}) while it lasts, decaying afterwards.
 */
export function oneBodyTemperature(body: OneBody, pulses: readonly Heat[], t: number): number {
  const tau = body.C_J_per_K / body.K_W_per_K;
  let T = body.stage_K + (body.start_K - body.stage_K) * Math.exp(-t / tau);
  for (const { start_s, duration_s, power_W } of pulses) {
    if (t <= start_s) continue;
    const on = Math.min(t - start_s, duration_s);
    T += -(power_W / body.K_W_per_K) * Math.expm1(-on / tau) * Math.exp(-(t - start_s - on) / tau);
  }
  return T;
}

/** Samples of a temperature law, with white noise if asked. */
export function traceOf(
  law: (t: number) => number,
  options: {
    readonly to_s: number;
    readonly interval_s: number;
    readonly noise_K?: number;
    readonly seed?: number;
  },
): TemperatureTrace {
  const n = Math.floor(options.to_s / options.interval_s) + 1;
  const gaussian = normal(pcg32(options.seed ?? 1));
  const noise_K = options.noise_K ?? 0;
  const time_s = Float64Array.from({ length: n }, (_, i) => i * options.interval_s);
  return { time_s, temperature_K: time_s.map((t) => law(t) + noise_K * gaussian()), flag: new Uint8Array(n) };
}
