import { slips } from "../../stages/quantities/units.js";

/** The candidate that a mistaken word most likely meant: at most a third of its letters wrong. */
export function nearest(word: string, candidates: readonly string[]): string | undefined {
  let best: string | undefined;
  let least = Math.max(1, Math.floor(word.length / 3)) + 0.1;
  for (const candidate of candidates) {
    const distance = slips(word, candidate);
    if (distance < least) {
      best = candidate;
      least = distance;
    }
  }
  return best;
}

/** At most `count` candidates, nearest first. */
export function nearestFew(word: string, candidates: readonly string[], count: number): string[] {
  return candidates
    .map((candidate) => ({ candidate, distance: slips(word, candidate) }))
    .sort((a, b) => a.distance - b.distance || (a.candidate < b.candidate ? -1 : 1))
    .slice(0, count)
    .map(({ candidate }) => candidate);
}
