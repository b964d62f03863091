import { createHash } from "node:crypto";
import { and, eq, gt, inArray, isNull } from "drizzle-orm";
import { z } from "zod";
import type { Tx } from "@/db/client";
import {
  certificates,
  hits,
  indexHead,
  indexLog,
  passages,
  recordingFingerprints,
  registerEntries,
  screeningRequests,
  screeningRuns,
  sharedLoops,
} from "@/db/schema/screening";
import { familiesByIds, recordingsByIds, splitsNow } from "@/lib/catalogue";
import { ENGINE_VERSION } from "@/lib/fingerprint";
import { enqueue } from "@/lib/jobs";
import { Bug, NotFound } from "@/lib/kernel/errors";
import { newId } from "@/lib/kernel/ids";
import { command } from "@/lib/kernel/verb";
import { certificateBody } from "./certificate";
import { screeningEngine } from "./engine/engine";
import type { ReferenceRow } from "./engine/thread";
import { type ExplainedHit, explainHits, type LoopFacts, outcomeOf, type ReferenceFacts } from "./explain";
import { lockHead, takeSequence, writeIndexLog } from "./fingerprints";
import { FoundHit } from "./found";
import type { Channel, SubjectKind } from "./states";

/** More than this were admitted since the search: let go of the head and search again. */
const RECHECK_MAX = 50;
/** Not admitted: too much came in meanwhile. The caller searches again. */
export const AGAIN = "again" as const;

const AdmitRecording = z.object({
  recordingId: z.string(),
  engineVersion: z.int(),
  seqSearched: z.int().min(0),
  recordingsCompared: z.int().min(0),
  hoursCompared: z.number().min(0),
  thresholds: z.record(z.string(), z.unknown()),
  found: z.array(FoundHit),
  startedAt: z.date(),
});
type AdmitRecording = z.infer<typeof AdmitRecording>;

/**
 * SCREENING-2: a recording is admitted only after comparison with everything admitted before it. The search ran without
 * a lock as of `seqSearched`; under the head row only the recordings admitted since are compared again.
 */
export const admitRecording = command({
  name: "screening.admitRecording",
  who: ["system"],
  input: AdmitRecording,
  guard: async ({ tx }) => void (await lockHead(tx)),
  authorise: async ({ tx, input }) => {
    const seq = await takeSequence(tx);
    const [request] = await tx
      .select()
      .from(screeningRequests)
      .where(eq(screeningRequests.recordingId, input.recordingId));
    const [recording] = await recordingsByIds(tx, [input.recordingId]);
    if (!request || !recording) throw new NotFound();
    return { seq, request, recording };
  },
  run: async ({ tx, input, subject, now }): Promise<{ runId: string; outcome: string } | typeof AGAIN> => {
    const since = await tx
      .select({
        seq: indexLog.seq,
        change: indexLog.change,
        subjectKind: indexLog.subjectKind,
        subjectId: indexLog.subjectId,
      })
      .from(indexLog)
      .where(gt(indexLog.seq, input.seqSearched));
    const added = since.filter((row) => row.change === "add" && row.subjectId !== input.recordingId);
    if (added.length > RECHECK_MAX) return undoSequence(tx, subject.seq);
    const late = await compareLate(tx, input.recordingId, added);
    const found = [
      ...input.found.filter((hit) => !late.some((other) => other.subjectId === hit.subjectId)),
      ...late,
    ];
    const facts = await gatherFacts(tx, found);
    const explained = explainHits(found, {
      ...facts,
      delivery: { ...subject.request, durationS: subject.recording.durationS },
    });
    const compared = input.recordingsCompared + added.filter((row) => row.subjectKind === "recording").length;
    const { prints, mid, verdict } = await judge(tx, {
      input,
      explained,
      compared,
      expectsFamilyMatch: subject.request.expectsFamilyMatch,
    });
    const run = await replaceRun(tx, { input, seqAdmitted: subject.seq, compared, verdict, now });
    await writeHits(tx, {
      runId: run.id,
      recordingId: input.recordingId,
      hits: explained,
      references: facts.references,
      now,
    });
    await writeCertificate(tx, {
      run,
      recording: subject.recording,
      hits: explained,
      channels: prints.map((row) => row.channel),
      notComparable: mid.notComparable,
      now,
    });
    await writeIndexLog(tx, {
      seq: subject.seq,
      change: "add",
      subjectKind: "recording",
      subjectId: input.recordingId,
      now,
    });
    await enqueue(
      tx,
      "delivery.afterScreening",
      { recordingId: input.recordingId, runId: run.id },
      { key: run.id, priority: 15 },
    );
    return { runId: run.id, outcome: verdict.outcome };
  },
  audit: ({ input, result, subject }) => ({
    subject: input.recordingId,
    libraryId: subject.recording.libraryId,
    detail: result === AGAIN ? { again: true } : { ...result },
  }),
});

/** What the fingerprints at rest allow to be said, and what the hits then add up to. */
async function judge(
  tx: Tx,
  args: {
    input: AdmitRecording;
    explained: readonly ExplainedHit[];
    compared: number;
    expectsFamilyMatch: boolean;
  },
) {
  const { input, explained } = args;
  const prints = await tx
    .select({
      channel: recordingFingerprints.channel,
      comparable: recordingFingerprints.comparable,
      notComparable: recordingFingerprints.notComparable,
      durationS: recordingFingerprints.durationS,
      contentS: recordingFingerprints.contentS,
    })
    .from(recordingFingerprints)
    .where(
      and(
        eq(recordingFingerprints.subjectId, input.recordingId),
        eq(recordingFingerprints.engineVersion, input.engineVersion),
      ),
    );
  const mid = prints.find((row) => row.channel === "mid");
  if (!mid) throw new Bug(`${input.recordingId} is admitted without a fingerprint`);
  const comparable = prints.some((row) => row.comparable);
  const familyMatchMissing =
    args.expectsFamilyMatch && comparable && !explained.some((hit) => hit.explainedBy === "family");
  const verdict = outcomeOf(explained, {
    comparable,
    reason: reasonOf(mid),
    recordingsCompared: args.compared,
    familyMatchMissing,
  });
  return { prints, mid, verdict };
}

/** A run is superseded, never overwritten. */
async function replaceRun(
  tx: Tx,
  args: {
    input: AdmitRecording;
    seqAdmitted: number;
    compared: number;
    verdict: ReturnType<typeof outcomeOf>;
    now: Date;
  },
) {
  const { input, verdict } = args;
  const run = {
    id: newId("run"),
    recordingId: input.recordingId,
    engineVersion: input.engineVersion,
    seqSearched: input.seqSearched,
    seqAdmitted: args.seqAdmitted,
    recordingsCompared: args.compared,
    hoursCompared: input.hoursCompared,
    thresholds: input.thresholds,
    outcome: verdict.outcome,
    outcomeWords: verdict.words.slice(0, 500),
    startedAt: input.startedAt,
    finishedAt: args.now,
  };
  await tx
    .update(screeningRuns)
    .set({ supersededBy: run.id })
    .where(and(eq(screeningRuns.recordingId, input.recordingId), isNull(screeningRuns.supersededBy)));
  await tx.insert(screeningRuns).values(run);
  return run;
}

/** The number was taken to hold the lock; nothing was admitted, so it is given back and the log stays gapless. */
async function undoSequence(tx: Tx, seq: number): Promise<typeof AGAIN> {
  await tx
    .update(indexHead)
    .set({ seq: seq - 1 })
    .where(eq(indexHead.name, "index"));
  return AGAIN;
}

async function compareLate(
  tx: Tx,
  recordingId: string,
  added: readonly { subjectKind: string; subjectId: string }[],
): Promise<FoundHit[]> {
  if (added.length === 0) return [];
  const rows = await tx
    .select({
      subjectKind: recordingFingerprints.subjectKind,
      subjectId: recordingFingerprints.subjectId,
      channel: recordingFingerprints.channel,
      packed: recordingFingerprints.packed,
    })
    .from(recordingFingerprints)
    .where(
      and(
        inArray(recordingFingerprints.subjectId, [recordingId, ...added.map((row) => row.subjectId)]),
        eq(recordingFingerprints.engineVersion, ENGINE_VERSION),
      ),
    );
  const query = rows
    .filter((row) => row.subjectId === recordingId)
    .map((row) => ({ channel: row.channel as Channel, packed: new Uint8Array(row.packed) }));
  const references: ReferenceRow[] = rows
    .filter((row) => row.subjectId !== recordingId && row.channel === "mid")
    .map((row) => ({
      subjectKind: row.subjectKind as SubjectKind,
      subjectId: row.subjectId,
      packed: new Uint8Array(row.packed),
    }));
  return screeningEngine().matchDirect({ query, references });
}

async function gatherFacts(tx: Tx, found: readonly FoundHit[]) {
  const recordings = await recordingsByIds(
    tx,
    found.filter((hit) => hit.subjectKind === "recording").map((hit) => hit.subjectId),
  );
  const families = new Map(
    (await familiesByIds(tx, [...new Set(recordings.map((recording) => recording.familyId))])).map(
      (family) => [family.id, family],
    ),
  );
  const writers = await splitsNow(tx, [...families.keys()]);
  const references = new Map<string, ReferenceFacts>();
  for (const recording of recordings) {
    const family = families.get(recording.familyId);
    references.set(`recording:${recording.id}`, {
      familyId: recording.familyId,
      libraryId: recording.libraryId,
      writerIds:
        writers
          .get(recording.familyId)
          ?.flatMap((share) => (share.personId && share.acceptedAt ? [share.personId] : [])) ?? [],
      title: family?.title ?? "",
    });
  }
  const loopIds = found.filter((hit) => hit.subjectKind === "loop").map((hit) => hit.subjectId);
  const loopRows = loopIds.length
    ? await tx.select().from(sharedLoops).where(inArray(sharedLoops.id, loopIds))
    : [];
  const loops = new Map<string, LoopFacts>(loopRows.map((row) => [row.id, row]));
  const otherTitles = await tx.select().from(registerEntries).where(eq(registerEntries.kind, "other title"));
  return { references, loops, otherTitles };
}

async function writeHits(
  tx: Tx,
  args: {
    runId: string;
    recordingId: string;
    hits: readonly ExplainedHit[];
    references: ReadonlyMap<string, ReferenceFacts>;
    now: Date;
  },
): Promise<void> {
  for (const hit of args.hits) {
    const id = newId("hit");
    const reference = args.references.get(`${hit.subjectKind}:${hit.subjectId}`);
    await tx.insert(hits).values({
      id,
      runId: args.runId,
      recordingId: args.recordingId,
      referenceKind: hit.subjectKind,
      referenceId: hit.subjectId,
      referenceFamilyId: reference?.familyId ?? null,
      referenceLibraryId: reference?.libraryId ?? null,
      relation: hit.relation,
      band: hit.band,
      explainedBy: hit.explainedBy,
      explanation: hit.explanation?.slice(0, 500) ?? null,
      evidence: hit.evidence,
      evidence2: hit.evidence2,
      chance: hit.chance,
      speed: hit.speed,
      pitchSemitones: hit.pitchSemitones,
      coverageRecording: hit.coverageQuery,
      coverageReference: hit.coverageReference,
      channel: hit.channel,
      reversed: hit.reversed,
      lowDistinctiveness: hit.lowDistinctiveness,
      createdAt: args.now,
    });
    await tx.insert(passages).values(
      hit.passages.map((passage, index) => ({
        ...passage,
        id: newId("pas"),
        hitId: id,
        number: index + 1,
      })),
    );
  }
}

async function writeCertificate(
  tx: Tx,
  args: Parameters<typeof certificateBody>[0] & { now: Date },
): Promise<void> {
  const body = certificateBody(args);
  await tx.insert(certificates).values({
    id: newId("cer"),
    recordingId: args.run.recordingId,
    runId: args.run.id,
    body,
    sha256: createHash("sha256").update(JSON.stringify(body)).digest("hex"),
    issuedAt: args.now,
  });
}

function reasonOf(mid: { durationS: number; contentS: number }): string {
  return mid.contentS < 5
    ? `only ${mid.contentS.toFixed(1)} s of it carry sound that can be compared`
    : "it carries too few landmarks";
}
