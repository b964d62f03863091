import { z } from "zod";
import { familyById, openHolds, recordingsOfFamily } from "@/lib/catalogue";
import { EVERYONE } from "@/lib/kernel/actor";
import { NotFound } from "@/lib/kernel/errors";
import { query } from "@/lib/kernel/verb";
import { certificateOf, hitsOf } from "./for-rooms";

export interface CutPiece {
  /** [fromS, toS) of the version lies at atS of the head. */
  fromS: number;
  toS: number;
  atS: number;
}

export interface ScreeningOfCue {
  /** Of the head; null where it has not been screened here. */
  certificate: { issuedAt: string; words: string; recordings: number; hours: number; limits: string } | null;
  /** Where the pieces of each shorter version come from, as measured when it was screened. */
  pieces: Record<string, CutPiece[]>;
}

/** A version this much shorter than its head was cut from it. */
const CUT_LEAST_S = 1;

/** What a listed cue's page says of its screening, and how its cutdowns lie in it. */
export const getScreeningOfCue = query({
  name: "screening.getScreeningOfCue",
  who: EVERYONE,
  input: z.object({ familyId: z.string().max(40) }),
  authorise: async ({ reader, input }) => {
    const family = await familyById(reader, input.familyId);
    if (family?.state !== "listed" || (await openHolds(reader, family.id)).length > 0) throw new NotFound();
    return family;
  },
  run: async ({ reader, subject: family }): Promise<ScreeningOfCue> => {
    const listed = (await recordingsOfFamily(reader, family.id)).filter((row) => row.state === "listed");
    const head = listed.find((row) => row.id === family.headRecordingId);
    if (!head) return { certificate: null, pieces: {} };
    const certificate = await certificateOf(reader, head.id);
    const cuts = listed.filter((row) => head.durationS - row.durationS > CUT_LEAST_S);
    const hits = await hitsOf(
      reader,
      [head, ...cuts].map((row) => row.id),
    );
    const pieces: Record<string, CutPiece[]> = {};
    for (const cut of cuts) {
      // Whichever of the two was screened later has the other as its reference.
      const own = hits.find((hit) => hit.recordingId === cut.id && hit.referenceId === head.id);
      const other = hits.find((hit) => hit.recordingId === head.id && hit.referenceId === cut.id);
      const found =
        own?.passages.map((row) => ({ fromS: row.startS, toS: row.endS, atS: row.refStartS })) ??
        other?.passages.map((row) => ({ fromS: row.refStartS, toS: row.refEndS, atS: row.startS }));
      if (found && found.length > 0) pieces[cut.id] = found.sort((a, b) => a.fromS - b.fromS);
    }
    return { certificate: certificate ? publicPart(certificate.issuedAt, certificate.body) : null, pieces };
  },
});

function publicPart(issuedAt: Date, body: unknown): ScreeningOfCue["certificate"] {
  const parsed = z
    .looseObject({
      words: z.string(),
      limits: z.string(),
      index: z.looseObject({ recordings: z.number(), hours: z.number() }),
    })
    .safeParse(body);
  if (!parsed.success) return null;
  const { words, limits, index } = parsed.data;
  return {
    issuedAt: issuedAt.toISOString(),
    words,
    recordings: index.recordings,
    hours: index.hours,
    limits,
  };
}
