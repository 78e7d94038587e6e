import type { Points } from "./points.js";

/**
 * Common sources in a least-squares problem that stays one of independent rows.
 *
 * The covariance diag(u²) + Σ g gᵀ is what the data have if each point is C + Σ g z + noise, every z a standard normal
 * number shared by all points. So each source becomes one more amplitude z, with one more row that says z = 0 ± 1.
 * The solution is that of generalised least squares exactly, and QR never sees an ill-conditioned covariance.
 *
 * Peelle's puzzle: a normalisation error written as g = (share)·(scattered data) pulls the fit below all points, since low points
 * then claim to be certain. The columns g must come from a smooth curve; whoever makes them sees to that.
 *
 * Rows 0…n−1 are points in units of u, the next are the sources'.
 */
export interface Whitening {
  readonly rows: number;
  /** A column of values at the points, J/(mol K), as rows; zero in the sources' rows. */
  whiten(column: Float64Array): Float64Array;
  /** One column of rows a source. */
  readonly nuisance: readonly Float64Array[];
}

/** Where the scatter sets the scale the sources stay out of the weights: their size against it is not known before. */
export function whitening(points: Points): Whitening {
  const n = points.T_K.length;
  const sources = points.uncertainty === "known" ? points.sources : [];
  const rows = n + sources.length;
  const whiten = (column: Float64Array) => {
    const out = new Float64Array(rows);
    for (let i = 0; i < n; i++) out[i] = column[i]! / points.u[i]!;
    return out;
  };
  const nuisance = sources.map((source, s) => {
    const out = whiten(source.s_Cv_J_per_mol_K);
    out[n + s] = 1;
    return out;
  });
  return { rows, whiten, nuisance };
}
