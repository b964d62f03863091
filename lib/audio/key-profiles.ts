/**
 * Pitch-class profiles, tonic first, semitone steps.
 *
 * Source:  C. L. Krumhansl and E. J. Kessler, Psychological Review 89(4):334–368, 1982;
 *          J. Albrecht and D. Shanahan, Music Perception 31(1):59–67, 2013;
 *          D. Temperley, Music Perception 17(1):65–100, 1999.
 */
export interface KeyProfile {
  major: readonly number[];
  minor: readonly number[];
}

export const KRUMHANSL_KESSLER: KeyProfile = {
  major: [6.35, 2.23, 3.48, 2.33, 4.38, 4.09, 2.52, 5.19, 2.39, 3.66, 2.29, 2.88],
  minor: [6.33, 2.68, 3.52, 5.38, 2.6, 3.53, 2.54, 4.75, 3.98, 2.69, 3.34, 3.17],
};

export const ALBRECHT_SHANAHAN: KeyProfile = {
  major: [0.238, 0.006, 0.111, 0.006, 0.137, 0.094, 0.016, 0.214, 0.009, 0.08, 0.008, 0.081],
  minor: [0.22, 0.006, 0.104, 0.123, 0.019, 0.103, 0.012, 0.214, 0.062, 0.022, 0.061, 0.052],
};

export const TEMPERLEY_1999: KeyProfile = {
  major: [5, 2, 3.5, 2, 4.5, 4, 2, 4.5, 2, 3.5, 1.5, 4],
  minor: [5, 2, 3.5, 4.5, 2, 4, 2, 4.5, 3.5, 2, 1.5, 4],
};
