/** Raised with every change to what `fingerprint` puts out; the golden check in the tests moves with it. */
export const ENGINE_VERSION = 1;

/** The engine hears mono at this rate and nothing else. */
export const SAMPLE_RATE_HZ = 11_025;

/** Analysis frame: 186 ms, 5.4 Hz a bin, which parts semitones from about 100 Hz upwards. */
export const FRAME_SAMPLES = 2048;

/** 23.2 ms from frame to frame. */
export const HOP_SAMPLES = 256;

export const FRAMES_PER_S = SAMPLE_RATE_HZ / HOP_SAMPLES;

/** Pitch zero: p = 12·log2(f / 55 Hz). */
export const PITCH_ZERO_HZ = 55;

/** Peaks are sought from here: below it a semitone is narrower than a bin. */
export const LOWEST_PEAK_HZ = 75;

/** …and up to here: above it codecs and band limits leave little to agree on. */
export const HIGHEST_PEAK_HZ = 5000;

/** Stored peak times are whole multiples of 1/32 frame (0.7 ms); interpolation is good to about 5 ms. */
export const TIME_UNITS_PER_FRAME = 32;

/** Stored pitches are whole multiples of 1/128 semitone (0.8 cent). */
export const PITCH_UNITS_PER_SEMITONE = 128;

/** A peak's time is the middle of its frame: frame 0 is centred half a frame into the sound. */
export const FRAME_CENTRE_FRAMES = FRAME_SAMPLES / 2 / HOP_SAMPLES;

/** A copy is believed only inside these bounds: beyond them unrelated pieces can be bent onto each other. */
export const SPEED_MIN = 0.785;
export const SPEED_MAX = 1.275;
export const PITCH_SHIFT_MAX_SEMITONES = 4.3;

/** Less content, or fewer landmarks, cannot be compared: it is never called clear. */
export const CONTENT_MIN_S = 5;
export const LANDMARKS_MIN = 60;

/** Frame index (fractional, middle of the frame) to seconds and back. */
export function framesToS(frames: number): number {
  return (frames + FRAME_CENTRE_FRAMES) / FRAMES_PER_S;
}
export function sToFrames(s: number): number {
  return s * FRAMES_PER_S - FRAME_CENTRE_FRAMES;
}
