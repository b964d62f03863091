/** One channel's three contours, 0 to 255 of full scale (linear amplitude). */
export interface ContourChannel {
  peak: Uint8Array;
  rms: Uint8Array;
  /** The level that the quieter moments of a bin stay above. */
  core: Uint8Array;
}

/** Measured contours of a recording, first channel first. Safe in a browser: this file imports nothing. */
export interface Contour {
  seconds: number;
  binsPerSecond: number;
  channels: ContourChannel[];
}

export const CONTOUR_BINS_PER_S = 20;
/** An hour at 20 bins a second; longer recordings get longer bins. */
const BINS_MAX = 72_000;
/** A bin's core is the second quietest of its ten parts, by RMS. */
const PARTS = 10;
const CORE_RANK = 1;

const MAGIC = 0x53574354;
const FORMAT_VERSION = 1;
const HEADER_BYTES = 32;

export interface ContourMeter {
  push(block: readonly Float32Array[]): void;
  finish(): Contour;
}

/**
 * Contours of up to the first two channels, streaming.
 *
 * Input:   planar blocks of any size; durationS sets the length of a bin (20 a second up to an hour) and may be 0 if
 *          it is not known
 * Output:  per bin the largest |x| rounded up, the RMS and the core rounded to the nearest; the last bin may be short
 * Edges:   values over full scale stay at 255; an empty recording has no bins
 * Error:   1/255 of full scale for the peak, half of that for the others
 */
export function createContour(sampleRateHz: number, channels: number, durationS: number): ContourMeter {
  const binsPerSecond = Math.min(CONTOUR_BINS_PER_S, BINS_MAX / Math.max(durationS, 1));
  const width = Math.min(2, channels);
  const meters = Array.from({ length: width }, () => new ChannelContour(sampleRateHz / binsPerSecond));
  let samples = 0;
  return {
    push(block) {
      for (let c = 0; c < width; c++) meters[c]!.push(block[c]!);
      samples += block[0]?.length ?? 0;
    },
    finish: () => ({
      seconds: samples / sampleRateHz,
      binsPerSecond,
      channels: meters.map((meter) => meter.finish()),
    }),
  };
}

class ChannelContour {
  private bytes = new Uint8Array(3 * 4096);
  private bins = 0;
  private peak = 0;
  private done = 0;
  private part = 0;
  private partSamples = 0;
  private readonly squares = new Float64Array(PARTS);
  private readonly counts = new Float64Array(PARTS);
  private nextEdge: number;

  constructor(private readonly binSamples: number) {
    this.nextEdge = Math.round(binSamples / PARTS);
  }

  push(x: Float32Array): void {
    for (let i = 0; i < x.length; ) {
      const take = Math.min(x.length - i, this.nextEdge - this.done);
      let { peak } = this;
      let sum = 0;
      for (let k = i; k < i + take; k++) {
        const size = Math.abs(x[k]!);
        if (size > peak) peak = size;
        sum += size * size;
      }
      this.peak = peak;
      this.squares[this.part] = this.squares[this.part]! + sum;
      this.partSamples += take;
      this.done += take;
      i += take;
      if (this.done === this.nextEdge) this.closePart();
    }
  }

  finish(): ContourChannel {
    if (this.partSamples > 0) this.closePart();
    if (this.part > 0) this.closeBin();
    const take = (offset: number): Uint8Array =>
      Uint8Array.from({ length: this.bins }, (_, bin) => this.bytes[3 * bin + offset]!);
    return { peak: take(0), rms: take(1), core: take(2) };
  }

  private closePart(): void {
    this.counts[this.part] = this.partSamples;
    this.partSamples = 0;
    this.part++;
    if (this.part === PARTS) this.closeBin();
    this.nextEdge = Math.round((this.bins + (this.part + 1) / PARTS) * this.binSamples);
  }

  private closeBin(): void {
    if (3 * this.bins === this.bytes.length) {
      const grown = new Uint8Array(this.bytes.length * 2);
      grown.set(this.bytes);
      this.bytes = grown;
    }
    let squares = 0;
    let count = 0;
    const levels: number[] = [];
    for (let p = 0; p < this.part; p++) {
      squares += this.squares[p]!;
      count += this.counts[p]!;
      if (this.counts[p]! > 0) levels.push(Math.sqrt(this.squares[p]! / this.counts[p]!));
    }
    levels.sort((a, b) => a - b);
    this.bytes[3 * this.bins] = toByte(this.peak, Math.ceil);
    this.bytes[3 * this.bins + 1] = toByte(count > 0 ? Math.sqrt(squares / count) : 0, Math.round);
    this.bytes[3 * this.bins + 2] = toByte(levels[Math.min(CORE_RANK, levels.length - 1)] ?? 0, Math.round);
    this.bins++;
    this.part = 0;
    this.peak = 0;
    this.squares.fill(0);
    this.counts.fill(0);
  }
}

function toByte(amplitude: number, round: (value: number) => number): number {
  // Less a millionth, so that an exact 1/255 step is not rounded up by float noise.
  return Math.max(0, Math.min(255, round(amplitude * 255 - 1e-6)));
}

/**
 * Fewer bins for a narrow strip: peaks by their maximum, RMS by its power, cores by their mean.
 *
 * Edges:   bins ≥ the number there is (or < 1) returns the contour unchanged
 */
export function reduceContour(contour: Contour, bins: number): Contour {
  const have = contour.channels[0]?.peak.length ?? 0;
  if (bins < 1 || bins >= have) return contour;
  const spread = (values: Uint8Array, join: (part: Uint8Array) => number): Uint8Array =>
    Uint8Array.from({ length: bins }, (_, i) =>
      join(values.subarray(Math.floor((i * have) / bins), Math.floor(((i + 1) * have) / bins))),
    );
  const mean = (part: Uint8Array): number => part.reduce((sum, value) => sum + value, 0) / part.length;
  const power = (part: Uint8Array): number =>
    Math.sqrt(part.reduce((sum, value) => sum + value * value, 0) / part.length);
  return {
    seconds: contour.seconds,
    binsPerSecond: contour.seconds > 0 ? bins / contour.seconds : contour.binsPerSecond,
    channels: contour.channels.map(({ peak, rms, core }) => ({
      peak: spread(peak, (part) => part.reduce((most, value) => Math.max(most, value), 0)),
      rms: spread(rms, (part) => Math.round(power(part))),
      core: spread(core, (part) => Math.round(mean(part))),
    })),
  };
}

/**
 * Contours as bytes: a 32-byte header (magic "SWCT", version, channels, bins, bins per second, seconds; big-endian),
 * then peak, RMS and core of each channel, one byte a bin.
 */
export function packContour(contour: Contour): Uint8Array {
  const bins = contour.channels[0]?.peak.length ?? 0;
  const packed = new Uint8Array(HEADER_BYTES + 3 * bins * contour.channels.length);
  const view = new DataView(packed.buffer);
  view.setUint32(0, MAGIC);
  view.setUint16(4, FORMAT_VERSION);
  view.setUint16(6, contour.channels.length);
  view.setUint32(8, bins);
  view.setFloat64(12, contour.binsPerSecond);
  view.setFloat64(20, contour.seconds);
  let at = HEADER_BYTES;
  for (const channel of contour.channels) {
    for (const values of [channel.peak, channel.rms, channel.core]) {
      packed.set(values, at);
      at += bins;
    }
  }
  return packed;
}

/** Throws RangeError for bytes that packContour did not write. The arrays share memory with `packed`. */
export function unpackContour(packed: Uint8Array): Contour {
  const view = new DataView(packed.buffer, packed.byteOffset, packed.byteLength);
  if (packed.length < HEADER_BYTES || view.getUint32(0) !== MAGIC) throw new RangeError("no packed contour");
  if (view.getUint16(4) !== FORMAT_VERSION) {
    throw new RangeError(`contour format ${view.getUint16(4)}, wanted ${FORMAT_VERSION}`);
  }
  const count = view.getUint16(6);
  const bins = view.getUint32(8);
  if (packed.length !== HEADER_BYTES + 3 * bins * count) {
    throw new RangeError(`a contour of ${count} × ${bins} bins has ${packed.length} bytes`);
  }
  const take = (index: number): Uint8Array =>
    packed.subarray(HEADER_BYTES + index * bins, HEADER_BYTES + (index + 1) * bins);
  return {
    seconds: view.getFloat64(20),
    binsPerSecond: view.getFloat64(12),
    channels: Array.from({ length: count }, (_, c) => ({
      peak: take(3 * c),
      rms: take(3 * c + 1),
      core: take(3 * c + 2),
    })),
  };
}
