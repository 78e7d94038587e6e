import { effectiveSampleSize } from "../numerics/autocorrelation.js";
import { fitPolynomial, type PolynomialFit } from "../numerics/polynomial.js";
import { medianOf } from "./order.js";
import type { Samples } from "./window.js";

/** A drift: temperature against time while the heater is off. */
export interface DriftFit {
  readonly degree: number;
  /** Standard deviation of one sample about the drift, from the median of |residuals|. */
  readonly noise_K: number;
  /** Samples left out as spikes, of those under the fit. */
  readonly spikes: number;
  readonly samples: number;
  /** Independent samples that the noise amounts to. */
  readonly effectiveSamples: number;
  value_K(time_s: number): number;
  /** Standard uncertainty of value_K, with the noise's own correlation in time. */
  u_K(time_s: number): number;
  slope_K_per_s(time_s: number): number;
}

// Tukey's bisquare: 95 % efficient on normal noise, blind to what lies beyond 4.685 standard deviations
// (Beaton and Tukey, Technometrics 16, 147 (1974)).
const BISQUARE = 4.685;
/** One sample in two million lies further out by chance. */
const OUTSTANDING = 5;

/** Samples enough to give the drift one more degree without asking. */
const SAMPLES_PER_DEGREE = 20;

interface RobustFit {
  readonly fit: PolynomialFit;
  readonly residual: Float64Array;
  readonly weight: Float64Array;
  readonly noise: number;
  readonly sumOfSquares: number;
}

function robustFit(samples: Samples, degree: number): RobustFit {
  const { time_s: t, temperature_K: T } = samples;
  const n = t.length;
  const weight = new Float64Array(n).fill(1);
  const residual = new Float64Array(n);
  const magnitude = new Float64Array(n);
  let fit = fitPolynomial(t, T, null, degree);
  let noise = 0;
  for (let round = 0; round < 5; round++) {
    for (let i = 0; i < n; i++) {
      residual[i] = T[i]! - fit.value(t[i]!);
      magnitude[i] = Math.abs(residual[i]!);
    }
    let largest = 0;
    for (let i = 0; i < n; i++) largest = Math.max(largest, magnitude[i]!);
    const next = 1.4826 * medianOf(magnitude) * Math.sqrt(n / Math.max(1, n - degree - 1));
    // Nothing stands out of normal noise: plain least squares is the best there is, and one fit is enough.
    const clean = round === 0 && largest < OUTSTANDING * next;
    const settled = round > 0 && Math.abs(next - noise) <= 1e-3 * next;
    noise = next;
    if (noise === 0 || settled || clean) break;
    for (let i = 0; i < n; i++) {
      const z = residual[i]! / (BISQUARE * noise);
      weight[i] = Math.abs(z) < 1 ? (1 - z * z) ** 2 : 0;
    }
    fit = fitPolynomial(t, T, weight, degree);
  }
  let sum = 0;
  for (let i = 0; i < n; i++) sum += weight[i]! * residual[i]! * residual[i]!;
  return { fit, residual, weight, noise, sumOfSquares: sum };
}

/**
 * Robust polynomial through the samples of one window. The degree, up to `highestDegree`, is the one with the
 * smallest AICc; the number of samples it is judged by is the effective one, so that slow noise is not taken for
 * curvature.
 * @param samples at least highestDegree + 3
 */
export function fitDrift(samples: Samples, highestDegree: number): DriftFit {
  const n = samples.time_s.length;
  let best: { aicc: number; degree: number; robust: RobustFit; effective: number } | null = null;
  // A cell on a link always relaxes. With samples to spare the curve is let bend whether or not the bend stands out:
  // leaving it out whenever it does not is a bias of 0.4 standard uncertainties (measured on simulated nights).
  const lowestDegree = Math.min(highestDegree, Math.max(1, Math.floor(n / SAMPLES_PER_DEGREE)));
  for (let degree = lowestDegree; degree <= highestDegree; degree++) {
    const robust = robustFit(samples, degree);
    const parameters = degree + 1;
    const effective = Math.max(parameters + 2.5, effectiveSampleSize(robust.residual));
    const k = parameters + 1;
    const aicc =
      effective * Math.log(Math.max(robust.noise, Number.MIN_VALUE) ** 2) +
      2 * k +
      (2 * k * (k + 1)) / Math.max(0.5, effective - k - 1);
    if (best === null || aicc < best.aicc) best = { aicc, degree, robust, effective };
  }
  const { degree, robust, effective } = best!;
  const spikes = robust.weight.reduce((count, w) => (w === 0 ? count + 1 : count), 0);
  const inflation = Math.sqrt(n / effective);
  const { fit, noise } = robust;
  return {
    degree,
    noise_K: noise,
    spikes,
    samples: n,
    effectiveSamples: effective,
    value_K: (time_s) => fit.value(time_s),
    u_K: (time_s) => noise * inflation * Math.sqrt(fit.variance(time_s)),
    slope_K_per_s: (time_s) => fit.slope(time_s),
  };
}
