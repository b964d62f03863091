/** Signals made from formulas, for checks whose right answer is known beforehand. */

export function sine(
  rateHz: number,
  frequencyHz: number,
  durationS: number,
  amplitude: number,
  phaseDeg = 0,
): Float32Array {
  const phase = (phaseDeg * Math.PI) / 180;
  return Float32Array.from(
    { length: Math.round(rateHz * durationS) },
    (_, i) => amplitude * Math.sin((2 * Math.PI * frequencyHz * i) / rateHz + phase),
  );
}

/** Tones of one frequency one after the other, phase running on; [level in dBFS peak, seconds], null for silence. */
export function tones(
  rateHz: number,
  frequencyHz: number,
  parts: readonly (readonly [number | null, number])[],
): Float32Array {
  const lengths = parts.map(([, durationS]) => Math.round(durationS * rateHz));
  const out = new Float32Array(lengths.reduce((sum, n) => sum + n, 0));
  let at = 0;
  parts.forEach(([levelDb], p) => {
    const amplitude = levelDb === null ? 0 : 10 ** (levelDb / 20);
    for (let i = 0; i < lengths[p]!; i++, at++) {
      out[at] = amplitude * Math.sin((2 * Math.PI * frequencyHz * at) / rateHz);
    }
  });
  return out;
}

/** Repeatable noise in [-1, 1). */
export function noise(length: number, seed: number): Float32Array {
  let state = seed >>> 0 || 1;
  return Float32Array.from({ length }, () => {
    state ^= state << 13;
    state ^= state >>> 17;
    state ^= state << 5;
    return (state | 0) / 2 ** 31;
  });
}

export interface Song {
  rateHz: number;
  bpm: number;
  durationS: number;
  /** One chord a bar of four beats: MIDI notes. */
  chords: readonly (readonly number[])[];
  seed?: number;
}

/** Plucked chords, a bass and noise percussion, stereo: enough like music for tempo, key and alignment. */
export function song({ rateHz, bpm, durationS, chords, seed = 1 }: Song): [Float32Array, Float32Array] {
  const length = Math.round(rateHz * durationS);
  const left = new Float32Array(length);
  const right = new Float32Array(length);
  const beatS = 60 / bpm;
  const grain = noise(rateHz, seed);
  const plucks = new Plucks(rateHz);
  for (let beat = 0; beat * beatS < durationS; beat++) {
    const chord = chords[Math.floor(beat / 4) % chords.length]!;
    const at = Math.round(beat * beatS * rateHz);
    chord.forEach((note, n) => {
      plucks.add(left, at, note, 0.09 * (n % 2 ? 0.6 : 1), beatS * 1.6);
      plucks.add(right, at, note, 0.09 * (n % 2 ? 1 : 0.6), beatS * 1.6);
    });
    if (beat % 2 === 0)
      for (const side of [left, right]) plucks.add(side, at, chord[0]! - 12, 0.16, beatS * 2);
    const loud = beat % 2 === 1 ? 0.12 : 0.05;
    for (let i = 0; i < 0.06 * rateHz && at + i < length; i++) {
      const hit = loud * grain[(i * 7 + beat * 131) % grain.length]! * Math.exp(-i / (0.012 * rateHz));
      left[at + i] = left[at + i]! + hit;
      right[at + i] = right[at + i]! + 0.8 * hit;
    }
  }
  return [left, right];
}

/** Notes come back: each is computed once per call of song(). */
class Plucks {
  private readonly made = new Map<string, Float32Array>();
  constructor(private readonly rateHz: number) {}

  add(out: Float32Array, at: number, note: number, amplitude: number, decayS: number): void {
    const key = `${note} ${decayS}`;
    let wave = this.made.get(key);
    if (!wave) {
      wave = pluck(this.rateHz, note, decayS);
      this.made.set(key, wave);
    }
    const end = Math.min(wave.length, out.length - at);
    for (let i = 0; i < end; i++) out[at + i] = out[at + i]! + amplitude * wave[i]!;
  }
}

function pluck(rateHz: number, note: number, decayS: number): Float32Array {
  const hz = 440 * 2 ** ((note - 69) / 12);
  const attack = 0.004 * rateHz;
  return Float32Array.from({ length: Math.round(2.5 * decayS * rateHz) }, (_, i) => {
    let value = 0;
    for (let h = 1; h <= 4 && h * hz < rateHz * 0.45; h++) {
      value += Math.sin((2 * Math.PI * hz * h * i) / rateHz) / h ** 1.6;
    }
    return Math.min(1, i / attack) * Math.exp(-i / (0.4 * decayS * rateHz)) * value;
  });
}

/** C F G Am and so on as MIDI notes around middle C. */
export const CHORDS = {
  C: [60, 64, 67],
  Dm: [62, 65, 69],
  Em: [64, 67, 71],
  F: [65, 69, 72],
  G: [55, 59, 62],
  Am: [57, 60, 64],
  E: [64, 68, 71],
} as const;
