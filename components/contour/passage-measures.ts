const TOP = 22;
const STRIP = 126;
const GAP = 50;

/** Measures of a passage chart, shared with the layer that moves over it. */
export const PASSAGE_PX = {
  topPx: TOP,
  stripPx: STRIP,
  gapPx: GAP,
  bTopPx: TOP + STRIP + GAP,
  bottomPx: TOP + STRIP + GAP + STRIP,
  heightPx: TOP + STRIP + GAP + STRIP + 34,
} as const;

/** Shares of the width under which a passage has room for one number only. */
export const NARROW = 0.06;
export const NARROW_ON_PHONE = 0.16;
