import type { DriftStep } from "./drift-step.js";
import type { ForwardFit } from "./forward-fit.js";
import type { ForwardFits } from "./forward-night.js";
import type { PulseMethod } from "./types.js";

/** AIC of each method on the same blocks, above the lowest; NaN: not tried. */
export interface Evidence {
  readonly drift: number;
  readonly twoBody: number;
  readonly relaxation: number;
}

export const NO_EVIDENCE: Evidence = { drift: Number.NaN, twoBody: Number.NaN, relaxation: Number.NaN };

/** A misfit beyond this many standard deviations says no more than that it is one. */
const CAP = 5;
/** The simpler model is good enough where it moves C by no more than this part of the uncertainty. */
const NEAR = 0.5;

/**
 * Akaike's criterion for three ways to describe one transient. Drift lines leave the pulse and its settling out, and a
 * block left out counts as a free parameter that fits it: AIC = χ² + 2k + 2N_cut (Jay and Neil, Phys. Rev. D 103,
 * 114502 (2021)). Correlated noise counts as the independent blocks it amounts to.
 */
export function evidenceOf(fits: ForwardFits, drift: DriftStep | null): Evidence {
  const { samples, one, two } = fits;
  const best = two !== null && two.score <= one.score ? two : one;
  const { u_K, independence } = best;
  const T = samples.temperature_K;
  const chiSquared = (curve: (i: number) => number): number =>
    independence *
    T.reduce((sum, value, i) => sum + Math.min(CAP ** 2, ((value - curve(i)) / u_K[i]!) ** 2), 0);
  const ofForward = (fit: ForwardFit): number => chiSquared((i) => fit.curve_K[i]!) + 2 * fit.parameters;
  const aic = {
    drift: drift === null ? Number.NaN : ofDrift(drift),
    twoBody: two === null ? Number.NaN : ofForward(two),
    relaxation: ofForward(one),
  };
  const lowest = Math.min(...Object.values(aic).filter(Number.isFinite));
  return {
    drift: aic.drift - lowest,
    twoBody: aic.twoBody - lowest,
    relaxation: aic.relaxation - lowest,
  };

  function ofDrift({ before, after, beforeSamples, afterSamples }: DriftStep): number {
    const ends = [beforeSamples, afterSamples].map(
      ({ time_s }) => [time_s[0]!, time_s[time_s.length - 1]!] as const,
    );
    let cut = 0;
    const chi = chiSquared((i) => {
      const t = samples.time_s[i]!;
      if (t >= ends[0]![0] && t <= ends[0]![1]) return before.value_K(t);
      if (t >= ends[1]![0] && t <= ends[1]![1]) return after.value_K(t);
      cut++;
      return T[i]!;
    });
    return chi + 2 * (before.degree + after.degree + 2) + 2 * independence * cut;
  }
}

/** A number for C and how it came about. */
export interface Choice {
  readonly method: PulseMethod;
  /** null: drift lines. */
  readonly fit: ForwardFit | null;
  /** Relative, k = 1. */
  readonly u_C: number;
}

/**
 * Two bodies unless one is enough: where the residuals prefer one body but two would move C by a fair part of its
 * uncertainty, the boundary is there and only not seen, and two bodies with their larger uncertainty are the honest
 * answer. So a near-tie never moves C by more than its uncertainty. Drift lines are not considered here: they were
 * found to be biased before a model was asked for, and are kept only where no model describes the transient.
 * @param u_drift relative uncertainty of C by drift lines, their remaining bias included; Infinity where there are none
 */
export function chooseModel(fits: ForwardFits, evidence: Evidence, C_drift: number, u_drift: number): Choice {
  const { one, two } = fits;
  const drifts: Choice = { method: "drift", fit: null, u_C: u_drift };
  if (two === null)
    return evidence.drift < evidence.relaxation && closer(one, C_drift, u_drift)
      ? drifts
      : oneBody(one, one.u_C);
  const apart = Math.abs(Math.log(one.C_J_per_K / two.C_J_per_K));
  if (evidence.relaxation <= evidence.twoBody && apart <= NEAR * two.u_C)
    return oneBody(one, Math.max(one.u_C, two.u_C));
  if (evidence.drift < evidence.twoBody && closer(two, C_drift, u_drift)) return drifts;
  return { method: "two-body", fit: two, u_C: two.u_C };
}

function oneBody(fit: ForwardFit, u_C: number): Choice {
  return { method: "relaxation", fit, u_C };
}

/** Lines that agree with the model, and claim no less certainty than it, may stand where the residuals prefer them. */
function closer(fit: ForwardFit, C_drift: number, u_drift: number): boolean {
  return u_drift <= fit.u_C && Math.abs(Math.log(C_drift / fit.C_J_per_K)) <= NEAR * fit.u_C;
}
