import type { ScenarioConfig } from "./config.js";
import { resistance_Ohm, temperature_K } from "./thermometer.js";

/** A calibration as its maker issues it: the lines of a configuration file under `calibration:`, and perhaps a table. */
export interface IssuedCalibration {
  yaml(tableFile: string): readonly string[];
  /** null for a series, whose coefficients are all there is. */
  readonly table: string | null;
}

/**
 * The thermometer's own law, with one error common to all temperatures.
 * A table gives R at round temperatures; a series runs through the law at Chebyshev's points in ln R.
 */
export function issueCalibration(
  thermometer: ScenarioConfig["thermometer"],
  error_K: number,
): IssuedCalibration {
  const { calibration, law } = thermometer;
  const uncertainty = `standard_uncertainty: ${calibration.standard_uncertainty.text}`;
  const [from_K, to_K] = [calibration.from.value, calibration.to.value];
  if (calibration.form === "table") {
    return {
      table: table(law, error_K, from_K, to_K, calibration.points ?? 40),
      yaml: (file) => [
        "form: table",
        `file: ${file}`,
        "temperature: { column: T_K, unit: K }",
        "resistance: { column: R_ohm, unit: Ohm }",
        uncertainty,
      ],
    };
  }
  const ends: [number, number] = [
    outward(Math.log(resistance_Ohm(law, to_K - error_K)), Math.floor),
    outward(Math.log(resistance_Ohm(law, from_K - error_K)), Math.ceil),
  ];
  const series = chebyshevSeries(law, error_K, ends, Math.min(12, calibration.points ?? 9));
  // Rounded inwards: the ends of the range must not fall outside the series.
  const [low, high] = [Math.ceil(Math.exp(ends[0]) * 100) / 100, Math.floor(Math.exp(ends[1]) * 100) / 100];
  const range = `resistance_range: [${low} Ohm, ${high} Ohm]`;
  if (calibration.form === "chebyshev") {
    return {
      table: null,
      yaml: () => [
        "form: chebyshev",
        "variable: ln R",
        `variable_range: [${ends.join(", ")}]`,
        "quantity: ln T",
        `coefficients: [${series.map((a) => a.toPrecision(10)).join(", ")}]`,
        range,
        uncertainty,
      ],
    };
  }
  // Powers of ln R itself nearly cancel: the coefficients need every digit they have.
  const powers = powersOfVariable(series, ends);
  return {
    table: null,
    yaml: () => ["form: log-polynomial", `coefficients: [${powers.join(", ")}]`, range, uncertainty],
  };
}

const outward = (z: number, round: (x: number) => number) => round(z * 100) / 100;

function table(
  law: readonly number[],
  error_K: number,
  from_K: number,
  to_K: number,
  points: number,
): string {
  const lines = ["T_K,R_ohm"];
  for (let i = 0; i < points; i++) {
    const issued_K = (from_K * (to_K / from_K) ** (i / (points - 1))).toFixed(4);
    lines.push(`${issued_K},${resistance_Ohm(law, Number(issued_K) - error_K).toPrecision(8)}`);
  }
  return `${lines.join("\n")}\n`;
}

/** Coefficients of ln T = Σ aᵢ cos(i·arccos x) through the law at the zeros of the next polynomial. */
function chebyshevSeries(
  law: readonly number[],
  error_K: number,
  [zl, zu]: readonly [number, number],
  count: number,
): number[] {
  const angle = (j: number) => (Math.PI * (j + 0.5)) / count;
  const value = Array.from({ length: count }, (_, j) => {
    const z = zl + ((zu - zl) * (1 + Math.cos(angle(j)))) / 2;
    return Math.log(temperature_K(law, Math.exp(z), 0.5) + error_K);
  });
  return Array.from({ length: count }, (_, i) => {
    const sum = value.reduce((total, f, j) => total + f * Math.cos(i * angle(j)), 0);
    return ((i === 0 ? 1 : 2) * sum) / count;
  });
}

/** The same polynomial in powers of z, x = (2z − zl − zu)/(zu − zl), by the recurrence of the series. */
function powersOfVariable(series: readonly number[], [zl, zu]: readonly [number, number]): number[] {
  const slope = 2 / (zu - zl);
  const offset = -(zl + zu) / (zu - zl);
  const timesX = (p: readonly number[]) => {
    const out = new Array<number>(p.length + 1).fill(0);
    for (const [i, c] of p.entries()) {
      out[i]! += offset * c;
      out[i + 1]! += slope * c;
    }
    return out;
  };
  const sum = new Array<number>(series.length).fill(0);
  let before: number[] = [];
  let now: number[] = [1];
  for (const [i, a] of series.entries()) {
    for (const [j, c] of now.entries()) sum[j]! += a * c;
    const next = timesX(now).map((c) => (i === 0 ? 1 : 2) * c);
    for (const [j, c] of before.entries()) next[j]! -= c;
    before = now;
    now = next;
  }
  return sum;
}
