/**
 * A root of f between a and b, where f has opposite signs, to the last digit (Brent, Algorithms for Minimization
 * without Derivatives (1973), ch. 4).
 * @param fa, fb f(a) and f(b), already known
 */
export function brentRoot(f: (x: number) => number, a: number, b: number, fa: number, fb: number): number {
  let [best, fBest, other, fOther] = Math.abs(fa) < Math.abs(fb) ? [a, fa, b, fb] : [b, fb, a, fa];
  let previous = other;
  let fPrevious = fOther;
  let step = best - previous;
  let stepBefore = step;
  for (let i = 0; i < 100 && fBest !== 0; i++) {
    const tolerance = 2 * Number.EPSILON * Math.abs(best);
    const half = (other - best) / 2;
    if (Math.abs(half) <= tolerance) break;
    let next = half;
    if (Math.abs(stepBefore) >= tolerance && Math.abs(fPrevious) > Math.abs(fBest)) {
      // Secant, or inverse quadratic through three points; taken only where it keeps well inside.
      const s = fBest / fPrevious;
      let p: number;
      let q: number;
      if (previous === other) {
        p = 2 * half * s;
        q = 1 - s;
      } else {
        const t = fPrevious / fOther;
        const r = fBest / fOther;
        p = s * (2 * half * t * (t - r) - (best - previous) * (r - 1));
        q = (t - 1) * (r - 1) * (s - 1);
      }
      if (p > 0) q = -q;
      p = Math.abs(p);
      if (2 * p < Math.min(3 * half * q - Math.abs(tolerance * q), Math.abs(stepBefore * q))) next = p / q;
    }
    stepBefore = next === half ? half : step;
    step = next;
    previous = best;
    fPrevious = fBest;
    best += Math.abs(step) > tolerance ? step : Math.sign(half) * tolerance;
    fBest = f(best);
    if (Math.sign(fBest) === Math.sign(fOther)) {
      other = previous;
      fOther = fPrevious;
      step = best - previous;
      stepBefore = step;
    }
    if (Math.abs(fOther) < Math.abs(fBest)) {
      [previous, fPrevious] = [best, fBest];
      [best, fBest, other, fOther] = [other, fOther, best, fBest];
    }
  }
  return best;
}
