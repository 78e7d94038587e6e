/** Mean and standard deviation of each variable under a density. */
export interface GridMoments {
  readonly mean: readonly number[];
  readonly sd: readonly number[];
  /** Largest log-density met. */
  readonly top: number;
}

/** Points along each variable. */
const POINTS = 61;
/** Below the largest value by this much, e⁻¹⁵, nothing counts. */
const DEPTH = 15;
const ROUNDS = 12;

/**
 * Moments of exp(logDensity) of one or two variables, on a grid that closes in on where the density is.
 * @param box where to look, from and to of each variable; what lies outside is not seen
 */
export function gridMoments(
  logDensity: (at: readonly number[]) => number,
  box: readonly (readonly [number, number])[],
): GridMoments {
  let bounds = box.map(([from, to]) => [from, to] as const);
  for (let round = 0; ; round++) {
    const axes = bounds.map(([from, to]) =>
      Array.from({ length: POINTS }, (_, j) => from + ((to - from) * (j + 0.5)) / POINTS),
    );
    const points = axes.length === 1 ? axes[0]!.map((x) => [x]) : pairs(axes[0]!, axes[1]!);
    const height = points.map(logDensity);
    const top = Math.max(...height);
    const inside = points.filter((_, k) => height[k]! > top - DEPTH);
    const closer = bounds.map(([from, to], axis) => {
      const cell = (to - from) / POINTS;
      const values = inside.map((point) => point[axis]!);
      return [Math.min(...values) - cell / 2, Math.max(...values) + cell / 2] as const;
    });
    const shrunk = closer.some(([from, to], axis) => to - from < 0.5 * (bounds[axis]![1] - bounds[axis]![0]));
    if (shrunk && round < ROUNDS) {
      bounds = closer;
      continue;
    }
    const weight = height.map((value) => Math.exp(value - top));
    const total = weight.reduce((sum, w) => sum + w, 0);
    const moment = (of: (point: readonly number[]) => number): number =>
      points.reduce((sum, point, k) => sum + weight[k]! * of(point), 0) / total;
    const mean = axes.map((_, axis) => moment((point) => point[axis]!));
    const sd = axes.map((_, axis) => Math.sqrt(moment((point) => (point[axis]! - mean[axis]!) ** 2)));
    return { mean, sd, top };
  }
}

function pairs(a: readonly number[], b: readonly number[]): number[][] {
  return a.flatMap((x) => b.map((y) => [x, y]));
}
