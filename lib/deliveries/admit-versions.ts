import { and, eq, isNull } from "drizzle-orm";
import type { Tx } from "@/db/client";
import { declarations, deliveryVersions, deliveryWriters } from "@/db/schema/deliveries";
import { insertRecording, type NewRecording, recordingsOfFamily, setHead } from "@/lib/catalogue";
import { assert } from "@/lib/kernel/errors";
import { newId } from "@/lib/kernel/ids";
import { requestScreening } from "@/lib/screening";
import type { DeliveryRow } from "./own-delivery";
import type { Declaration } from "./schemas";
import { CUTDOWN_ROLES } from "./states";

export type VersionRow = typeof deliveryVersions.$inferSelect;

interface Tempo {
  bpm?: number;
}
interface Key {
  key?: string;
  mode?: string;
}

/** A measured version as the catalogue takes it. */
export function recordingOf(version: VersionRow, ending: string): NewRecording {
  assert(version.sha256 && version.facts && version.measures, `${version.id} is not measured`);
  const measures = version.measures as {
    durationS: number;
    integratedLufs?: number | null;
    truePeakDbtp?: number | null;
    rangeLu?: number | null;
    tempo?: Tempo | null;
    key?: Key | null;
  };
  const facts = version.facts as { sampleRateHz: number; bitDepth: number | null; channels: number };
  return {
    versionRole: version.versionRole,
    isrc: version.isrc,
    ending: version.versionRole === "loop" ? "loop-safe" : ending,
    fileKey: version.fileKey,
    fileName: version.fileName,
    fileSha256: version.sha256,
    sampleRateHz: facts.sampleRateHz,
    bitDepth: facts.bitDepth ?? 16,
    channels: facts.channels,
    durationS: measures.durationS,
    loudnessLufs: measures.integratedLufs ?? null,
    truePeakDbtp: measures.truePeakDbtp ?? null,
    loudnessRangeLu: measures.rangeLu ?? null,
    bpmMeasured: measures.tempo?.bpm ?? null,
    keyMeasured: measures.key?.key ? `${measures.key.key} ${measures.key.mode ?? ""}`.trim() : null,
    contour: version.contour,
    soundFeatures: version.soundFeatures,
    sectionLoudness: null,
  };
}

/** Codes of registered loops that a declaration names and shows a paper for. */
export function declaredLoopsOf(declaration: Declaration): string[] {
  return declaration.samples.flatMap((sample) =>
    sample.kind === "registered loop" && sample.loopCode && (sample.paperKey || sample.paperWords)
      ? [sample.loopCode]
      : [],
  );
}

export async function askForScreening(
  tx: Tx,
  args: {
    delivery: DeliveryRow;
    familyId: string;
    version: VersionRow;
    recordingId: string;
    writerIds: string[];
    declaredLoops: string[];
    hasHead: boolean;
    now: Date;
  },
): Promise<void> {
  // A technical return stops listing only: the version keeps it, and is screened all the same.
  const state =
    args.version.state === "returned" ? {} : { state: "screening", stateWords: "Waiting to be screened." };
  await tx
    .update(deliveryVersions)
    .set({ recordingId: args.recordingId, ...state })
    .where(eq(deliveryVersions.id, args.version.id));
  await requestScreening(tx, {
    recordingId: args.recordingId,
    familyId: args.familyId,
    libraryId: args.delivery.libraryId,
    delivererId: args.delivery.delivererId,
    writerIds: args.writerIds,
    declaredLoops: args.declaredLoops,
    expectsFamilyMatch:
      args.hasHead && (CUTDOWN_ROLES as readonly string[]).includes(args.version.versionRole),
    now: args.now,
  });
}

/** A file that takes the place of another after signing joins the family as a recording of its own and is screened. */
export async function screenReplacement(
  tx: Tx,
  args: { delivery: DeliveryRow; versionId: string; now: Date },
): Promise<void> {
  const { delivery, now } = args;
  const [version] = await tx
    .select()
    .from(deliveryVersions)
    .where(and(eq(deliveryVersions.id, args.versionId), isNull(deliveryVersions.replacedBy)));
  if (!version || !delivery.familyId) return;
  const ending = typeof delivery.draft.ending === "string" ? delivery.draft.ending : "cut";
  const recordingId = newId("rec");
  const present = await recordingsOfFamily(tx, delivery.familyId);
  await insertRecording(tx, {
    id: recordingId,
    familyId: delivery.familyId,
    libraryId: delivery.libraryId,
    position: present.length,
    recording: recordingOf(version, ending),
    now,
  });
  if (version.versionRole === "full") await setHead(tx, delivery.familyId, recordingId);
  const writers = await tx
    .select({ personId: deliveryWriters.personId })
    .from(deliveryWriters)
    .where(and(eq(deliveryWriters.deliveryId, delivery.id), eq(deliveryWriters.state, "accepted")));
  const signed = await tx
    .select({ answers: declarations.answers, version: declarations.version })
    .from(declarations)
    .where(eq(declarations.deliveryId, delivery.id));
  const newest = signed.sort((a, b) => b.version - a.version)[0];
  await askForScreening(tx, {
    delivery,
    familyId: delivery.familyId,
    version,
    recordingId,
    writerIds: writers.flatMap((writer) => (writer.personId ? [writer.personId] : [])),
    declaredLoops: newest ? declaredLoopsOf(newest.answers as unknown as Declaration) : [],
    hasHead: true,
    now,
  });
}
