import { expect, test } from "vitest";
import { CANDIDATE_POWERS, chooseAddendaPowers } from "../../../stages/addenda/choose-powers.js";
import { fitEmptyCell, meanPower } from "../../../stages/addenda/empty-cell.js";
import { integrate } from "../../../stages/numerics/quadrature.js";
import { expectRelative } from "../../expect-relative.js";

/** Park and Miller's generator and the polar method: a test's own noise, nothing of the project in it. */
function gaussian(seed: number): () => number {
  let state = seed;
  const uniform = () => {
    state = (state * 48271) % 2147483647;
    return state / 2147483647;
  };
  return () => Math.sqrt(-2 * Math.log(uniform())) * Math.cos(2 * Math.PI * uniform());
}

const n = 60;
const T_K = Float64Array.from({ length: n }, (_, i) => 0.3 * (2 / 0.3) ** (i / (n - 1)));
const truth = { nuclear: 2e-6, gamma: 2.6e-4, beta: 1.9e-5, fifth: 1e-6 };
const all = (T: number) =>
  truth.nuclear * T ** -2 + truth.gamma * T + truth.beta * T ** 3 + truth.fifth * T ** 5;
const metal = (T: number) => truth.gamma * T + truth.beta * T ** 3;
const relative_u = 2e-3;

// Without noise only rounding and the condition of four powers over 0.3–2 K are left: a few thousand times 1e-16.
test("four powers from −2 to 5 come back to ten digits", () => {
  const C = T_K.map(all);
  const fit = fitEmptyCell(
    T_K,
    C,
    C.map((c) => c * relative_u),
    [-2, 1, 3, 5],
  );
  expectRelative(fit.coefficient, [truth.nuclear, truth.gamma, truth.beta, truth.fifth], 1e-10);
  for (const T of [0.3, 0.71, 2]) expectRelative([fit.heatCapacity_J_per_K(T)], [all(T)], 1e-12);
  expect(fit.degreesOfFreedom).toBe(n - 4);
});

// JCGM 100:2008, H.3: a straight line through eleven thermometer corrections. In T⁰ and T¹, with equal uncertainties,
// the fit is that example, in t − 20 °C.
test("the GUM's straight line, its covariance and its Birge scaling", () => {
  const t = [21.521, 22.012, 22.512, 23.003, 23.507, 23.999, 24.513, 25.002, 25.503, 26.01, 26.511];
  const b = [-0.171, -0.169, -0.166, -0.159, -0.164, -0.165, -0.156, -0.157, -0.159, -0.161, -0.16];
  const x = Float64Array.from(t, (v) => v - 20);
  // Stated far too small, so that the scatter decides: χ²/ν then turns it into the GUM's own standard deviation.
  const fit = fitEmptyCell(x, Float64Array.from(b), new Float64Array(11).fill(1e-6), [0, 1]);
  // Printed: y₁ = −0.1712 ± 0.0029, y₂ = 0.00218 ± 0.00067, r = −0.930, s = 0.0035; half a unit of the last digit.
  expect(Math.abs(fit.coefficient[0]! + 0.1712)).toBeLessThan(5e-5);
  expect(Math.abs(fit.coefficient[1]! - 0.00218)).toBeLessThan(5e-6);
  expect(Math.abs(Math.sqrt(fit.covariance[0]![0]!) - 0.0029)).toBeLessThan(5e-5);
  expect(Math.abs(Math.sqrt(fit.covariance[1]![1]!) - 0.00067)).toBeLessThan(5e-6);
  const r = fit.covariance[0]![1]! / Math.sqrt(fit.covariance[0]![0]! * fit.covariance[1]![1]!);
  expect(Math.abs(r + 0.93)).toBeLessThan(5e-4);
  expect(Math.abs(Math.sqrt(fit.chiSquared / fit.degreesOfFreedom) * 1e-6 - 0.0035)).toBeLessThan(5e-5);
  expect(fit.notes.join()).toMatch(/scatter/);
});

test("the sensitivities rebuild the covariance of the curve", () => {
  const C = T_K.map(all);
  for (const powers of CANDIDATE_POWERS) {
    const fit = fitEmptyCell(
      T_K,
      C,
      C.map((c) => c * relative_u),
      powers,
    );
    const at = Float64Array.of(0.32, 0.6, 1.1, 1.9);
    const columns = fit.sensitivities(at);
    expect(columns.length).toBe(powers.length);
    for (let i = 0; i < at.length; i++) {
      for (let j = 0; j < at.length; j++) {
        const rebuilt = columns.reduce((sum, { s_C_J_per_K: s }) => sum + s[i]! * s[j]!, 0);
        let want = 0;
        powers.forEach((p, a) => {
          powers.forEach((q, b) => {
            want += at[i]! ** p * fit.covariance[a]![b]! * at[j]! ** q;
          });
        });
        // Off the diagonal the sums cancel; relative to the two standard uncertainties only rounding is left.
        const size = Math.sqrt(
          columns.reduce((sum, { s_C_J_per_K: s }) => sum + s[i]! ** 2, 0) *
            columns.reduce((sum, { s_C_J_per_K: s }) => sum + s[j]! ** 2, 0),
        );
        expect(Math.abs(rebuilt - want) / size).toBeLessThan(1e-8);
      }
    }
  }
});

// Principal in the relative heat capacity on 32 points even in ln T: orthogonal to rounding, and in falling order.
test("the sensitivities are principal, so that dropping a small one drops little", () => {
  const C = T_K.map(all);
  const fit = fitEmptyCell(
    T_K,
    C,
    C.map((c) => c * relative_u),
    [-2, 1, 3, 5],
  );
  const grid = Float64Array.from({ length: 32 }, (_, i) => 0.3 * (2 / 0.3) ** (i / 31));
  const relative = fit
    .sensitivities(grid)
    .map(({ s_C_J_per_K }) => s_C_J_per_K.map((s, i) => s / fit.heatCapacity_J_per_K(grid[i]!)));
  const dot = (a: Float64Array, b: Float64Array) => a.reduce((sum, v, i) => sum + v * b[i]!, 0);
  const size = relative.map((column) => Math.sqrt(dot(column, column)));
  for (let i = 1; i < relative.length; i++) {
    expect(size[i]!).toBeLessThanOrEqual(size[i - 1]!);
    for (let j = 0; j < i; j++) {
      expect(Math.abs(dot(relative[i]!, relative[j]!)) / (size[i]! * size[j]!)).toBeLessThan(1e-9);
    }
  }
});

// 200 noisy empty cells: the pull of C(1 K) has mean 0 ± 1/√200 = 0.07 and width 1 ± 0.05; three of each.
test("the stated uncertainty is the scatter of repeated empty cells", () => {
  const pulls = Array.from({ length: 200 }, (_, seed) => {
    const noise = gaussian(1000 + 7919 * seed);
    const C = T_K.map((T) => metal(T) * (1 + relative_u * noise()));
    const fit = fitEmptyCell(
      T_K,
      C,
      T_K.map((T) => metal(T) * relative_u),
      [1, 3],
    );
    const [a, b] = fit.sensitivities(Float64Array.of(1));
    const u = Math.hypot(a!.s_C_J_per_K[0]!, b!.s_C_J_per_K[0]!);
    return (fit.heatCapacity_J_per_K(1) - metal(1)) / u;
  });
  const mean = pulls.reduce((a, b) => a + b, 0) / 200;
  const width = Math.sqrt(pulls.reduce((a, b) => a + (b - mean) ** 2, 0) / 199);
  expect(Math.abs(mean)).toBeLessThan(0.21);
  expect(Math.abs(width - 1)).toBeLessThan(0.15);
});

// Five points of quadrature against the antiderivative; both to the last few digits.
test("means over a step are exact, wide or narrow", () => {
  for (const power of [-2, -1, 0, 1, 3, 5]) {
    for (const width of [0.2, 2.1e-3, 1.9e-3, 1e-6]) {
      const [a, b] = [1 - width / 2, 1 + width / 2];
      expectRelative([meanPower(power, a, b)], [integrate((t) => t ** power, a, b, 1e-14) / (b - a)], 2e-13);
    }
  }
  expectRelative([meanPower(3, 0.7, 0.7)], [0.343], 1e-15);
});

test("points that are means over wide steps are fitted as such", () => {
  const dT_K = T_K.map((T) => 0.2 * T);
  const C = T_K.map((T, i) => integrate(all, T - dT_K[i]! / 2, T + dT_K[i]! / 2, 1e-13) / dT_K[i]!);
  const u = C.map((c) => c * relative_u);
  const fit = fitEmptyCell(T_K, C, u, [-2, 1, 3, 5], dT_K);
  expectRelative(fit.coefficient, [truth.nuclear, truth.gamma, truth.beta, truth.fifth], 1e-9);
  expectRelative([fit.meanOver(0.9, 1.1)], [integrate(all, 0.9, 1.1, 1e-13) / 0.2], 1e-11);
  // Taken as narrow they would be wrong by C″ΔT²/24, for T⁻² already 1 %.
  const narrow = fitEmptyCell(T_K, C, u, [-2, 1, 3, 5]);
  expect(Math.abs(narrow.coefficient[0]! / truth.nuclear - 1)).toBeGreaterThan(3e-3);
});

test("AICc adds a term when the points show one, and not otherwise", () => {
  let larger = 0;
  for (let seed = 0; seed < 40; seed++) {
    const noise = gaussian(31 + 104729 * seed);
    const two = T_K.map((T) => metal(T) * (1 + relative_u * noise()));
    const four = T_K.map((T) => all(T) * (1 + relative_u * noise()));
    if (
      chooseAddendaPowers(
        T_K,
        two,
        two.map((c) => c * relative_u),
      ).length > 2
    )
      larger += 1;
    expect(
      chooseAddendaPowers(
        T_K,
        four,
        four.map((c) => c * relative_u),
      ),
    ).toEqual([-2, 1, 3, 5]);
  }
  // An AICc gain above 2 by chance has probability 0.04 a term; four larger of 40 would be usual, ten would not.
  expect(larger).toBeLessThan(10);
});

// The same points with uncertainties wrong by a common factor: Σ(r/u)² only changes its scale.
test("wrongly stated uncertainties do not decide the powers", () => {
  for (let seed = 0; seed < 20; seed++) {
    const noise = gaussian(5 + 104729 * seed);
    const C = T_K.map((T) => metal(T) * (1 + relative_u * noise()));
    const chosen = chooseAddendaPowers(
      T_K,
      C,
      C.map((c) => c * relative_u),
    );
    for (const factor of [1e-3, 1e3]) {
      expect(
        chooseAddendaPowers(
          T_K,
          C,
          C.map((c) => c * relative_u * factor),
        ),
      ).toEqual(chosen);
    }
  }
});

test("what cannot be fitted is refused in the user's words", () => {
  const few = Float64Array.of(0.5, 1);
  expect(() => fitEmptyCell(few, few, few, [1, 3])).toThrow(/more than 2 usable empty-cell pulses/);
  const same = new Float64Array(5).fill(1);
  expect(() => fitEmptyCell(same, same, same, [1, 3])).toThrow(/addenda\.powers.*can tell apart/);
});

test("extrapolation is reported with its end, its reach and its number of points", () => {
  const C = T_K.map(metal);
  const fit = fitEmptyCell(T_K, C, C, [1, 3]);
  expect(fit.rangeNotes(Float64Array.of(0.5, 1))).toEqual([]);
  expect(fit.rangeNotes(Float64Array.of(0.2, 0.25, 1, 2.5))).toEqual([
    "addenda extrapolated below 0.3000 K, the lowest temperature of the empty-cell nights: 2 points, down to 0.2000 K",
    "addenda extrapolated above 2.000 K, the highest temperature of the empty-cell nights: 1 points, up to 2.500 K",
  ]);
});
