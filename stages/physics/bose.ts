/**
 * x² eˣ/(eˣ−1)², what one boson mode at energy x·kT adds to the heat capacity, in units of k.
 * @param x ≥ 0; 1 at x = 0
 * @returns to within a few units of the last digit, any x
 */
export function boseHeatKernel(x: number): number {
  // (x/2)/sinh(x/2) is even and smooth; below 1e-4 the next term of its series, x⁴/240, is beyond a double.
  if (x < 1e-4) return 1 - (x * x) / 12;
  if (x > 700) return 0;
  const expm = Math.exp(-x);
  const ratio = x / -Math.expm1(-x);
  return ratio * ratio * expm;
}

/** 1/(eˣ−1), the mean occupation of a boson mode. */
export function boseOccupation(x: number): number {
  return 1 / Math.expm1(x);
}

/** (1+n) ln(1+n) − n ln n with n = 1/(eˣ−1): the entropy of one boson mode, in units of k. */
export function boseEntropyKernel(x: number): number {
  return x / Math.expm1(x) - Math.log(-Math.expm1(-x));
}
