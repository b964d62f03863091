import { ANALYSIS_RATE_HZ } from "./resample";
import { PowerSpectrum } from "./spectrum";

const SIZE = 4096;
const HOP = 2048;
/** From A1 to E7: below, partials of one note share bins; above, percussion outweighs pitch. */
const LOW_HZ = 55;
const HIGH_HZ = 2650;
/** A frame this far under the loudest is left out of the mean. */
const QUIET = 1e-5;

export interface Chroma {
  /** Twelve weights from C, sum 1; all zero for silence. */
  mean: Float32Array;
  frames: number;
  /** Cents by which the recording's A lies off 440 Hz. */
  tuningCents: number;
}

/**
 * Mean chroma of spectral peaks, with the tuning taken out.
 *
 * Source:  peak-picked chroma with parabolic interpolation of the log spectrum (J. O. Smith, "Spectral Audio Signal
 *          Processing", quadratic interpolation); tuning by the mean direction of the peaks' deviations.
 * Input:   mono at 11,025 Hz
 * Edges:   shorter than one frame is padded with zeros; silence gives zeros
 */
export function chromagram(samples: Float32Array): Chroma {
  const spectrum = new PowerSpectrum(SIZE);
  const frames = Math.max(1, Math.floor((samples.length - SIZE) / HOP) + 1);
  const notes: { pitch: number; weight: number; frame: number }[] = [];
  const totals = new Float64Array(frames);
  for (let f = 0; f < frames; f++) {
    for (const peak of spectralPeaks(spectrum.read(samples, f * HOP))) {
      // Square root of power compresses loud notes against soft ones; both carry the key.
      const weight = Math.sqrt(peak.power);
      notes.push({ pitch: 69 + 12 * Math.log2(peak.hz / 440), weight, frame: f });
      totals[f] = totals[f]! + weight;
    }
  }
  const tuningCents = tuningOf(notes);
  const loudest = totals.reduce((most, total) => Math.max(most, total), 0);
  const mean = new Float64Array(12);
  for (const note of notes) {
    const total = totals[note.frame]!;
    if (total <= loudest * Math.sqrt(QUIET)) continue;
    const pitch = note.pitch - tuningCents / 100;
    const nearest = Math.round(pitch);
    // A peak between two notes belongs to neither; Gaussian of 20 cents.
    const fit = Math.exp(-0.5 * ((pitch - nearest) / 0.2) ** 2);
    const pc = ((nearest % 12) + 12) % 12;
    mean[pc] = mean[pc]! + (note.weight * fit) / total;
  }
  const sum = mean.reduce((total, value) => total + value, 0);
  return { mean: Float32Array.from(mean, (value) => (sum > 0 ? value / sum : 0)), frames, tuningCents };
}

function* spectralPeaks(power: Float64Array): Generator<{ hz: number; power: number }> {
  const perBin = ANALYSIS_RATE_HZ / SIZE;
  const first = Math.ceil(LOW_HZ / perBin);
  const last = Math.floor(HIGH_HZ / perBin);
  let most = 0;
  for (let k = first; k <= last; k++) most = Math.max(most, power[k]!);
  const floor = Math.max(most * 1e-5, 1e-11);
  for (let k = first; k <= last; k++) {
    const here = power[k]!;
    if (here <= floor || here < power[k - 1]! || here <= power[k + 1]!) continue;
    const a = Math.log(power[k - 1]! + 1e-30);
    const b = Math.log(here);
    const c = Math.log(power[k + 1]! + 1e-30);
    const shift = (0.5 * (a - c)) / (a - 2 * b + c);
    yield { hz: (k + shift) * perBin, power: here };
  }
}

function tuningOf(notes: readonly { pitch: number; weight: number }[]): number {
  let x = 0;
  let y = 0;
  for (const { pitch, weight } of notes) {
    const turn = 2 * Math.PI * (pitch - Math.round(pitch));
    x += weight * Math.cos(turn);
    y += weight * Math.sin(turn);
  }
  return x === 0 && y === 0 ? 0 : (100 * Math.atan2(y, x)) / (2 * Math.PI);
}
