import { type ByteSource, viewOf } from "./byte-source";
import type { PcmLayout } from "./container-facts";

/** Beyond this a float sample is no sound (+60 dB over full scale) and is counted as broken. */
const FLOAT_ABS_MAX = 1000;

/**
 * Interleaved linear samples to planar Float32.
 *
 * Input:   bytes   whole frames, as `layout` says; out: one Float32Array of at least `frames` per channel
 * Output:  full scale ±1: integers are divided by 2^(8·bytesPerSample − 1), so −1 is exact and +1 is never reached
 * Edges:   NaN, infinities and |x| > 1000 of float files become 0; the number of them is returned
 * Error:   exact for 8, 16 and 24 bit; 32-bit integers and 64-bit floats are rounded to float32
 */
export function convertPcm(
  bytes: Uint8Array,
  layout: PcmLayout,
  frames: number,
  out: Float32Array[],
): number {
  const { channels, bytesPerSample } = layout;
  const stride = channels * bytesPerSample;
  if (layout.kind === "float") return convertFloat(bytes, layout, frames, out);
  for (let c = 0; c < channels; c++) {
    const target = out[c]!;
    let at = c * bytesPerSample;
    if (bytesPerSample === 2) {
      const low = layout.littleEndian ? 0 : 1;
      const high = 1 - low;
      for (let i = 0; i < frames; i++, at += stride) {
        target[i] = ((((bytes[at + high]! << 8) | bytes[at + low]!) << 16) >> 16) / 32768;
      }
    } else if (bytesPerSample === 3) {
      const low = layout.littleEndian ? 0 : 2;
      const high = 2 - low;
      for (let i = 0; i < frames; i++, at += stride) {
        const value = (bytes[at + high]! << 24) | (bytes[at + 1]! << 16) | (bytes[at + low]! << 8);
        target[i] = value / 2147483648;
      }
    } else if (bytesPerSample === 4) {
      const view = viewOf(bytes);
      for (let i = 0; i < frames; i++, at += stride) {
        target[i] = view.getInt32(at, layout.littleEndian) / 2147483648;
      }
    } else {
      const bias = layout.kind === "unsigned" ? 128 : 0;
      for (let i = 0; i < frames; i++, at += stride) {
        target[i] = bias ? (bytes[at]! - bias) / 128 : ((bytes[at]! << 24) >> 24) / 128;
      }
    }
  }
  return 0;
}

function convertFloat(bytes: Uint8Array, layout: PcmLayout, frames: number, out: Float32Array[]): number {
  const view = viewOf(bytes);
  const { channels, bytesPerSample, littleEndian } = layout;
  let broken = 0;
  for (let c = 0; c < channels; c++) {
    const target = out[c]!;
    let at = c * bytesPerSample;
    for (let i = 0; i < frames; i++, at += channels * bytesPerSample) {
      const value =
        bytesPerSample === 4 ? view.getFloat32(at, littleEndian) : view.getFloat64(at, littleEndian);
      const sound = Math.abs(value) <= FLOAT_ABS_MAX;
      if (!sound) broken++;
      target[i] = sound ? value : 0;
    }
  }
  return broken;
}

/** Blocks of planar samples from `layout`, about 64 kB of file each. */
export async function* readPcm(
  source: ByteSource,
  layout: PcmLayout,
): AsyncGenerator<{ channels: Float32Array[]; broken: number }> {
  const frameBytes = layout.channels * layout.bytesPerSample;
  const blockFrames = Math.max(1, Math.floor((1 << 17) / frameBytes));
  for (let frame = 0; frame < layout.frames; frame += blockFrames) {
    const frames = Math.min(blockFrames, layout.frames - frame);
    const bytes = await source.read(layout.dataOffset + frame * frameBytes, frames * frameBytes);
    const whole = Math.floor(bytes.length / frameBytes);
    const channels = Array.from({ length: layout.channels }, () => new Float32Array(whole));
    const broken = convertPcm(bytes, layout, whole, channels);
    if (whole > 0) yield { channels, broken };
    if (whole < frames) return;
  }
}
