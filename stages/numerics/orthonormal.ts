/**
 * Orthonormal directions, one added after another. Each is projected twice against those before it, which makes
 * Gram–Schmidt as orthogonal as Householder ("twice is enough": Parlett, The Symmetric Eigenvalue Problem (1980), §6.9).
 */
export interface OrthonormalBasis {
  /** Takes out of `column` what the basis holds, in place. */
  project(column: Float64Array): void;
  /** Adds what is new in a column; a column that holds nothing new (rounding only) adds nothing. */
  add(column: Float64Array): void;
  /** A basis of its own that starts with the same directions. */
  extend(): OrthonormalBasis;
}

const NOTHING_NEW = 1e-14;

export function orthonormalBasis(start: readonly Float64Array[] = []): OrthonormalBasis {
  const direction = [...start];
  const project = (column: Float64Array) => {
    for (let round = 0; round < 2; round++) {
      for (const q of direction) {
        const along = dot(q, column);
        for (let i = 0; i < q.length; i++) column[i]! -= along * q[i]!;
      }
    }
  };
  return {
    project,
    add(column) {
      const rest = column.slice();
      project(rest);
      const norm = Math.sqrt(dot(rest, rest));
      if (!(norm > NOTHING_NEW * Math.sqrt(dot(column, column)))) return;
      direction.push(rest.map((value) => value / norm));
    },
    extend: () => orthonormalBasis(direction),
  };
}

export function dot(a: Float64Array, b: Float64Array): number {
  let sum = 0;
  for (let i = 0; i < a.length; i++) sum += a[i]! * b[i]!;
  return sum;
}
