import { packContour, unpackContour } from "@/lib/audio/contour";

export interface Span {
  fromS: number;
  toS: number;
}

/** A contour with everything outside the allowed spans taken out; null spans allow all of it. */
export function drawnContour(packed: Buffer | null, spans: readonly Span[] | null): string | null {
  if (!packed) return null;
  if (spans === null) return packed.toString("base64");
  const contour = unpackContour(new Uint8Array(packed));
  for (const channel of contour.channels) {
    for (const values of [channel.peak, channel.rms, channel.core]) {
      for (let bin = 0; bin < values.length; bin++) {
        const atS = bin / contour.binsPerSecond;
        if (!spans.some((span) => atS >= span.fromS && atS <= span.toS)) values[bin] = 0;
      }
    }
  }
  return Buffer.from(packContour(contour)).toString("base64");
}
