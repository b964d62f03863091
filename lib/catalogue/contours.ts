import { inArray } from "drizzle-orm";
import type { Reader } from "@/db/client";
import { recordings } from "@/db/schema/catalogue";
import { packContour, reduceContour, unpackContour } from "@/lib/audio/contour";

const LIST_BINS_PER_S = 4;

/**
 * Measured contours as text that JSON carries, by recording id: the packed bytes of lib/audio in base64. A strip in a
 * list needs four bins a second; the open chart takes them as measured.
 */
export async function contoursOf(
  reader: Reader,
  recordingIds: readonly string[],
  detail: "list" | "full" = "list",
): Promise<Map<string, string>> {
  if (recordingIds.length === 0) return new Map();
  const rows = await reader
    .select({ id: recordings.id, contour: recordings.contour })
    .from(recordings)
    .where(inArray(recordings.id, [...recordingIds]));
  return new Map(
    rows.flatMap(({ id, contour }) => {
      if (!contour) return [];
      if (detail === "full") return [[id, contour.toString("base64")]];
      const measured = unpackContour(contour);
      const thin = reduceContour(measured, Math.ceil(measured.seconds * LIST_BINS_PER_S));
      return [[id, Buffer.from(packContour(thin)).toString("base64")]];
    }),
  );
}
