/** Length of the last stretch that is kept, in bins of 10 ms. */
const KEPT_BINS = 3000;
const BINS_PER_S = 100;
/** A hit raises the level of the differenced signal by this much over the 50 ms before. */
const HIT_RISE_DB = 6;
/** Hits this far under the loudest bin of the last half minute are no last hits but echoes. */
const HIT_FLOOR_DB = -30;
const FADE_S_MIN = 2;

export interface EndingReading {
  /** Start of the last clear attack; null if there is none in the last 30 s. */
  lastHitS: number | null;
  /** The level falls steadily over two seconds or more while attacks go on: a fade, not a ring-out. */
  fades: boolean;
}

/**
 * How a programme ends, from 10 ms levels of its last 30 s.
 *
 * Source:  own rule (attacks in the first difference, which lifts the high partials of an onset).
 * Input:   planar blocks of any size
 * Error:   hit times are exact to a bin (10 ms); soft attacks of strings and pads may be missed
 */
export class EndingMeter {
  private readonly levels = new Float64Array(KEPT_BINS);
  private readonly attacks = new Float64Array(KEPT_BINS);
  private bins = 0;
  private squares = 0;
  private steps = 0;
  private inBin = 0;
  private previous = 0;
  private readonly binSamples: number;

  constructor(private readonly sampleRateHz: number) {
    this.binSamples = Math.round(sampleRateHz / BINS_PER_S);
  }

  push(block: readonly Float32Array[]): void {
    const left = block[0];
    if (!left) return;
    const right = block[1] ?? left;
    for (let i = 0; i < left.length; i++) {
      const value = 0.5 * (left[i]! + right[i]!);
      const step = value - this.previous;
      this.previous = value;
      this.squares += value * value;
      this.steps += step * step;
      if (++this.inBin === this.binSamples) this.closeBin();
    }
  }

  finish(): EndingReading {
    const count = Math.min(this.bins, KEPT_BINS);
    const order = Array.from({ length: count }, (_, i) => (this.bins - count + i) % KEPT_BINS);
    const levelDb = order.map((at) => 10 * Math.log10(this.levels[at]! + 1e-12));
    const attackDb = order.map((at) => 10 * Math.log10(this.attacks[at]! + 1e-14));
    const hits = findHits(attackDb, HIT_FLOOR_DB);
    const last = hits.at(-1);
    const startBin = this.bins - count;
    return {
      lastHitS: last === undefined ? null : ((startBin + last) * this.binSamples) / this.sampleRateHz,
      fades: fades(levelDb, findHits(attackDb, 3 * HIT_FLOOR_DB)),
    };
  }

  private closeBin(): void {
    const at = this.bins % KEPT_BINS;
    this.levels[at] = this.squares / this.binSamples;
    this.attacks[at] = this.steps / this.binSamples;
    this.bins++;
    this.squares = 0;
    this.steps = 0;
    this.inBin = 0;
  }
}

function findHits(attackDb: readonly number[], floorDb: number): number[] {
  const loudest = Math.max(-200, ...attackDb);
  const hits: number[] = [];
  for (let i = 0; i < attackDb.length; i++) {
    let before = i === 0 ? -140 : -200;
    for (let k = Math.max(0, i - 5); k < i; k++) before = Math.max(before, attackDb[k]!);
    const level = attackDb[i]!;
    if (level - before >= HIT_RISE_DB && level > loudest + floorDb) hits.push(i);
  }
  return hits;
}

function fades(levelDb: readonly number[], hits: readonly number[]): boolean {
  const coarse: number[] = [];
  for (let i = 0; i + 25 <= levelDb.length; i += 25) {
    // The loudest moment of the last second: rests and soft beats between loud ones are no fade.
    coarse.push(Math.max(...levelDb.slice(Math.max(0, i - 75), i + 25)));
  }
  const reference = [...coarse].sort((a, b) => a - b)[Math.floor(coarse.length * 0.75)] ?? -120;
  let end = coarse.length - 1;
  while (end >= 0 && coarse[end]! < reference - 55) end--;
  let start = end;
  while (start > 0 && coarse[start]! < reference - 9) start--;
  if (end < 0 || (end - start) / 4 < FADE_S_MIN || coarse[end]! > reference - 20) return false;
  for (let i = start + 1; i <= end; i++) if (coarse[i]! > coarse[i - 1]! + 4) return false;
  // Attacks in the quieter half of the fall show that the music went on while somebody turned it down.
  const middle = (start + (end - start) / 3) * 25;
  return hits.filter((hit) => hit > middle && hit < end * 25).length >= 2;
}
