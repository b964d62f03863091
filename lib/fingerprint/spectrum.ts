import FFT from "fft.js";
import { FRAME_SAMPLES, HOP_SAMPLES } from "./settings";

export const BINS = FRAME_SAMPLES / 2 + 1;

/** Called once a frame with the power of every bin; the array is reused, copy what you keep. */
export type FrameSink = (power: Float32Array) => void;

/**
 * Power spectra of a stream of mono samples, Hann window, two real frames to one complex transform.
 *
 * Source:  two-for-one: F{x + iy} = X + iY; X and Y are parted by conjugate symmetry.
 * Input:   samples  Float32Array[n]  full scale ±1, in chunks of any length
 * Output:  per frame: power[k] = |X_k|², k = 0..1024, windowed and unnormalised
 *          frames = 1 + floor((n - 2048) / 256), whatever the chunks were
 * Edges:   no padding; a tail shorter than a frame is dropped; silence gives zeros
 * Error:   relative error below 1e-5 of the frame's strongest bin against a direct float64 transform
 * Throws:  RangeError naming the first sample that is not a finite number
 */
export class SpectrumStream {
  readonly #transform = new FFT(FRAME_SAMPLES);
  readonly #window = hannWindow(FRAME_SAMPLES);
  readonly #input = new Float64Array(2 * FRAME_SAMPLES);
  readonly #output = new Float64Array(2 * FRAME_SAMPLES);
  readonly #powerA = new Float32Array(BINS);
  readonly #powerB = new Float32Array(BINS);
  readonly #held = new Float32Array(2 * FRAME_SAMPLES + 64 * HOP_SAMPLES);
  readonly #sink: FrameSink;
  #heldSamples = 0;
  #seenSamples = 0;

  constructor(sink: FrameSink) {
    this.#sink = sink;
  }

  get seenSamples(): number {
    return this.#seenSamples;
  }

  push(samples: Float32Array): void {
    let at = 0;
    while (at < samples.length) {
      const take = Math.min(samples.length - at, this.#held.length - this.#heldSamples);
      for (let i = 0; i < take; i++) {
        const value = samples[at + i]!;
        if (!Number.isFinite(value)) {
          throw new RangeError(`sample ${this.#seenSamples + i} is ${value}; samples must be finite numbers`);
        }
        this.#held[this.#heldSamples + i] = value;
      }
      this.#heldSamples += take;
      this.#seenSamples += take;
      at += take;
      this.#drain(false);
    }
  }

  finish(): void {
    this.#drain(true);
  }

  #drain(last: boolean): void {
    let at = 0;
    while (at + FRAME_SAMPLES + HOP_SAMPLES <= this.#heldSamples) {
      this.#emitPair(at);
      at += 2 * HOP_SAMPLES;
    }
    if (last && at + FRAME_SAMPLES <= this.#heldSamples) {
      this.#held.fill(0, this.#heldSamples, at + FRAME_SAMPLES + HOP_SAMPLES);
      this.#load(at);
      this.#sink(this.#powerA);
      at += HOP_SAMPLES;
    }
    this.#held.copyWithin(0, at, this.#heldSamples);
    this.#heldSamples -= at;
  }

  #emitPair(at: number): void {
    this.#load(at);
    this.#sink(this.#powerA);
    this.#sink(this.#powerB);
  }

  #load(at: number): void {
    const input = this.#input;
    const held = this.#held;
    const window = this.#window;
    for (let i = 0; i < FRAME_SAMPLES; i++) {
      input[2 * i] = held[at + i]! * window[i]!;
      input[2 * i + 1] = held[at + HOP_SAMPLES + i]! * window[i]!;
    }
    const out = this.#output;
    this.#transform.transform(out, input);
    this.#powerA[0] = out[0]! * out[0]!;
    this.#powerB[0] = out[1]! * out[1]!;
    for (let k = 1; k < BINS; k++) {
      const re = out[2 * k]!;
      const im = out[2 * k + 1]!;
      const mirroredRe = out[2 * (FRAME_SAMPLES - k)]!;
      const mirroredIm = out[2 * (FRAME_SAMPLES - k) + 1]!;
      const aRe = (re + mirroredRe) / 2;
      const aIm = (im - mirroredIm) / 2;
      const bRe = (im + mirroredIm) / 2;
      const bIm = (mirroredRe - re) / 2;
      this.#powerA[k] = aRe * aRe + aIm * aIm;
      this.#powerB[k] = bRe * bRe + bIm * bIm;
    }
  }
}

function hannWindow(samples: number): Float64Array {
  const window = new Float64Array(samples);
  for (let i = 0; i < samples; i++) window[i] = 0.5 - 0.5 * Math.cos((2 * Math.PI * i) / samples);
  return window;
}
