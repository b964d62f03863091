/** One channel's three contours, 0 to 255 of full scale, `binsPerSecond` values a second. */
export interface ContourChannel {
  peak: ArrayLike<number>;
  rms: ArrayLike<number>;
  /** The level the quieter moments of a bin stay above. */
  core: ArrayLike<number>;
}

/** A recording's measured contours: left first, then right; mono has one channel, drawn on both sides. */
export interface ContourData {
  seconds: number;
  binsPerSecond: number;
  channels: readonly ContourChannel[];
}
