import FFT from "fft.js";

/** Hann window, periodic. */
export function hann(size: number): Float64Array {
  return Float64Array.from({ length: size }, (_, i) => 0.5 - 0.5 * Math.cos((2 * Math.PI * i) / size));
}

/**
 * Power spectra of windowed frames of one size.
 *
 * Input:   size a power of two; frames are read from `samples` at `offset`, zeros beyond its end
 * Output:  Float64Array[size / 2 + 1], reused by the next call; a full-scale sine on a bin gives about 1
 *          (divided by (Σ window / 2)²)
 */
export class PowerSpectrum {
  private readonly fft: FFT;
  private readonly frame: number[];
  private readonly bins: number[];
  private readonly window: Float64Array;
  private readonly scale: number;
  readonly power: Float64Array;

  constructor(readonly size: number) {
    this.fft = new FFT(size);
    this.frame = new Array<number>(size).fill(0);
    this.bins = this.fft.createComplexArray() as number[];
    this.window = hann(size);
    this.scale = (2 / this.window.reduce((sum, value) => sum + value, 0)) ** 2;
    this.power = new Float64Array(size / 2 + 1);
  }

  read(samples: Float32Array, offset: number): Float64Array {
    const { frame, window, bins, power, scale, size } = this;
    for (let i = 0; i < size; i++) frame[i] = (samples[offset + i] ?? 0) * window[i]!;
    this.fft.realTransform(bins, frame);
    for (let k = 0; k <= size / 2; k++) {
      const re = bins[2 * k]!;
      const im = bins[2 * k + 1]!;
      power[k] = (re * re + im * im) * scale;
    }
    return power;
  }
}
