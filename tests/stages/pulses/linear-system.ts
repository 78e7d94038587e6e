import { Matrix } from "ml-matrix";

/**
 * Solution of dx/dt = Ax + b after t by scaling and squaring of a Taylor series: no eigenvalues, no closed form of ours.
 * 24 terms at a norm below 1/2 leave less than 1e-30; squaring loses a digit or two.
 */
export function linearResponse(A: number[][], b: number[], x0: number[], t: number): number[] {
  const n = x0.length;
  const wide = Matrix.zeros(n + 1, n + 1);
  for (let i = 0; i < n; i++) {
    for (let j = 0; j < n; j++) wide.set(i, j, A[i]![j]! * t);
    wide.set(i, n, b[i]! * t);
  }
  const norm = Math.max(...wide.to2DArray().map((row) => row.reduce((sum, v) => sum + Math.abs(v), 0)));
  const squarings = Math.max(0, Math.ceil(Math.log2(2 * norm)));
  const scaled = Matrix.div(wide, 2 ** squarings);
  let term = Matrix.eye(n + 1);
  let sum = Matrix.eye(n + 1);
  for (let k = 1; k <= 24; k++) {
    term = term.mmul(scaled).div(k);
    sum = Matrix.add(sum, term);
  }
  for (let k = 0; k < squarings; k++) sum = sum.mmul(sum);
  const out = sum.mmul(Matrix.columnVector([...x0, 1]));
  return Array.from({ length: n }, (_, i) => out.get(i, 0));
}
