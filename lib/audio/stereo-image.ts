/** A channel under this RMS beside one over the other is dead: −70 and −50 dBFS (common practice). */
const DEAD_DB = -70;
const ALIVE_DB = -50;
/** Two least significant bits of 16: left and right that never differ by more are the same signal. */
const SAME_MAX = 2 / 32768;

export interface StereoReading {
  /** Pearson correlation of left and right, null if either is silent or there are not two channels. */
  correlation: number | null;
  /** What the mean power of both channels loses in (L + R) / 2, dB: 0 for equal, 3 for unrelated, ∞ for inverted. */
  monoLossDb: number | null;
  /** Left and right are the same signal. */
  dualMono: boolean;
  /** The channel that is silent while the other sounds. */
  deadChannel: number | null;
}

/**
 * Relation of the first two channels over the whole programme.
 *
 * Source:  mono sum loss = 10·log10( mean(l² + r²)/2 / mean(((l + r)/2)²) ), common practice.
 */
export class StereoMeter {
  private ll = 0;
  private rr = 0;
  private lr = 0;
  private l = 0;
  private r = 0;
  private apart = 0;
  private done = 0;

  push(block: readonly Float32Array[]): void {
    const left = block[0];
    const right = block[1];
    if (!left || !right) return;
    let { ll, rr, lr, l, r, apart } = this;
    for (let i = 0; i < left.length; i++) {
      const a = left[i]!;
      const b = right[i]!;
      ll += a * a;
      rr += b * b;
      lr += a * b;
      l += a;
      r += b;
      const d = a > b ? a - b : b - a;
      if (d > apart) apart = d;
    }
    Object.assign(this, { ll, rr, lr, l, r, apart });
    this.done += left.length;
  }

  finish(): StereoReading {
    const n = this.done;
    if (n === 0) return { correlation: null, monoLossDb: null, dualMono: false, deadChannel: null };
    const varL = this.ll - (this.l * this.l) / n;
    const varR = this.rr - (this.r * this.r) / n;
    const both = this.ll + this.rr;
    const level = (squares: number): number => 10 * Math.log10(squares / n + 1e-30);
    const [levelL, levelR] = [level(this.ll), level(this.rr)];
    const dead = levelL < DEAD_DB && levelR > ALIVE_DB ? 0 : levelR < DEAD_DB && levelL > ALIVE_DB ? 1 : null;
    // The sum may cancel to rounding noise; its floor keeps the loss finite at 120 dB.
    const mid = Math.max((both + 2 * this.lr) / 4, both * 0.5e-12);
    return {
      correlation: varL > 0 && varR > 0 ? (this.lr - (this.l * this.r) / n) / Math.sqrt(varL * varR) : null,
      monoLossDb: both > 0 ? 10 * Math.log10(both / 2 / mid) : null,
      dualMono: both > 0 && this.apart <= SAME_MAX,
      deadChannel: dead,
    };
  }
}
