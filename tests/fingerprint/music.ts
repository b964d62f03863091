import { SAMPLE_RATE_HZ } from "@/lib/fingerprint";

/** 32-bit xorshift: the same numbers on every machine. */
export function makeRandom(seed: number): () => number {
  let state = (Math.imul(seed + 1, 0x9e3779b1) ^ 0x5bd1e995) >>> 0 || 1;
  return () => {
    state ^= state << 13;
    state >>>= 0;
    state ^= state >>> 17;
    state ^= state << 5;
    state >>>= 0;
    return state / 2 ** 32;
  };
}

export interface Note {
  startS: number;
  lengthS: number;
  hz: number;
  level: number;
  partials: number[];
  decayPerS: number;
  /** Above zero: a burst of noise around `hz` instead of partials. */
  noiseSeed: number;
}

export interface Score {
  lengthS: number;
  notes: Note[];
}

/** A piece of invented music: four voices of partials that fade, and a drum of filtered noise, on a loose grid. */
export function composeScore(seed: number, lengthS: number): Score {
  const random = makeRandom(seed);
  const beatS = 60 / (80 + 60 * random());
  const scale = [0, 2, 3, 5, 7, 8, 10, 12, 14, 15, 17, 19];
  const keyHz = 55 * 2 ** Math.floor(1 + random()) * 2 ** (Math.floor(12 * random()) / 12);
  const notes: Note[] = [];
  for (let voice = 0; voice < 4; voice++) {
    const partials = Array.from({ length: 6 }, (_, i) => random() / (1 + 0.6 * i));
    const octave = 2 ** (voice * 0.75);
    for (let startS = random() * beatS; startS < lengthS - 0.2; ) {
      const steps = 1 + Math.floor(4 * random());
      const lengthNoteS = Math.min(lengthS - startS, (steps * beatS) / 2);
      const degree = scale[Math.floor(random() * scale.length)]!;
      if (random() < 0.85) {
        notes.push({
          startS: startS + 0.02 * random(),
          lengthS: lengthNoteS,
          hz: keyHz * octave * 2 ** ((degree + 0.1 * (random() - 0.5)) / 12),
          level: 0.05 + 0.1 * random(),
          partials,
          decayPerS: 0.7 + 3 * random(),
          noiseSeed: 0,
        });
      }
      startS += lengthNoteS;
    }
  }
  for (let startS = 0; startS < lengthS - 0.2; startS += beatS / 2) {
    if (random() < 0.35) continue;
    notes.push({
      startS: startS + 0.01 * random(),
      lengthS: 0.15,
      hz: 150 * 2 ** (4 * random()),
      level: 0.05 + 0.1 * random(),
      partials: [],
      decayPerS: 25,
      noiseSeed: 1 + Math.floor(1e6 * random()),
    });
  }
  return { lengthS, notes };
}

/** Renders a score; `tempo` and `pitchSemitones` give exact copies altered as an editor would, without its artefacts. */
export function render(score: Score, change: { tempo?: number; pitchSemitones?: number } = {}): Float32Array {
  const tempo = change.tempo ?? 1;
  const ratio = 2 ** ((change.pitchSemitones ?? 0) / 12);
  const samples = new Float32Array(Math.round((score.lengthS / tempo) * SAMPLE_RATE_HZ));
  for (const note of score.notes) {
    const from = Math.round((note.startS / tempo) * SAMPLE_RATE_HZ);
    const count = Math.min(samples.length - from, Math.round((note.lengthS / tempo) * SAMPLE_RATE_HZ));
    if (note.noiseSeed > 0) addNoise(samples, from, count, note, ratio);
    else {
      for (let i = 0; i < note.partials.length; i++) {
        addPartial(
          samples,
          from,
          count,
          note.hz * ratio * (i + 1),
          note.level * note.partials[i]!,
          note.decayPerS * tempo,
        );
      }
    }
  }
  return samples;
}

function addPartial(
  samples: Float32Array,
  from: number,
  count: number,
  hz: number,
  level: number,
  decayPerS: number,
): void {
  if (hz > 0.45 * SAMPLE_RATE_HZ) return;
  const step = (2 * Math.PI * hz) / SAMPLE_RATE_HZ;
  const fade = Math.exp(-decayPerS / SAMPLE_RATE_HZ);
  let envelope = level;
  for (let i = 0; i < count; i++) {
    const attack = Math.min(1, i / 60, (count - i) / 200);
    samples[from + i]! += attack * envelope * Math.sin(step * i);
    envelope *= fade;
  }
}

function addNoise(samples: Float32Array, from: number, count: number, note: Note, ratio: number): void {
  const random = makeRandom(note.noiseSeed);
  const hz = Math.min(note.hz * ratio, 0.4 * SAMPLE_RATE_HZ);
  const step = (2 * Math.PI * hz) / SAMPLE_RATE_HZ;
  const fade = Math.exp(-note.decayPerS / SAMPLE_RATE_HZ);
  let envelope = note.level;
  let low = 0;
  for (let i = 0; i < count; i++) {
    low += 0.2 * (2 * random() - 1 - low);
    samples[from + i]! += 4 * envelope * low * Math.cos(step * i);
    envelope *= fade;
  }
}

export function slice(samples: Float32Array, fromS: number, toS: number): Float32Array {
  return samples.slice(Math.round(fromS * SAMPLE_RATE_HZ), Math.round(toS * SAMPLE_RATE_HZ));
}

export function join(...parts: Float32Array[]): Float32Array {
  const out = new Float32Array(parts.reduce((sum, part) => sum + part.length, 0));
  let at = 0;
  for (const part of parts) {
    out.set(part, at);
    at += part.length;
  }
  return out;
}

export function mix(one: Float32Array, other: Float32Array, otherGain: number): Float32Array {
  return one.map((value, i) => value + otherGain * (other[i] ?? 0));
}

export function silence(lengthS: number): Float32Array {
  return new Float32Array(Math.round(lengthS * SAMPLE_RATE_HZ));
}

/** Linear change of speed by cubic interpolation: 1.03 runs 3 % faster and sounds higher. */
export function respeed(samples: Float32Array, speed: number): Float32Array {
  const out = new Float32Array(Math.floor((samples.length - 3) / speed));
  for (let i = 0; i < out.length; i++) {
    const at = i * speed + 1;
    const k = Math.min(samples.length - 3, Math.floor(at));
    const x = at - k;
    const [a, b, c, d] = [samples[k - 1]!, samples[k]!, samples[k + 1]!, samples[k + 2]!];
    out[i] = b + 0.5 * x * (c - a + x * (2 * a - 5 * b + 4 * c - d + x * (3 * (b - c) + d - a)));
  }
  return out;
}

export function tone(hz: number, lengthS: number, level = 0.5): Float32Array {
  const out = silence(lengthS);
  for (let i = 0; i < out.length; i++) out[i] = level * Math.sin((2 * Math.PI * hz * i) / SAMPLE_RATE_HZ);
  return out;
}
