import { significant, withZeros } from "../rounding.js";

/** One linear stretch of the time axis: seconds on the left, picture units on the right. */
export interface Piece {
  readonly from_s: number;
  readonly to_s: number;
  readonly start: number;
  readonly end: number;
}

export interface Tick {
  readonly at: number;
  /** "" where there is no room for words. */
  readonly words: string;
}

/** Of the width: drift before; pulse and what follows it at once; the rest. */
const SHARES = { before: 0.22, near: 0.42, rest: 0.36 } as const;
/** Of the width, for a pulse so short beside its settling that it gets a piece of its own. */
const LONE_PULSE = 0.12;
/** Pulse lengths that are looked at closely in any case. */
const NEAR = 3;
/** Pulse lengths to the joint beyond which the pulse would be lost in one piece with its settling. */
const LONE = 8;
/** Between two pieces, so that a change of scale is not taken for a bend of the curve. */
export const GUTTER = 7;
/** Least distance of two ticks, and the width of one letter of their words in the widest face, in picture units. */
const TICK_ROOM = 26;
const LETTER = 7.6;
const WORD_ROOM = 5;

/**
 * Time in linear pieces, one a phase: before, pulse and settling, drift after. Straight drifts stay straight, and a pulse
 * of seconds is seen beside a quarter of an hour.
 * @param settled_s when the cell has come to one temperature, from the start of the pulse; 0 where nobody knows
 * @param left, right ends of the axis in picture units
 * @returns at least one piece, in order, with a gutter between each two
 */
export function timePieces(
  span: { readonly from_s: number; readonly to_s: number },
  pulse: { readonly duration_s: number; readonly settled_s: number },
  left: number,
  right: number,
): readonly Piece[] {
  const { from_s, to_s } = span;
  const { duration_s, settled_s } = pulse;
  const wanted_s = roundUp(Math.max(NEAR * duration_s, settled_s));
  // Less than a third for the rest is not worth another scale.
  const joint_s = wanted_s < 0.7 * to_s ? wanted_s : to_s;
  const near =
    joint_s > LONE * duration_s
      ? [
          { from_s: 0, to_s: duration_s, share: LONE_PULSE },
          { from_s: duration_s, to_s: joint_s, share: SHARES.near - LONE_PULSE },
        ]
      : [{ from_s: 0, to_s: joint_s, share: SHARES.near }];
  const phases = [
    { from_s: Number.NEGATIVE_INFINITY, to_s: 0, share: SHARES.before },
    ...near,
    { from_s: joint_s, to_s: Number.POSITIVE_INFINITY, share: SHARES.rest },
  ]
    .map((phase) => ({
      ...phase,
      from_s: Math.max(from_s, phase.from_s),
      to_s: Math.min(to_s, phase.to_s),
    }))
    .filter((phase) => phase.to_s > phase.from_s);
  if (phases.length === 0) return [{ from_s, to_s: from_s + 1, start: left, end: right }];
  const shares = phases.reduce((sum, { share }) => sum + share, 0);
  const width = right - left - GUTTER * (phases.length - 1);
  let start = left;
  return phases.map(({ share, ...phase }) => {
    const piece = { ...phase, start, end: start + (width * share) / shares };
    start = piece.end + GUTTER;
    return piece;
  });
}

/** Where a time stands; times outside stop at the ends. */
export function placeTime(pieces: readonly Piece[], t_s: number): number {
  const piece = pieces.find(({ to_s }) => t_s < to_s) ?? pieces.at(-1)!;
  return placeWithin(piece, t_s);
}

export function placeWithin({ from_s, to_s, start, end }: Piece, t_s: number): number {
  return start + (end - start) * Math.min(1, Math.max(0, (t_s - from_s) / (to_s - from_s)));
}

/** Ticks at round times, each piece in its own steps; the ends of a piece have words before any other. */
export function timeTicks(pieces: readonly Piece[]): readonly Tick[] {
  const knots = pieces
    .slice(1)
    .map(({ from_s, start }) => ({ at: start, words: timeWords(from_s), first: true }));
  const others = pieces.flatMap((piece, i) => {
    const { from_s, to_s, start, end } = piece;
    const step = niceStep(((to_s - from_s) * TICK_ROOM) / (end - start));
    const [begin, stop] = [Math.ceil(from_s / step - 1e-9), Math.floor(to_s / step + 1e-9)];
    return Array.from({ length: Math.max(0, stop - begin + 1) }, (_, k) => (begin + k) * step)
      .filter((t) => i === 0 || t > from_s + 1e-9 * step)
      .filter((t) => i === pieces.length - 1 || t < to_s - 1e-9 * step)
      .map((t) => ({ at: placeWithin(piece, t), words: timeWords(t), first: false }));
  });
  const taken: { from: number; to: number }[] = [];
  const fitted = [...knots, ...others].map(({ at, words }) => {
    const half = (LETTER * words.length + WORD_ROOM) / 2;
    const clear = taken.every(({ from, to }) => at + half <= from || at - half >= to);
    if (clear) taken.push({ from: at - half, to: at + half });
    return { at, words: clear ? words : "" };
  });
  return fitted.sort((a, b) => a.at - b.at);
}

export function timeWords(t_s: number): string {
  return significant(t_s, 3).replace("-", "−");
}

export interface TemperatureTicks {
  /** What the numbers are: a difference over a unit, as in "(T − 0.6441 K) / mK". */
  readonly title: string;
  readonly ticks: readonly { readonly temperature_K: number; readonly words: string }[];
}

const UNITS = [
  { name: "K", per_K: 1, above_K: 0.5 },
  { name: "mK", per_K: 1e3, above_K: 0.5e-3 },
  { name: "µK", per_K: 1e6, above_K: 0 },
] as const;

/**
 * Ticks at round steps from a round temperature, so that numbers stay short where a step is small beside T.
 * @param base_K becomes zero to within a twentieth of a step, so that a rise can be read off; NaN: the lower end
 */
export function temperatureTicks(low_K: number, high_K: number, base_K: number): TemperatureTicks {
  const step_K = niceStep((high_K - low_K) / 6);
  const { name, per_K } = UNITS.find(({ above_K }) => high_K - low_K >= above_K)!;
  const part_K = step_K / 10;
  const parts = name === "K" ? 0 : Math.round((Number.isFinite(base_K) ? base_K : low_K) / part_K);
  const zero_K = parts * part_K;
  const [begin, stop] = [Math.ceil((low_K - zero_K) / step_K), Math.floor((high_K - zero_K) / step_K)];
  const decimals = decimalsOf(step_K * per_K);
  const ticks = Array.from({ length: Math.max(0, stop - begin + 1) }, (_, k) => ({
    temperature_K: zero_K + (begin + k) * step_K,
    words: ((begin + k) * step_K * per_K).toFixed(decimals).replace("-", "−"),
  }));
  return {
    title: parts === 0 ? `T / ${name}` : `(T − ${zero_K.toFixed(decimalsOf(part_K))} K) / ${name}`,
    ticks,
  };
}

function decimalsOf(step: number): number {
  return Math.max(0, -Math.floor(Math.log10(step) + 1e-9));
}

/** 1, 2 or 5 times a power of ten, at least x > 0. */
export function niceStep(x: number): number {
  const decade = 10 ** Math.floor(Math.log10(x));
  return decade * ([1, 2, 5].find((m) => m * decade >= x * (1 - 1e-9)) ?? 10);
}

/** The next number of few digits, for joints a reader can name. */
function roundUp(x: number): number {
  if (!(x > 0)) return 0;
  const decade = 10 ** Math.floor(Math.log10(x));
  const digits = [1, 1.2, 1.5, 2, 2.5, 3, 4, 5, 6, 8, 10];
  return Number(withZeros(decade * digits.find((m) => m * decade >= x * (1 - 1e-9))!, 2));
}
