/** Quantiles of Student's t, once the special functions are compiled. */
export interface StudentT {
  /**
   * @param probability P(T ≤ t), in (0, 1)
   * @param degreesOfFreedom > 0, whole or not (Welch–Satterthwaite); Infinity is the normal distribution
   */
  quantile(probability: number, degreesOfFreedom: number): number;
  /** The half-width t for which P(|T| ≤ t) is `level`: the GUM's t_p(ν). */
  coverageFactor(level: number, degreesOfFreedom: number): number;
}

/**
 * Loads cephes (WebAssembly) where it is first needed, so that a command without intervals starts without it.
 * By the inverse of the incomplete beta function: t² = ν z/(1 − z), z the quantile of Beta(1/2, ν/2).
 * @see JCGM 100:2008, Annex G
 */
export async function studentT(): Promise<StudentT> {
  const cephes = await import("cephes");
  await cephes.compiled;
  const coverageFactor = (level: number, nu: number): number => {
    if (nu === Number.POSITIVE_INFINITY) return -cephes.ndtri((1 - level) / 2);
    if (level < 0.5) {
      const z = cephes.incbi(0.5, nu / 2, level);
      return Math.sqrt((nu * z) / (1 - z));
    }
    const rest = cephes.incbi(nu / 2, 0.5, 1 - level);
    return Math.sqrt(nu / rest - nu);
  };
  return {
    coverageFactor,
    quantile: (p, nu) => (p < 0.5 ? -coverageFactor(1 - 2 * p, nu) : coverageFactor(2 * p - 1, nu)),
  };
}
