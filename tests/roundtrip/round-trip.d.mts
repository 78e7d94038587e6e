export interface RoundTrip {
  readonly seed: number;
  /** (found − true)/u. */
  readonly sound_speed: number;
  readonly roton_gap: number;
  readonly u_sound_speed: number;
  readonly u_roton_gap: number;
  readonly scatterRatio: number;
}
export function roundTrip(seed: number, name?: string): Promise<RoundTrip>;
export function summary(pulls: readonly number[]): { mean: number; spread: number; largest: number };
