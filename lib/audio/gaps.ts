/** Digital silence inside a programme is reported from this length (trade practice: 20 ms). */
export const GAP_S_MIN = 0.02;
/** A gap with louder neighbours than this on both sides was cut, not played: −34 dBFS within eight samples. */
const ABRUPT_LEVEL = 10 ** (-34 / 20);
const EDGE_SAMPLES = 8;
/** A single-sample click stands out this far from its neighbours, and this many times over the detail around it. */
const CLICK_SIZE_MIN = 0.15;
const CLICK_CONTRAST = 10;
const CLICK_REACH = 24;
const KEPT = 64;

export interface Gap {
  startS: number;
  endS: number;
  /** Null if every channel is silent. */
  channel: number | null;
  /** Both edges are cut off in full sound. */
  abrupt: boolean;
}

export interface Click {
  atS: number;
  channel: number;
  size: number;
}

export interface FaultsReading {
  /** Interior stretches of 20 ms or more where every channel is exactly zero, and abrupt ones of one channel. */
  gaps: Gap[];
  gapCount: number;
  digitalSilenceS: number;
  clicks: Click[];
  clickCount: number;
}

/**
 * Dropouts and single-sample clicks with their times.
 *
 * Input:   planar blocks of any size
 * Output:  at most 64 of each with their place; all are counted
 * Edges:   silence before the first and after the last sound is no gap. A channel silent alone is reported only where
 *          both edges are abrupt: hard-panned music rests in one channel all the time.
 */
export class FaultsMeter {
  private readonly whole: ZeroRuns;
  private readonly single: ZeroRuns[];
  private readonly clickTails: Float32Array[];
  private readonly clicks: Click[] = [];
  private clickCount = 0;
  private done = 0;

  constructor(
    private readonly sampleRateHz: number,
    private readonly channels: number,
  ) {
    const samplesMin = Math.round(GAP_S_MIN * sampleRateHz);
    this.whole = new ZeroRuns(samplesMin);
    this.single = channels > 1 ? Array.from({ length: channels }, () => new ZeroRuns(samplesMin)) : [];
    this.clickTails = Array.from({ length: channels }, () => new Float32Array(0));
  }

  push(block: readonly Float32Array[]): void {
    const frames = block[0]?.length ?? 0;
    if (frames === 0) return;
    this.whole.scan(envelope(block), this.done);
    for (let c = 0; c < this.single.length; c++) this.single[c]!.scan(block[c]!, this.done);
    for (let c = 0; c < this.channels; c++) this.scanClicks(block[c]!, c);
    this.done += frames;
  }

  finish(): FaultsReading {
    const rate = this.sampleRateHz;
    const toGap = (run: Run, channel: number | null): Gap => ({
      startS: run.start / rate,
      endS: run.end / rate,
      channel,
      abrupt: run.abrupt,
    });
    const gaps = this.whole.runs.map((run) => toGap(run, null));
    let gapCount = this.whole.count;
    for (let c = 0; c < this.single.length; c++) {
      for (const run of this.single[c]!.runs) {
        const shared = this.whole.runs.some((all) => all.start < run.end && all.end > run.start);
        if (!run.abrupt || shared) continue;
        gapCount++;
        gaps.push(toGap(run, c));
      }
    }
    gaps.sort((a, b) => a.startS - b.startS);
    return {
      gaps: gaps.slice(0, KEPT),
      gapCount,
      digitalSilenceS: this.whole.samples / rate,
      clicks: this.clicks.sort((a, b) => a.atS - b.atS),
      clickCount: this.clickCount,
    };
  }

  private scanClicks(block: Float32Array, channel: number): void {
    const tail = this.clickTails[channel]!;
    const x = new Float32Array(tail.length + block.length);
    x.set(tail);
    x.set(block, tail.length);
    const origin = this.done - tail.length;
    const reach = CLICK_REACH + 1;
    for (let i = reach; i < x.length - reach; i++) {
      const bend = Math.abs(x[i]! - 0.5 * (x[i - 1]! + x[i + 1]!));
      if (bend < CLICK_SIZE_MIN || !isIsolated(x, i, bend)) continue;
      this.clickCount++;
      if (this.clicks.length < KEPT) {
        this.clicks.push({ atS: (origin + i) / this.sampleRateHz, channel, size: bend });
      }
    }
    this.clickTails[channel] = x.slice(Math.max(0, x.length - 2 * reach));
  }
}

/** One sample off a smooth line on both sides. A step (a saw wave's edge, a hard edit) is none. */
function isIsolated(x: Float32Array, i: number, bend: number): boolean {
  if (Math.abs(x[i + 1]! - x[i - 1]!) > 0.3 * bend) return false;
  for (let d = 2; d <= CLICK_REACH; d++) {
    const before = Math.abs(x[i - d]! - 0.5 * (x[i - d - 1]! + x[i - d + 1]!));
    const after = Math.abs(x[i + d]! - 0.5 * (x[i + d - 1]! + x[i + d + 1]!));
    if (before * CLICK_CONTRAST > bend || after * CLICK_CONTRAST > bend) return false;
  }
  return true;
}

function envelope(block: readonly Float32Array[]): Float32Array {
  if (block.length === 1) return block[0]!;
  const out = new Float32Array(block[0]!.length);
  for (const channel of block) {
    for (let i = 0; i < out.length; i++) {
      const size = Math.abs(channel[i]!);
      if (size > out[i]!) out[i] = size;
    }
  }
  return out;
}

interface Run {
  start: number;
  end: number;
  abrupt: boolean;
}

/** Runs of exact zeros between sounds in one stream. */
class ZeroRuns {
  readonly runs: Run[] = [];
  count = 0;
  samples = 0;
  private run = 0;
  private heard = false;
  private peakBefore = 0;
  private recent = new Float32Array(EDGE_SAMPLES);
  private pending: { run: Run; cutBefore: boolean; left: number } | null = null;

  constructor(private readonly samplesMin: number) {}

  scan(x: Float32Array, origin: number): void {
    for (let i = 0; i < x.length; i++) {
      const value = x[i]!;
      if (value === 0) {
        if (this.run === 0 && this.heard) this.peakBefore = this.recentPeak(x, i);
        this.run++;
        continue;
      }
      if (this.pending) this.settle(Math.abs(value));
      if (this.run >= this.samplesMin && this.heard) {
        const run = { start: origin + i - this.run, end: origin + i, abrupt: false };
        this.count++;
        this.samples += this.run;
        if (this.runs.length < KEPT) this.runs.push(run);
        this.pending = { run, cutBefore: this.peakBefore > ABRUPT_LEVEL, left: EDGE_SAMPLES };
        this.settle(Math.abs(value));
      }
      this.run = 0;
      this.heard = true;
    }
    const keep = new Float32Array(EDGE_SAMPLES);
    for (let k = 0; k < EDGE_SAMPLES; k++) {
      const from = x.length - EDGE_SAMPLES + k;
      keep[k] = from >= 0 ? x[from]! : this.recent[EDGE_SAMPLES + from]!;
    }
    this.recent = keep;
  }

  private settle(size: number): void {
    const { pending } = this;
    if (!pending) return;
    if (pending.cutBefore && size > ABRUPT_LEVEL) pending.run.abrupt = true;
    pending.left--;
    if (pending.left <= 0) this.pending = null;
  }

  private recentPeak(x: Float32Array, i: number): number {
    let peak = 0;
    for (let k = 1; k <= EDGE_SAMPLES; k++) {
      const value = i - k >= 0 ? x[i - k]! : this.recent[EDGE_SAMPLES + i - k]!;
      peak = Math.max(peak, Math.abs(value));
    }
    return peak;
  }
}
