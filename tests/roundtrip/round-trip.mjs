// Simulated campaigns with every ± drawn, through the whole chain, against the truth they were made with.
import { mkdtempSync, readdirSync, readFileSync, rmSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { join, resolve } from "node:path";
import { parse, stringify } from "yaml";
import { loadScenario } from "../../dist/pipeline/config/load.js";
import { runNightly, simulateInto } from "../../dist/pipeline/index.js";

const ROOT = resolve(import.meta.dirname, "../..");

/** One campaign with this seed: (found − true)/u of u₁ and Δ. */
export async function roundTrip(seed, name = "round-trip") {
  const folder = mkdtempSync(join(tmpdir(), "rotonwell-round-"));
  try {
    const scenario = parse(readFileSync(join(ROOT, `configs/scenarios/${name}.yaml`), "utf8"));
    scenario.seed = seed;
    const file = join(folder, "scenario.yaml");
    writeFileSync(file, stringify(scenario));
    loadScenario(file);
    simulateInto(file, folder);
    const campaign = readdirSync(folder, { recursive: true, encoding: "utf8" }).find((path) =>
      path.endsWith("campaign.yaml"),
    );
    const path = join(folder, campaign);
    const config = parse(readFileSync(path, "utf8"));
    config.reduction = { separate: { window: ["0.34 K", "1.2 K"], phonon_powers: [3], model: "landau" } };
    writeFileSync(path, stringify(config));
    const { result } = await runNightly(path);
    const { sound_speed, roton_gap } = result.separation;
    const pull = (estimate, truth) => (estimate.value - truth) / estimate.standard_uncertainty;
    return {
      seed,
      sound_speed: pull(sound_speed, 238.3),
      roton_gap: pull(roton_gap, 8.65),
      u_sound_speed: sound_speed.standard_uncertainty,
      u_roton_gap: roton_gap.standard_uncertainty,
      scatterRatio: result.scatterRatio,
    };
  } finally {
    rmSync(folder, { recursive: true, force: true });
  }
}

export function summary(pulls) {
  const mean = pulls.reduce((sum, z) => sum + z, 0) / pulls.length;
  const spread = Math.sqrt(pulls.reduce((sum, z) => sum + (z - mean) ** 2, 0) / (pulls.length - 1));
  return { mean, spread, largest: Math.max(...pulls.map(Math.abs)) };
}
