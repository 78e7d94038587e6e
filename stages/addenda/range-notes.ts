/** Says at which end, and for how many points, the addenda are used beyond where they are known. */
export function rangeNotes(
  T_K: Float64Array,
  range_K: readonly [number, number],
  known: string,
): readonly string[] {
  // A campaign rarely ends at exactly the same temperature as its empty cell; 1 % beyond is no extrapolation.
  const low = range_K[0] * 0.99;
  const high = range_K[1] * 1.01;
  const below = T_K.filter((T) => T < low);
  const above = T_K.filter((T) => T > high);
  const notes: string[] = [];
  if (below.length > 0) {
    notes.push(
      `addenda extrapolated below ${range_K[0].toPrecision(4)} K, the lowest temperature of ${known}: ${below.length} points, down to ${Math.min(...below).toPrecision(4)} K`,
    );
  }
  if (above.length > 0) {
    notes.push(
      `addenda extrapolated above ${range_K[1].toPrecision(4)} K, the highest temperature of ${known}: ${above.length} points, up to ${Math.max(...above).toPrecision(4)} K`,
    );
  }
  return notes;
}
