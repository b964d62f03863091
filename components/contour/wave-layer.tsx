"use client";

import { useEffect, useRef } from "react";
import WaveSurfer from "wavesurfer.js";
import { useNonce } from "@/components/ui/ui-provider";
import { percent } from "./axis";
import type { ContourData } from "./contour-data";
import { type ContourPaths, contourPaths } from "./contour-paths";

interface WaveLayerProps {
  media: HTMLMediaElement;
  data: ContourData;
  height: number;
  /** Seconds that fill the parent's width. */
  scaleS: number;
  /** The stretch of the recording that the media holds; all of it if left out. */
  fromS?: number;
  toS?: number;
  /** Leaves the drawing to what lies beneath, and only takes presses and drags. */
  undrawn?: boolean;
  onDrawn?: () => void;
}

function paint(
  ctx: CanvasRenderingContext2D,
  paths: ContourPaths,
  wholePx: number,
  colours: CSSStyleDeclaration,
): void {
  const { canvas } = ctx;
  const tilePx = Number.parseFloat(canvas.style.width) || wholePx;
  const leftPx = Number.parseFloat(canvas.style.left) || 0;
  const density = canvas.width / tilePx;
  const place = new DOMMatrix()
    .translate(-leftPx * density, 0)
    .scale((wholePx * density) / paths.viewWidth, canvas.height / paths.viewHeight);
  const shape = (d: string): Path2D => {
    const placed = new Path2D();
    placed.addPath(new Path2D(d), place);
    return placed;
  };
  const colour = (name: string) => colours.getPropertyValue(name).trim();
  ctx.lineJoin = "round";
  ctx.strokeStyle = colour("--color-contour-edge");
  ctx.lineWidth = density;
  ctx.stroke(shape(`M0 ${paths.viewHeight / 2}H${paths.viewWidth}`));
  const peak = shape(paths.peak);
  ctx.fillStyle = colour("--color-shoal-2");
  ctx.fill(peak);
  ctx.stroke(peak);
  const rms = shape(paths.rms);
  ctx.fillStyle = colour("--color-shoal-3");
  ctx.fill(rms);
  ctx.lineWidth = 0.8 * density;
  ctx.stroke(rms);
  ctx.fillStyle = colour("--color-depth");
  ctx.fill(shape(paths.core));
}

/** The playing strip, drawn and pressed through wavesurfer over the site's own audio element. */
export function WaveLayer(props: WaveLayerProps) {
  const { media, data, height, scaleS, fromS = 0, toS = data.seconds, undrawn, onDrawn } = props;
  const place = useRef<HTMLDivElement>(null);
  const nonce = useNonce();
  const drawn = useRef(onDrawn);
  useEffect(() => {
    drawn.current = onDrawn;
  });
  useEffect(() => {
    const container = place.current;
    if (!container) return;
    const paths = contourPaths(data, { width: container.clientWidth || 760, height, fromS, toS });
    const wave = WaveSurfer.create({
      container,
      media,
      height,
      duration: toS - fromS,
      peaks: data.channels.map((channel) => Float32Array.from(channel.peak, (value) => value / 255)),
      cursorWidth: 0,
      progressColor: "transparent",
      hideScrollbar: true,
      autoScroll: false,
      dragToSeek: true,
      renderFunction: (_peaks, ctx) => {
        if (!undrawn) paint(ctx, paths, container.clientWidth, getComputedStyle(container));
      },
      ...(nonce ? { cspNonce: nonce } : {}),
    });
    const off = wave.on("redrawcomplete", () => drawn.current?.());
    const scheme = window.matchMedia("(prefers-color-scheme: dark)");
    const redraw = () => wave.setOptions({ height });
    scheme.addEventListener("change", redraw);
    return () => {
      scheme.removeEventListener("change", redraw);
      off();
      wave.destroy();
    };
  }, [media, data, height, fromS, toS, undrawn, nonce]);
  return (
    <div
      aria-hidden
      className="wave-layer absolute inset-y-0"
      ref={place}
      style={{ left: percent(fromS, scaleS), width: percent(toS - fromS, scaleS) }}
    />
  );
}
