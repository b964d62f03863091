/** The pace is taken over this long, so that one slow second does not move the estimate about. */
const PACE_WINDOW_MS = 8000;

interface Sample {
  atMs: number;
  sentBytes: number;
}

/** Time left from the pace of the last samples. */
function secondsLeft(samples: readonly Sample[], totalBytes: number): number | null {
  const first = samples[0];
  const last = samples.at(-1);
  if (!first || !last || last.atMs - first.atMs < 500) return null;
  const bytesPerMs = (last.sentBytes - first.sentBytes) / (last.atMs - first.atMs);
  if (bytesPerMs <= 0) return null;
  return Math.ceil((totalBytes - last.sentBytes) / bytesPerMs / 1000);
}

export class Pace {
  private samples: Sample[] = [];

  add(sentBytes: number, atMs = performance.now()): void {
    this.samples = [
      ...this.samples.filter((sample) => atMs - sample.atMs <= PACE_WINDOW_MS),
      { atMs, sentBytes },
    ];
  }

  clear(): void {
    this.samples = [];
  }

  left(totalBytes: number): number | null {
    return secondsLeft(this.samples, totalBytes);
  }
}
