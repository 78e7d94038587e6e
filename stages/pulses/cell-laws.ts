import { fitPolynomial } from "../numerics/polynomial.js";
import { medianOf } from "./order.js";
import type { CellShape } from "./transient-model.js";

/** What holds the heat. */
export type Contents =
  /** The empty cell: one body. */
  | { readonly kind: "empty" }
  | {
      readonly kind: "filled";
      /** The body's own heat capacity, J/K, from the addenda; null where nobody knows it. */
      readonly body: HeatFunction | null;
      /**
       * A heat capacity that bends with temperature about as the liquid's does, in any unit. The night's own is read as a
       * slow function times this one; null: times T³.
       */
      readonly shape?: HeatFunction | null;
    };

export type HeatFunction = (T_K: number) => number;

/** A heat capacity as a local power law. */
export interface LocalLaw {
  readonly power: number;
  readonly bend: number;
}

const NEIGHBOURS = 13;
/** Beyond a factor of 1.6 in T a neighbour tells nothing of the local slope. */
const REACH = 0.5;

/**
 * d ln C/d ln T and its slope, from a parabola through ln(C/shape) at the nearest points in ln T: over the few per cent of
 * one pulse that is all that shows.
 * @param T_K, C length n, any order; points that are not positive do not count
 * @param shape bends about as C does
 */
export function localLaw(T_K: Float64Array, C: Float64Array, at_K: number, shape: HeatFunction): LocalLaw {
  const points = [...T_K.keys()]
    .filter((i) => T_K[i]! > 0 && C[i]! > 0 && Number.isFinite(C[i]!))
    .map((i) => ({ x: Math.log(T_K[i]! / at_K), y: Math.log(C[i]! / shape(T_K[i]!)) }))
    .sort((a, b) => Math.abs(a.x) - Math.abs(b.x))
    .filter(({ x }, rank) => rank < NEIGHBOURS && (rank < 4 || Math.abs(x) < REACH));
  const known = lawOf(shape, at_K);
  const span = Math.max(...points.map(({ x }) => x)) - Math.min(...points.map(({ x }) => x));
  if (points.length < 3 || !(span > 0.05)) return known;
  const x = Float64Array.from(points, (point) => point.x);
  const y = Float64Array.from(points, (point) => point.y);
  const weight = new Float64Array(points.length).fill(1);
  const distinct = new Set(points.map((point) => Math.round(100 * point.x))).size;
  const degree = distinct >= 5 ? 2 : 1;
  let fit = fitPolynomial(x, y, weight, degree);
  // A pulse that was read badly must not bend the law of its neighbours.
  for (let round = 0; round < 6; round++) {
    const off = y.map((value, i) => Math.abs(value - fit.value(x[i]!)));
    const limit = 4 * Math.max(1.4826 * medianOf(off.slice()), 1e-3);
    off.forEach((value, i) => {
      weight[i] = value < limit ? (1 - (value / limit) ** 2) ** 2 : 0;
    });
    const kept = x.filter((_, i) => weight[i]! > 0);
    if (new Set(kept).size <= degree) break;
    fit = fitPolynomial(x, y, weight, degree);
  }
  const h = span / 100;
  return {
    power: known.power + fit.slope(0),
    bend: known.bend + (fit.slope(h) - fit.slope(-h)) / (2 * h),
  };
}

/** The same of a known function. */
export function lawOf(heatCapacity: (T_K: number) => number, at_K: number): LocalLaw {
  const h = 0.02;
  const y = [-h, 0, h].map((x) => Math.log(heatCapacity(at_K * Math.exp(x))));
  return { power: (y[2]! - y[0]!) / (2 * h), bend: (y[2]! - 2 * y[1]! + y[0]!) / (h * h) };
}

const LINE: HeatFunction = (T) => T;
const CUBE: HeatFunction = (T) => T ** 3;

type HeatShape = Pick<CellShape, "bodyPower" | "bodyBend" | "liquidPower" | "liquidBend">;

/**
 * How the heat capacities of body and liquid bend about `at_K`.
 * @param T_K, C the night's total heat capacities as far as they are known
 */
export function heatShape(contents: Contents, T_K: Float64Array, C: Float64Array, at_K: number): HeatShape {
  if (contents.kind === "empty" || contents.body === null) return totalShape(contents, T_K, C, at_K);
  const { body, shape } = contents;
  const liquid = C.map((value, i) => value - body(T_K[i]!));
  return both(lawOf(body, at_K), localLaw(T_K, liquid, at_K, shape ?? CUBE));
}

/** For a model of one body that holds all. */
export function totalShape(contents: Contents, T_K: Float64Array, C: Float64Array, at_K: number): HeatShape {
  const total = localLaw(T_K, C, at_K, contents.kind === "empty" ? LINE : (contents.shape ?? CUBE));
  return both(total, total);
}

function both(body: LocalLaw, liquid: LocalLaw) {
  return {
    bodyPower: body.power,
    bodyBend: body.bend,
    liquidPower: liquid.power,
    liquidBend: liquid.bend,
  };
}

/** An exponent, and how far it may be trusted within one transient. */
export interface ConductanceLaw {
  readonly power: number;
  readonly u: number;
}

/** A local exponent may differ from the night's by this much. */
const LOCAL_U = 0.1;

/** Exponent of a conductance over the night, ln k against ln T, weighted; where the night does not tell, `otherwise`. */
export function conductanceLaw(
  T_K: ArrayLike<number>,
  k: ArrayLike<number>,
  u: ArrayLike<number>,
  otherwise: ConductanceLaw,
): ConductanceLaw {
  const rows = Array.from({ length: T_K.length }, (_, i) => i).filter(
    (i) => k[i]! > 0 && u[i]! < 0.2 * k[i]!,
  );
  if (rows.length < 4) return otherwise;
  const x = Float64Array.from(rows, (i) => Math.log(T_K[i]!));
  const span = Math.max(...x) - Math.min(...x);
  if (span < 0.25) return otherwise;
  const y = Float64Array.from(rows, (i) => Math.log(k[i]!));
  const weight = Float64Array.from(rows, (i) => Math.min(1e4, (k[i]! / u[i]!) ** 2));
  const fit = fitPolynomial(x, y, weight, 1);
  return { power: Math.min(6, Math.max(-2, fit.slope(0))), u: LOCAL_U };
}
