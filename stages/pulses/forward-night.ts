import { findCommon, fitAtBestStart } from "./common-clock.js";
import { bodiesOf, type FirstFit, firstFit } from "./first-fit.js";
import type { ForwardFit } from "./forward-fit.js";
import { fitForward } from "./forward-fit.js";
import { planOf } from "./forward-plan.js";
import { lawsOf, startingLaws } from "./night-laws.js";
import type { ForwardNight, Transient } from "./prepared-transient.js";
import type { TransientSamples } from "./transient-samples.js";

/** Both models of one pulse, on the same samples. */
export interface ForwardFits {
  readonly samples: TransientSamples;
  readonly one: ForwardFit;
  /** null for an empty cell. */
  readonly two: ForwardFit | null;
}

/**
 * Fits the forward models to the pulses asked for. What pulses of a night have in common is passed on between them:
 * clock and lag of the thermometer, the laws of link and boundary, and where to begin.
 * @param wanted rows to fit, any order
 * @returns one a row of `wanted`, but for those with too few samples
 */
export function fitForwardNight(
  night: ForwardNight,
  transients: readonly Transient[],
  wanted: readonly number[],
): Map<number, ForwardFits> {
  let laws = startingLaws(transients);
  const first = new Map<number, FirstFit>();
  for (const row of wanted) {
    const found = firstFit(night, transients[row]!, transients[row - 1], laws);
    if (found !== null) first.set(row, found);
  }
  if (first.size === 0) return new Map();
  const common = findCommon(night, [...first.values()], laws);
  const general = bodiesOf(night);
  let fits = new Map([...first].map(([row, { fit }]) => [row, fit] as const));
  // Twice: the laws by which C, link and boundary change within a transient come from the night itself.
  for (let round = 0; round < 2; round++) {
    laws = lawsOf(laws, [...fits.values()]);
    fits = new Map(
      [...first].map(([row, { at }]) => {
        const plan = planOf(night, at, general, { laws, common, before: fits.get(row)!, by: "drift" });
        // An edge that a sampled log shows only to its interval must be sought; after that it is known.
        const sought = night.u_start_s > 0 && round === 0;
        return [row, sought ? fitAtBestStart(night, at, plan) : fitForward(at.samples, plan)] as const;
      }),
    );
  }
  return new Map(
    [...first].map(([row, { at }]): [number, ForwardFits] => {
      const best = fits.get(row)!;
      if (general === "one") return [row, { samples: at.samples, one: best, two: null }];
      const one = fitForward(
        at.samples,
        planOf(night, at, "one", { laws, common, before: best, by: "drift" }),
      );
      return [row, { samples: at.samples, one, two: best }];
    }),
  );
}
