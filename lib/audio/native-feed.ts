import type { Writable } from "node:stream";
import { writeTo } from "./native";

/** Planar floats to interleaved little-endian float32 bytes. */
export function interleaveFloat(channels: readonly Float32Array[]): Uint8Array {
  const width = channels.length;
  const frames = channels[0]?.length ?? 0;
  const out = new Float32Array(frames * width);
  for (let c = 0; c < width; c++) {
    const channel = channels[c]!;
    for (let i = 0; i < frames; i++) out[i * width + c] = channel[i]!;
  }
  return new Uint8Array(out.buffer);
}

/** Planar floats to interleaved little-endian integers of 2 or 3 bytes, rounded and kept within range. */
export function interleaveInteger(channels: readonly Float32Array[], bytesPerSample: 2 | 3): Uint8Array {
  const width = channels.length;
  const frames = channels[0]?.length ?? 0;
  const out = new Uint8Array(frames * width * bytesPerSample);
  const full = bytesPerSample === 2 ? 32768 : 8388608;
  for (let c = 0; c < width; c++) {
    const channel = channels[c]!;
    let at = c * bytesPerSample;
    for (let i = 0; i < frames; i++, at += width * bytesPerSample) {
      const value = Math.max(-full, Math.min(full - 1, Math.round(channel[i]! * full)));
      out[at] = value;
      out[at + 1] = value >> 8;
      if (bytesPerSample === 3) out[at + 2] = value >> 16;
    }
  }
  return out;
}

/** Streams planar blocks into a child's standard input and closes it. */
export async function feedBlocks(
  stdin: Writable,
  run: (write: (channels: readonly Float32Array[]) => Promise<void>) => Promise<void>,
  toBytes: (channels: readonly Float32Array[]) => Uint8Array = interleaveFloat,
): Promise<void> {
  await run((channels) => writeTo(stdin, toBytes(channels)));
  await new Promise<void>((done) => {
    if (stdin.destroyed) return done();
    stdin.end(() => done());
  });
}
