import type { GateVerdict } from "../../stages/publish/types.js";
import type { CampaignResult } from "../chain.js";
import type { Night } from "../night.js";

const LEAST_USED = 0.5;
/** Beyond this, widening by the scatter is no remedy: something is wrong with nights or model. */
const LARGEST_SCATTER = 10;

/** What must hold before anybody believes the numbers. */
export function gates(result: CampaignResult, nights: readonly Night[]): GateVerdict[] {
  const { separation, scatterRatio } = result;
  const poor = nights.filter(({ table }) => {
    const used = table.used.reduce((sum, u) => sum + u, 0);
    return used < LEAST_USED * table.used.length;
  });
  return [
    {
      name: "both numbers found",
      passed: separation.sound_speed !== null && separation.roton_gap !== null,
      words:
        separation.missing.length === 0 ? "sound speed and roton gap stand" : separation.missing.join("; "),
    },
    {
      name: "enough pulses",
      passed: poor.length === 0,
      words:
        poor.length === 0
          ? "every night gave at least half of its pulses"
          : `fewer than half of the pulses were used in ${poor.map(({ run }) => run).join(", ")}`,
    },
    {
      name: "scatter",
      passed: scatterRatio < LARGEST_SCATTER,
      words: `points scatter about the fit ${scatterRatio.toPrecision(2)} times their stated repeatability${scatterRatio > 1 ? ", and the uncertainties are widened by that" : ""}`,
    },
  ];
}
