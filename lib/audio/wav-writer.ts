import { type FileHandle, open } from "node:fs/promises";
import { type BextInput, buildBext } from "./bext";
import { interleaveInteger } from "./native-feed";

const DS64_BYTES = 28;
const SIZE_MAX = 0xffffffff;

export interface WavWriter {
  write(channels: readonly Float32Array[]): Promise<void>;
  /** Writes the final sizes and closes the file. */
  finish(): Promise<{ frames: number; bytes: number }>;
  /** Closes without finishing. */
  abandon(): Promise<void>;
}

/**
 * A 24 bit Broadcast Wave of any length; over 4 GB it becomes RF64.
 *
 * Source:  EBU Tech 3285 v2 (bext) and EBU Tech 3306 (a `JUNK` chunk first, which becomes `ds64` if it is needed).
 * Output:  chunks JUNK or ds64, bext, fmt, data, all of even size
 */
export async function createWavWriter(
  path: string,
  channels: number,
  sampleRateHz: number,
  bext: BextInput | null,
): Promise<WavWriter> {
  const file = await open(path, "w", 0o644);
  const body = bext ? buildBext(bext) : new Uint8Array(0);
  const headBytes = wavHeader({ channels, sampleRateHz, body, frames: 0 }).length;
  let frames = 0;
  let at = headBytes;
  return {
    async write(block) {
      const bytes = interleaveInteger(block, 3);
      await writeAll(file, bytes, at);
      at += bytes.length;
      frames += block[0]?.length ?? 0;
    },
    async finish() {
      try {
        if ((at - headBytes) % 2 === 1) {
          await writeAll(file, new Uint8Array(1), at);
          at++;
        }
        await writeAll(file, wavHeader({ channels, sampleRateHz, body, frames }), 0);
      } finally {
        await file.close();
      }
      return { frames, bytes: at };
    },
    abandon: () => file.close(),
  };
}

async function writeAll(file: FileHandle, bytes: Uint8Array, position: number): Promise<void> {
  for (let done = 0; done < bytes.length; ) {
    done += (await file.write(bytes, done, bytes.length - done, position + done)).bytesWritten;
  }
}

/** All bytes before the samples; of one length whatever `frames` is. */
export function wavHeader(wav: {
  channels: number;
  sampleRateHz: number;
  body: Uint8Array;
  frames: number;
}): Uint8Array {
  const { channels, sampleRateHz, body, frames } = wav;
  const extensible = channels > 2;
  const formatBytes = extensible ? 40 : 16;
  const bextBytes = body.length > 0 ? 8 + body.length : 0;
  const out = new Uint8Array(12 + 8 + DS64_BYTES + bextBytes + 8 + formatBytes + 8);
  const view = new DataView(out.buffer);
  const dataBytes = frames * channels * 3;
  const riffBytes = out.length - 8 + dataBytes + (dataBytes % 2);
  const large = riffBytes > SIZE_MAX;
  let at = 0;
  const text = (id: string): void => {
    for (let i = 0; i < 4; i++) out[at++] = id.charCodeAt(i);
  };
  const u32 = (value: number): void => {
    view.setUint32(at, value, true);
    at += 4;
  };
  const u16 = (value: number): void => {
    view.setUint16(at, value, true);
    at += 2;
  };
  text(large ? "RF64" : "RIFF");
  u32(large ? SIZE_MAX : riffBytes);
  text("WAVE");
  text(large ? "ds64" : "JUNK");
  u32(DS64_BYTES);
  if (large) {
    view.setBigUint64(at, BigInt(riffBytes), true);
    view.setBigUint64(at + 8, BigInt(dataBytes), true);
    view.setBigUint64(at + 16, BigInt(frames), true);
  }
  at += DS64_BYTES;
  if (body.length > 0) {
    text("bext");
    u32(body.length);
    out.set(body, at);
    at += body.length;
  }
  text("fmt ");
  u32(formatBytes);
  u16(extensible ? 0xfffe : 1);
  u16(channels);
  u32(sampleRateHz);
  u32(sampleRateHz * channels * 3);
  u16(channels * 3);
  u16(24);
  if (extensible) {
    u16(22);
    u16(24);
    // No speaker positions are claimed: the delivered file may not have said any.
    u32(0);
    u16(1);
    out.set([0, 0, 0, 0, 0x10, 0, 0x80, 0, 0, 0xaa, 0, 0x38, 0x9b, 0x71], at);
    at += 14;
  }
  text("data");
  u32(large ? SIZE_MAX : dataBytes);
  return out;
}
