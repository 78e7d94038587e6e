import type { Night } from "../../pipeline/index.js";

export interface JudgedPulse {
  readonly pulse: number;
  readonly T: number;
  readonly error: number;
  readonly u: number;
  readonly pull: number;
  readonly method: string;
  readonly used: boolean;
}

export interface JudgedNight {
  readonly rows: readonly JudgedPulse[];
  readonly wanted: number;
  readonly night: Night;
}

export const KINDS: Readonly<Record<string, unknown>>;
export function night(kind: string, seed: number, options?: object): Promise<JudgedNight>;
export function summarise(nights: readonly JudgedNight[]): {
  readonly pulses: number;
  readonly used: number;
  readonly wrongCount: number;
  readonly bias: number;
  readonly u_bias: number;
  readonly u: number;
  readonly pull: number;
  readonly spread: number;
};
export function allowedBias(summary: { readonly u: number }): number;
