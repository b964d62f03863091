import type { ContourChannel, ContourData } from "./contour-data";

/** A contour as JSON carries it: each of the contours of each channel as base64, one byte a bin. */
export interface PackedContour {
  seconds: number;
  binsPerSecond: number;
  channels: { peak: string; rms: string; core: string }[];
}

function bytesToText(values: ArrayLike<number>): string {
  let text = "";
  for (let i = 0; i < values.length; i++) text += String.fromCharCode(values[i] ?? 0);
  return btoa(text);
}

function textToBytes(text: string): Uint8Array {
  return Uint8Array.from(atob(text), (letter) => letter.charCodeAt(0));
}

type Join = (values: readonly number[]) => number;

function thinned(values: ArrayLike<number>, every: number, join: Join): number[] {
  return Array.from({ length: Math.ceil(values.length / every) }, (_, i) => {
    const bins = Array.from(
      { length: Math.min(every, values.length - i * every) },
      (_unused, k) => values[i * every + k] ?? 0,
    );
    return Math.round(join(bins));
  });
}

const most: Join = (values) => Math.max(...values);
const meanSquareRoot: Join = (values) => Math.sqrt(values.reduce((sum, v) => sum + v * v, 0) / values.length);
const least: Join = (values) => Math.min(...values);

/** Fewer bins, for strips in a list: the loudest peak, the RMS of all, the quietest core of each `every` bins. */
export function thinContour(data: ContourData, every: number): ContourData {
  return {
    seconds: data.seconds,
    binsPerSecond: data.binsPerSecond / every,
    channels: data.channels.map((channel) => ({
      peak: thinned(channel.peak, every, most),
      rms: thinned(channel.rms, every, meanSquareRoot),
      core: thinned(channel.core, every, least),
    })),
  };
}

export function packContour(data: ContourData): PackedContour {
  return {
    seconds: data.seconds,
    binsPerSecond: data.binsPerSecond,
    channels: data.channels.map((channel) => ({
      peak: bytesToText(channel.peak),
      rms: bytesToText(channel.rms),
      core: bytesToText(channel.core),
    })),
  };
}

export function unpackContour(packed: PackedContour): ContourData {
  return {
    seconds: packed.seconds,
    binsPerSecond: packed.binsPerSecond,
    channels: packed.channels.map(
      (channel): ContourChannel => ({
        peak: textToBytes(channel.peak),
        rms: textToBytes(channel.rms),
        core: textToBytes(channel.core),
      }),
    ),
  };
}
