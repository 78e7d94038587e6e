// Twenty simulated campaigns in which every ± is really drawn wrong.
import { roundTrip, summary } from "../roundtrip/round-trip.mjs";

export const title = "pulls of u₁ and Δ over 20 simulated campaigns, every declared ± drawn";

export async function report() {
  const rows = [];
  for (let seed = 1; seed <= 20; seed++) rows.push(await roundTrip(seed));
  const lines = rows.map(
    (row) =>
      `${String(row.seed).padStart(4)}  u₁ ${row.sound_speed.toFixed(2).padStart(6)} (u ${row.u_sound_speed.toFixed(2)} m/s)  Δ ${row.roton_gap.toFixed(2).padStart(6)} (u ${row.u_roton_gap.toFixed(4)} K)  scatter ${row.scatterRatio.toFixed(2)}`,
  );
  for (const key of ["sound_speed", "roton_gap"]) {
    const { mean, spread, largest } = summary(rows.map((row) => row[key]));
    lines.push(
      `${key}: mean pull ${mean.toFixed(2)}, spread ${spread.toFixed(2)}, largest ${largest.toFixed(2)}`,
    );
  }
  return lines.join("\n");
}
