/** Edits (insert, delete, replace, exchange of neighbours) that turn one text into another. */
function editDistance(a: string, b: string): number {
  let beforeLast: number[] = [];
  let last = Array.from({ length: b.length + 1 }, (_, j) => j);
  for (let i = 1; i <= a.length; i++) {
    const row = [i];
    for (let j = 1; j <= b.length; j++) {
      const same = a[i - 1] === b[j - 1];
      let best = Math.min(last[j]! + 1, row[j - 1]! + 1, last[j - 1]! + (same ? 0 : 1));
      if (i > 1 && j > 1 && a[i - 1] === b[j - 2] && a[i - 2] === b[j - 1])
        best = Math.min(best, beforeLast[j - 2]! + 1);
      row.push(best);
    }
    beforeLast = last;
    last = row;
  }
  return last[b.length]!;
}

/**
 * The name that `wanted` was probably meant to be, if any is near. Capitals, blanks and underscores do not count; of
 * a name of one or two letters no letter may differ.
 */
export function nearestName(wanted: string, names: readonly string[]): string | undefined {
  const plain = (name: string) => name.toLowerCase().replace(/[\s_]+/g, "");
  const goal = plain(wanted);
  let nearest: string | undefined;
  let least = Math.floor(goal.length / 3) + 0.75;
  for (const name of names) {
    const given = plain(name);
    if (given === "") continue;
    const startsAlike = given.startsWith(goal) || goal.startsWith(given);
    const distance = Math.min(editDistance(goal, given), startsAlike ? 0.5 : Number.POSITIVE_INFINITY);
    if (distance < least) {
      least = distance;
      nearest = name;
    }
  }
  return nearest;
}
