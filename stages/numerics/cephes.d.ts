/** What we use of cephes; the package keeps its own declarations where an ES import does not find them. */
declare module "cephes" {
  /** Settles when the WebAssembly is compiled. */
  export const compiled: Promise<void>;
  /** Inverse of the regularised incomplete beta function I_x(a, b) = y. */
  export function incbi(a: number, b: number, y: number): number;
  /** Quantile of the normal distribution. */
  export function ndtri(probability: number): number;
}
