import { and, eq } from "drizzle-orm";
import { z } from "zod";
import type { Reader } from "@/db/client";
import { catalogueEvents, families, recordings, splitShares, splitVersions } from "@/db/schema/catalogue";
import { type Actor, EVERYONE } from "@/lib/kernel/actor";
import { NotFound } from "@/lib/kernel/errors";
import { query } from "@/lib/kernel/verb";
import { openHolds } from "./change-state";

const TYPES: Record<string, string> = {
  wav: "audio/wav",
  flac: "audio/flac",
  aif: "audio/aiff",
  aiff: "audio/aiff",
  mp3: "audio/mpeg",
  m4a: "audio/mp4",
  ogg: "audio/ogg",
  opus: "audio/ogg",
};

/**
 * CATALOGUE-4: everybody hears the preview of what is on sale. What is pending, held or refused is heard by its writers,
 * by who delivered it and by its library's owner, staff and moderators; to all others it does not exist.
 */
export const hearRecording = query({
  name: "catalogue.hearRecording",
  who: EVERYONE,
  input: z.object({ recordingId: z.string() }),
  authorise: async ({ reader, actor, input }) => {
    const [row] = await reader
      .select({ recording: recordings, familyState: families.state })
      .from(recordings)
      .innerJoin(families, eq(families.id, recordings.familyId))
      .where(eq(recordings.id, input.recordingId));
    if (!row) throw new NotFound();
    const { recording } = row;
    const isOwn = await isOwnRecording(reader, actor, recording);
    const isListed = recording.state === "listed" && row.familyState === "listed";
    if (!isOwn && !(isListed && (await openHolds(reader, recording.familyId)).length === 0))
      throw new NotFound();
    if (recording.previewKey === null && !isOwn)
      throw new NotFound("Its preview is still being made. Please try again in a minute.");
    return recording;
  },
  /** For the route that streams it. The key is never sent on. */
  run: async ({ subject }) => {
    if (subject.previewKey !== null) return { fileKey: subject.previewKey, type: "audio/mpeg" };
    const extension = subject.fileName.split(".").at(-1)?.toLowerCase() ?? "";
    return { fileKey: subject.fileKey, type: TYPES[extension] ?? "application/octet-stream" };
  },
});

async function isOwnRecording(
  reader: Reader,
  actor: Actor,
  recording: { familyId: string; libraryId: string },
): Promise<boolean> {
  if (actor.kind === "system") return true;
  if (actor.kind === "owner" || actor.kind === "staff" || actor.kind === "moderator")
    return actor.libraryId === recording.libraryId;
  if (actor.kind !== "composer" || actor.libraryId !== recording.libraryId) return false;
  const [delivered] = await reader
    .select({ id: catalogueEvents.id })
    .from(catalogueEvents)
    .where(
      and(
        eq(catalogueEvents.familyId, recording.familyId),
        eq(catalogueEvents.personId, actor.personId),
        eq(catalogueEvents.toState, "pending"),
      ),
    );
  if (delivered) return true;
  const [writes] = await reader
    .select({ id: splitShares.id })
    .from(splitShares)
    .innerJoin(splitVersions, eq(splitVersions.id, splitShares.splitVersionId))
    .where(and(eq(splitVersions.familyId, recording.familyId), eq(splitShares.personId, actor.personId)));
  return writes !== undefined;
}
