/** dy/dt = f(y), stiff or not, without explicit time. All columns have length `size`. */
export interface StiffSystem {
  readonly size: number;
  derivative(y: Float64Array, out: Float64Array): void;
  /** Prepares `solve` for the matrix shift·1 − ∂f/∂y at y. */
  factor(y: Float64Array, shift: number): void;
  /** Solves with the prepared matrix, in place. */
  solve(b: Float64Array): void;
}

/** Moves y from one time to a later one, with steps of its own choosing. */
export interface Integrator {
  advance(y: Float64Array, span_s: number): void;
  /** Steps tried so far, refused ones included. */
  steps(): number;
}

// RODAS of Hairer and Wanner, Solving Ordinary Differential Equations II, 2nd ed. (1996), section IV.7 and its
// published program: a Rosenbrock method of order 4 with an embedded one of order 3, L-stable and stiffly accurate.
// Digits from memory; rodas4.test.ts shows order 4 and the damping at infinity, which no wrong digit would leave.
const GAMMA = 0.25;
const A = [
  [],
  [1.544],
  [0.9466785280815826, 0.2557011698983284],
  [3.314825187068521, 2.896124015972201, 0.9986419139977817],
  [1.221224509226641, 6.019134481288629, 12.53708332932087, -0.687886036105895],
] as const;
const C = [
  [],
  [-5.6688],
  [-2.430093356833875, -0.2063599157091915],
  [-0.1073529058151375, -9.594562251023355, -20.47028614809616],
  [7.496443313967647, -10.24680431464352, -33.99990352819905, 11.7089089320616],
  [8.083246795921522, -7.981132988064893, -31.52159432874371, 16.31930543123136, -6.058818238834054],
] as const;
const STAGES = 6;

/**
 * Steps of error at most `tolerance`·|y| each by the embedded estimate. The result is that of order 4, whose own
 * error is smaller still, and errors decay as the cell relaxes.
 * @param tolerance relative, per step
 */
export function rodas4(system: StiffSystem, tolerance: number): Integrator {
  const n = system.size;
  const u = Array.from({ length: STAGES }, () => new Float64Array(n));
  const trial = new Float64Array(n);
  let step_s = Number.POSITIVE_INFINITY;
  let count = 0;

  /** One step from y into `trial`; returns the estimated error over the tolerance. */
  function attempt(y: Float64Array, h: number): number {
    system.factor(y, 1 / (GAMMA * h));
    for (let i = 0; i < STAGES; i++) {
      const ui = u[i]!;
      // The last stage starts where the fifth ended: trial already holds y + Σ a u, add the fifth to it.
      if (i === STAGES - 1) add(trial, u[i - 1]!);
      else combine(trial, y, u, A[i]!);
      system.derivative(trial, ui);
      const c = C[i]!;
      for (let j = 0; j < i; j++) {
        const factor = c[j]! / h;
        const uj = u[j]!;
        for (let m = 0; m < n; m++) ui[m]! += factor * uj[m]!;
      }
      system.solve(ui);
    }
    const last = u[STAGES - 1]!;
    add(trial, last);
    let worst = 0;
    for (let m = 0; m < n; m++) worst = Math.max(worst, Math.abs(last[m]! / trial[m]!));
    return worst / tolerance;
  }

  return {
    steps: () => count,
    advance(y, span_s) {
      let left_s = span_s;
      while (left_s > 0) {
        // Splitting what is left in two avoids a last step of nearly nothing.
        const h = step_s >= left_s ? left_s : Math.min(step_s, left_s / 2);
        const error = attempt(y, h);
        count++;
        // NaN from a trial far off the mark is a refusal too. The embedded estimate goes with h⁴.
        const accepted = error <= 1;
        const growth = error > 0 ? 0.9 * error ** -0.25 : error === 0 ? 5 : 0.2;
        const next = h * Math.min(5, Math.max(0.2, growth));
        if (accepted) {
          y.set(trial);
          left_s = h === left_s ? 0 : left_s - h;
          // A step cut short by the end of the span says nothing against the longer one before it.
          step_s = h < step_s ? Math.max(next, step_s) : next;
        } else {
          step_s = next;
        }
      }
    },
  };
}

function combine(
  out: Float64Array,
  y: Float64Array,
  u: readonly Float64Array[],
  weight: readonly number[],
): void {
  out.set(y);
  for (let j = 0; j < weight.length; j++) {
    const w = weight[j]!;
    const uj = u[j]!;
    for (let m = 0; m < out.length; m++) out[m]! += w * uj[m]!;
  }
}

function add(out: Float64Array, term: Float64Array): void {
  for (let m = 0; m < out.length; m++) out[m]! += term[m]!;
}
