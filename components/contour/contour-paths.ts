import type { ContourData } from "./contour-data";

/** Path coordinates are tenths of a pixel, so that whole numbers are fine enough to draw with. */
export const UNITS_PER_PX = 10;

const ISLAND_PX = 0.35;
const CORE_ISLAND_PX = 0.6;

export interface ContourFrame {
  /** The drawing's width; or leave it out and give pxPerSecond. */
  width?: number;
  height: number;
  fromS?: number;
  toS?: number;
  pxPerSecond?: number;
  /** Pixels between the points of a contour. */
  stepPx?: number;
  /** A fixed factor for strips that are drawn on another recording's scale; 1 is full scale to the edge. */
  gain?: number;
}

export interface ContourPaths {
  peak: string;
  rms: string;
  core: string;
  viewWidth: number;
  viewHeight: number;
}

type Contour = "peak" | "rms" | "core";
type Reduce = (values: ArrayLike<number>, from: number, to: number) => number;

const greatest: Reduce = (values, from, to) => {
  let most = 0;
  for (let i = from; i < to; i++) most = Math.max(most, values[i] ?? 0);
  return most;
};

const rootMeanSquare: Reduce = (values, from, to) => {
  let sum = 0;
  for (let i = from; i < to; i++) sum += (values[i] ?? 0) ** 2;
  return Math.sqrt(sum / Math.max(1, to - from));
};

const mean: Reduce = (values, from, to) => {
  let sum = 0;
  for (let i = from; i < to; i++) sum += values[i] ?? 0;
  return sum / Math.max(1, to - from);
};

const REDUCE: Record<Contour, Reduce> = { peak: greatest, rms: rootMeanSquare, core: mean };

function between(values: ArrayLike<number>, bin: number): number {
  const at = Math.min(Math.max(bin - 0.5, 0), Math.max(0, values.length - 1));
  const low = values[Math.floor(at)] ?? 0;
  const high = values[Math.min(Math.floor(at) + 1, values.length - 1)] ?? 0;
  return low + (high - low) * (at - Math.floor(at));
}

function columns(
  values: ArrayLike<number>,
  reduce: Reduce,
  fromBin: number,
  toBin: number,
  count: number,
): number[] {
  const step = (toBin - fromBin) / count;
  return Array.from({ length: count }, (_, i) => {
    const start = fromBin + i * step;
    if (step < 1) return between(values, start + step / 2);
    const first = Math.min(Math.floor(start + 1e-9), Math.max(0, values.length - 1));
    return reduce(
      values,
      first,
      Math.min(Math.max(first + 1, Math.floor(start + step + 1e-9)), values.length),
    );
  });
}

function smoothed(values: readonly number[]): number[] {
  return values.map((value, i) => ((values[i - 1] ?? value) + 2 * value + (values[i + 1] ?? value)) / 4);
}

function lower(values: readonly number[], ceiling: readonly number[]): number[] {
  return values.map((value, i) => Math.min(value, ceiling[i] ?? 0));
}

function join(numbers: readonly number[]): string {
  return numbers.reduce((text, n, i) => text + (i > 0 && n >= 0 ? " " : "") + n, "");
}

type Point = readonly [x: number, y: number];

/**
 * A quadratic B-spline from `start` to `end` with the given control points, as relative path commands. Control
 * coordinates are even, so the joints half-way between them are whole and `t` repeats each control exactly.
 */
function spline(start: Point, controls: readonly Point[], end: Point): string {
  const joints = controls.slice(0, -1).map((c, i): Point => {
    const next = controls[i + 1] ?? c;
    return [(c[0] + next[0]) / 2, (c[1] + next[1]) / 2];
  });
  joints.push(end);
  const first = controls[0] ?? end;
  const to = joints[0] ?? end;
  const head = `q${join([first[0] - start[0], first[1] - start[1], to[0] - start[0], to[1] - start[1]])}`;
  const rest = joints.slice(1).flatMap((joint, i) => {
    const from = joints[i] ?? joint;
    return [joint[0] - from[0], joint[1] - from[1]];
  });
  return rest.length > 0 ? `${head}t${join(rest)}` : head;
}

function even(value: number): number {
  return 2 * Math.round(value / 2);
}

interface Sides {
  left: readonly number[];
  right: readonly number[];
}

/** Closed smooth shapes, one for every stretch where the two sides together are thicker than `least`. */
function islands({ left, right }: Sides, viewWidth: number, mid: number, least: number): string {
  const count = left.length;
  const step = viewWidth / count;
  const isLand = (i: number) => (left[i] ?? 0) + (right[i] ?? 0) >= least;
  let path = "";
  let i = 0;
  while (i < count) {
    if (!isLand(i)) {
      i++;
      continue;
    }
    const first = i;
    while (i < count && isLand(i)) i++;
    const start: Point = [even(first * step), mid];
    const end: Point = [even(i * step), mid];
    const above: Point[] = [];
    const below: Point[] = [];
    for (let k = first; k < i; k++) {
      const x = even((k + 0.5) * step);
      above.push([x, mid - even(Math.max(2, left[k] ?? 0))]);
      below.unshift([x, mid + even(Math.max(2, right[k] ?? 0))]);
    }
    path += `M${start[0]} ${mid}${spline(start, above, end)}${spline(end, below, start)}z`;
  }
  return path;
}

/** The three nested contours of a stretch of a recording as SVG paths: left above the middle, right below. */
export function contourPaths(data: ContourData, frame: ContourFrame): ContourPaths {
  const fromS = frame.fromS ?? 0;
  const toS = frame.toS ?? data.seconds;
  const width = frame.width ?? (toS - fromS) * (frame.pxPerSecond ?? 5);
  const count = Math.max(4, Math.round(width / (frame.stepPx ?? 2.4)));
  const viewWidth = even(width * UNITS_PER_PX);
  const viewHeight = 2 * even((frame.height * UNITS_PER_PX) / 2);
  const mid = viewHeight / 2;
  const scale = ((frame.gain ?? 1) * mid) / 255;

  const side = (index: number) => {
    const channel = data.channels[index] ?? data.channels[0];
    const read = (contour: Contour) =>
      columns(
        channel?.[contour] ?? [],
        REDUCE[contour],
        fromS * data.binsPerSecond,
        toS * data.binsPerSecond,
        count,
      ).map((value) => Math.min(mid, value * scale));
    const peak = read("peak");
    const rms = lower(smoothed(read("rms")), peak);
    return { peak, rms, core: lower(smoothed(read("core")), rms) };
  };
  const left = side(0);
  const right = side(1);
  const draw = (contour: Contour, leastPx: number) =>
    islands({ left: left[contour], right: right[contour] }, viewWidth, mid, leastPx * UNITS_PER_PX);
  return {
    peak: draw("peak", ISLAND_PX),
    rms: draw("rms", ISLAND_PX),
    core: draw("core", CORE_ISLAND_PX),
    viewWidth,
    viewHeight,
  };
}
