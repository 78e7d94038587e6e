import type { Samples } from "./window.js";

export interface PulseShape {
  readonly duration_s: number;
  /** By which the thermometer is known to follow the body; 0 where it is not known. */
  readonly lag_s: number;
}

/** Log-likelihoods of one start. */
export interface StartLikelihood {
  /** With an exponential at both ends of the pulse. */
  readonly bent: number;
  /** Without it, unless it fits so much better that its three numbers are paid for. */
  readonly plain: number;
  /** Whether it is. */
  readonly bends: boolean;
}

export interface PulseFit {
  /** Between the points fitted. */
  readonly spacing_s: number;
  at(start_s: number): StartLikelihood;
}

/** Points a window is thinned to: finer than a fiftieth of the pulse tells nothing new of where it begins. */
const MOST_POINTS = 120;
/**
 * What a linear cell answers to heat that is switched on and off is known but for its amounts. Over a leak and a drift of
 * any kind, to higher order in time, it is this good, a part of the rise: nothing is fitted better.
 */
const MODEL = 5e-4;
/** Times of the exponential that are tried, from a jump between two samples up to a pulse: factor from one to the next. */
const RATIO = 3;
const SHORTEST = 1 / 150;
const PARABOLAS = 5;
/** A ramp is behind by no more times τ than this: two lags in a row, of sensor and filter. */
const LATEST = 2;

/**
 * Fits samples around a pulse by what it does to a cell: a drift, a ramp while the heater is on, the bend that a leak
 * gives it, and an exponential of time τ at either end. A body that overheats against its liquid jumps ahead of the
 * ramp, a thermometer that lags stays behind it, and a plain corner takes both for another start. The ramp of the
 * second fit is behind by as much as lags of that time can bring about, and what is ahead of it is not negative. τ goes
 * down to a jump between two samples, which cannot be told from another start: there the likelihood is flat, as it
 * should be.
 *
 * The plain corner is chosen by G. Schwarz, Ann. Stat. 6, 461 (1978). The noise is not known, so the likelihoods are
 * Student's.
 */
export function pulseFit(samples: Samples, { duration_s, lag_s }: PulseShape): PulseFit {
  const size = Math.ceil(samples.time_s.length / MOST_POINTS);
  const t = blockMeans(samples.time_s, size);
  const T = blockMeans(samples.temperature_K, size);
  const n = t.length;
  const spacing_s = (t[n - 1]! - t[0]!) / (n - 1);
  const answer = answersOf(lag_s);

  /** Writes an answer that begins at `from_s`, as the points see it. */
  function write(column: Float64Array, from_s: number, f: (x: number) => number): void {
    for (let j = 0; j < n; j++) {
      const x = t[j]! - from_s;
      // Means over a block are the function's own in the middle of it, but for where it has a corner.
      if (size === 1 || Math.abs(x) > 3 * spacing_s) {
        column[j] = x > 0 ? f(x) : 0;
        continue;
      }
      let sum = 0;
      for (let k = j * size; k < (j + 1) * size; k++) {
        const own = samples.time_s[k]! - from_s;
        if (own > 0) sum += f(own);
      }
      column[j] = sum / size;
    }
  }

  const line = orthonormal([], [new Float64Array(n).fill(1), t]);
  const bare = lessIts(T, line);
  const rise = new Float64Array(n);
  const fall = new Float64Array(n);
  const late = new Float64Array(n);
  const nothing = new Float64Array(n);
  const overPulse = (start_s: number, f: (x: number) => number): Float64Array => {
    write(rise, start_s, f);
    write(fall, start_s + duration_s, f);
    return rise.map((value, j) => value - fall[j]!);
  };
  const times_s: number[] = [];
  for (let tau = SHORTEST * spacing_s; tau < RATIO * duration_s; tau *= RATIO) times_s.push(tau);
  const least = n * (MODEL * (Math.max(...T) - Math.min(...T))) ** 2;
  const logOf = (sumOfSquares: number, parameters: number): number =>
    (-Math.max(1, n - parameters) / 2) * Math.log(Math.max(0, sumOfSquares) + least);
  const cost = 1.5 * Math.log(n);

  return {
    spacing_s,
    at(start_s) {
      const drift = orthonormal(line, [overPulse(start_s, answer.square)]);
      const left = lessIts(bare, drift.slice(line.length));
      const whole = dot(left, left);
      const ramp = overPulse(start_s, answer.ramp);
      const corner = logOf(whole - taken(ramp, nothing, nothing, drift, left), 5);
      const sumAt = (tau: number): number => {
        write(rise, start_s, (x) => answer.exponential(x, tau));
        write(fall, start_s + duration_s, (x) => answer.exponential(x, tau));
        for (let j = 0; j < n; j++) {
          late[j] = ramp[j]! - LATEST * tau * (rise[j]! - fall[j]!);
          fall[j] = -fall[j]!;
        }
        return whole - taken(late, rise, fall, drift, left);
      };
      const bent = mostOver((tau) => logOf(sumAt(tau), 8), times_s);
      return { bent, plain: Math.max(corner, bent - cost), bends: bent - cost > corner };
    },
  };
}

/** Means of neighbouring values, `size` at a time; what is left over at the end is left out. */
function blockMeans(values: Float64Array, size: number): Float64Array {
  if (size <= 1) return values;
  return Float64Array.from({ length: Math.floor(values.length / size) }, (_, b) => {
    let sum = 0;
    for (let j = 0; j < size; j++) sum += values[b * size + j]!;
    return sum / size;
  });
}

/**
 * Part of the square of y that three columns take, the second and third with amounts that are not negative. y has
 * nothing of the orthonormal basis in it; they may have.
 */
function taken(
  a: Float64Array,
  b: Float64Array,
  c: Float64Array,
  basis: readonly Float64Array[],
  y: Float64Array,
): number {
  const whole = [dot(a, a), dot(b, b), dot(c, c)] as const;
  let [aa, bb, cc] = whole;
  let [ab, ac, bc] = [dot(a, b), dot(a, c), dot(b, c)];
  for (const q of basis) {
    const [qa, qb, qc] = [dot(q, a), dot(q, b), dot(q, c)];
    aa -= qa * qa;
    bb -= qb * qb;
    cc -= qc * qc;
    ab -= qa * qb;
    ac -= qa * qc;
    bc -= qb * qc;
  }
  if (!(aa > NOTHING_NEW * whole[0])) return 0;
  // What a leaves of the others.
  const ya = dot(y, a);
  const [byA, cyA] = [ab / aa, ac / aa];
  const [b2, c2, bc2] = [bb - byA * ab, cc - cyA * ac, bc - byA * ac];
  const [yb, yc] = [dot(y, b) - byA * ya, dot(y, c) - cyA * ya];
  const [hasB, hasC] = [b2 > NOTHING_NEW * whole[1], c2 > NOTHING_NEW * whole[2]];
  const first = (ya * ya) / aa;
  const determinant = b2 * c2 - bc2 * bc2;
  if (hasB && hasC && determinant > NOTHING_NEW * b2 * c2) {
    const [amountB, amountC] = [(c2 * yb - bc2 * yc) / determinant, (b2 * yc - bc2 * yb) / determinant];
    if (amountB >= 0 && amountC >= 0) return first + amountB * yb + amountC * yc;
  }
  return first + Math.max(hasB && yb > 0 ? (yb * yb) / b2 : 0, hasC && yc > 0 ? (yc * yc) / c2 : 0);
}

/** The most of a function of ln τ: the best of even steps, then parabolas through the three points about it. */
function mostOver(f: (tau: number) => number, taus: readonly number[]): number {
  const values = taus.map(f);
  let k = 0;
  for (let j = 1; j < values.length; j++) if (values[j]! > values[k]!) k = j;
  if (k === 0 || k === values.length - 1) return values[k]!;
  const point = (j: number): Point => ({ x: Math.log(taus[j]!), y: values[j]! });
  let [a, b, c] = [point(k - 1), point(k), point(k + 1)];
  for (let round = 0; round < PARABOLAS; round++) {
    const [left, right] = [(b.x - a.x) * (b.y - c.y), (b.x - c.x) * (b.y - a.y)];
    const x = b.x - ((b.x - a.x) * left - (b.x - c.x) * right) / (2 * (left - right));
    if (!(x > a.x && x < c.x) || Math.abs(x - b.x) < 1e-3) break;
    const found = { x, y: f(Math.exp(x)) };
    if (found.y > b.y) [a, b, c] = x < b.x ? [a, found, b] : [b, found, c];
    else if (x < b.x) a = found;
    else c = found;
  }
  return b.y;
}

interface Point {
  readonly x: number;
  readonly y: number;
}

/** Answers of a first-order lag to a ramp, to x²/2 and to 1 − e^(−x/τ) that begin at x = 0; for x > 0. */
interface Answers {
  ramp(x: number): number;
  square(x: number): number;
  exponential(x: number, tau: number): number;
}

function answersOf(lag: number): Answers {
  if (lag === 0)
    return {
      ramp: (x) => x,
      square: (x) => (x * x) / 2,
      exponential: (x, tau) => -Math.expm1(-x / tau),
    };
  const ramp = (x: number): number => x + lag * Math.expm1(-x / lag);
  return {
    ramp,
    square: (x) => (x * x) / 2 - lag * ramp(x),
    exponential(x, tau) {
      // At τ = lag the two exponentials are one, and a millionth of it away is as good.
      const own = Math.abs(tau / lag - 1) < 1e-6 ? lag * (1 + 1e-6) : tau;
      return 1 - (own * Math.exp(-x / own) - lag * Math.exp(-x / lag)) / (own - lag);
    },
  };
}

/** Part of a column's square below which the others make it up. */
const NOTHING_NEW = 1e-9;

/** An orthonormal basis and, behind it, what the columns add to it (modified Gram–Schmidt). */
function orthonormal(basis: readonly Float64Array[], columns: readonly Float64Array[]): Float64Array[] {
  const all = [...basis];
  for (const column of columns) {
    const q = column.slice();
    const whole = dot(q, q);
    for (const p of all) {
      const share = dot(p, q);
      for (let j = 0; j < q.length; j++) q[j]! -= share * p[j]!;
    }
    const norm = dot(q, q);
    if (!(norm > NOTHING_NEW * whole)) continue;
    const scale = 1 / Math.sqrt(norm);
    for (let j = 0; j < q.length; j++) q[j]! *= scale;
    all.push(q);
  }
  return all;
}

/** What is left of y without its part along each of an orthonormal basis. */
function lessIts(y: Float64Array, basis: readonly Float64Array[]): Float64Array {
  const left = y.slice();
  for (const q of basis) {
    const amount = dot(q, left);
    for (let j = 0; j < left.length; j++) left[j]! -= amount * q[j]!;
  }
  return left;
}

function dot(a: Float64Array, b: Float64Array): number {
  let sum = 0;
  for (let j = 0; j < a.length; j++) sum += a[j]! * b[j]!;
  return sum;
}
