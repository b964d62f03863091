export interface Place {
  startS: number;
  endS: number;
}

/** Places in one recording, in order; those that overlap are one place, whatever they line up with. */
export function mergedPlaces(places: readonly Place[]): Place[] {
  const merged: Place[] = [];
  for (const place of [...places].sort((a, b) => a.startS - b.startS)) {
    const last = merged.at(-1);
    if (last && place.startS <= last.endS) last.endS = Math.max(last.endS, place.endS);
    else merged.push({ startS: place.startS, endS: place.endS });
  }
  return merged;
}
