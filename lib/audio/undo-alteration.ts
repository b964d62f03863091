import { spawnSync } from "node:child_process";
import { encodeTimeoutMs } from "./encode-flac";
import { runFfmpeg } from "./native";
import { feedBlocks } from "./native-feed";
import type { Segment } from "./segment";
import { SincResampler } from "./sinc-resampler";

const BLOCK = 1 << 15;
let hasRubberband: boolean | null = null;

/** Not every ffmpeg is built with it; asked once a process. */
function rubberbandIsBuiltIn(): boolean {
  hasRubberband ??= / rubberband /.test(
    spawnSync("ffmpeg", ["-hide_banner", "-filters"], { encoding: "utf8" }).stdout ?? "",
  );
  return hasRubberband;
}

/**
 * Undoes a change of tempo and pitch that is no varispeed.
 *
 * Source:  ffmpeg's rubberband filter (phase vocoder) where it is built in; else the pitch is undone by resampling and
 *          the rest of the tempo by ffmpeg's atempo (overlap-add).
 * Input:   speed and pitch of the altered recording against the original
 * Output:  a segment whose time runs as the original's: sample i stands at i / rate / speed seconds into the input.
 *          Its start is off by the filter's delay, which the caller finds by alignment.
 */
export async function undoTempoAndPitch(
  segment: Segment,
  speed: number,
  pitchSemitones: number,
): Promise<Segment> {
  const pitch = 2 ** (-pitchSemitones / 12);
  if (rubberbandIsBuiltIn()) {
    const filter = `rubberband=tempo=${(1 / speed).toFixed(9)}:pitch=${pitch.toFixed(9)}:pitchq=quality:channels=together`;
    return filtered(segment, filter);
  }
  const slowed = { ...segment, left: stretch(segment.left, pitch), right: stretch(segment.right, pitch) };
  // Resampling by `pitch` also made the sound 1/pitch as long; atempo makes up what is missing to speed.
  return filtered(slowed, `atempo=${(1 / (speed * pitch)).toFixed(9)}`);
}

function stretch(samples: Float32Array, samplesPerOutput: number): Float32Array {
  const resampler = new SincResampler({ samplesPerOutput });
  const first = resampler.push(samples);
  const rest = resampler.finish();
  const out = new Float32Array(first.length + rest.length);
  out.set(first);
  out.set(rest, first.length);
  return out;
}

async function filtered(segment: Segment, filter: string): Promise<Segment> {
  const chunks: Uint8Array[] = [];
  const durationS = segment.left.length / segment.sampleRateHz;
  const raw = ["-f", "f32le", "-ar", String(segment.sampleRateHz), "-ac", "2"];
  await runFfmpeg({
    args: [...raw, "-i", "pipe:0", "-af", filter, ...raw, "pipe:1"],
    timeoutMs: encodeTimeoutMs(durationS),
    feed: (stdin) =>
      feedBlocks(stdin, async (write) => {
        for (let i = 0; i < segment.left.length; i += BLOCK) {
          await write([segment.left.subarray(i, i + BLOCK), segment.right.subarray(i, i + BLOCK)]);
        }
      }),
    drain: async (stdout) => {
      for await (const chunk of stdout as AsyncIterable<Uint8Array>) chunks.push(chunk);
    },
  });
  const bytes = Buffer.concat(chunks);
  const frames = Math.floor(bytes.length / 8);
  const left = new Float32Array(frames);
  const right = new Float32Array(frames);
  const view = new DataView(bytes.buffer, bytes.byteOffset, frames * 8);
  for (let i = 0; i < frames; i++) {
    left[i] = view.getFloat32(8 * i, true);
    right[i] = view.getFloat32(8 * i + 4, true);
  }
  return { ...segment, left, right };
}
