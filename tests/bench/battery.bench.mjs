// Kinds of night that a laboratory has, ten of each, against their truth.
import { allowedBias, KINDS, night, summarise } from "../battery/battery.mjs";

export const title = "C of each pulse against the truth: kinds of night, ten seeds each";

const SEEDS = 10;

export async function report() {
  const lines = [
    "kind                      pulses used  bias/%  ± of it     u/%   pull spread  largest  methods",
  ];
  for (const kind of Object.keys(KINDS)) {
    const nights = [];
    for (let seed = 1; seed <= SEEDS; seed++) nights.push(await night(kind, seed));
    const found = summarise(nights);
    const { bias, u_bias, u, pull, spread, largest, methods, pulses, used, wrongCount } = found;
    const sound = Math.abs(bias) < allowedBias(found) && spread > 0.7 && spread < 1.4 && wrongCount === 0;
    const percent = (x, digits) => (100 * x).toFixed(digits);
    const counts = Object.entries(methods).map(([name, n]) => `${name} ${n}`);
    lines.push(
      [
        kind.padEnd(25),
        String(pulses).padStart(6),
        String(used).padStart(5),
        percent(bias, 4).padStart(8),
        percent(u_bias, 4).padStart(8),
        percent(u, 3).padStart(7),
        pull.toFixed(2).padStart(6),
        spread.toFixed(2).padStart(6),
        largest.pull.toFixed(1).padStart(8),
        ` ${sound ? "ok " : "OFF"} ${counts.join(", ")}`,
      ].join(" "),
    );
  }
  return lines.join("\n");
}
