import { createHash } from "node:crypto";
import { and, asc, eq, gt, inArray, lte } from "drizzle-orm";
import { z } from "zod";
import type { Reader, Tx } from "@/db/client";
import { indexHead, indexLog, recordingFingerprints } from "@/db/schema/screening";
import { assert } from "@/lib/kernel/errors";
import { newId } from "@/lib/kernel/ids";
import { command, open, query } from "@/lib/kernel/verb";
import { CHANNELS, type Channel, SUBJECT_KINDS, type SubjectKind } from "./states";

export interface FingerprintRow {
  channel: Channel;
  packed: Uint8Array;
  durationS: number;
  contentS: number;
  comparable: boolean;
  notComparable: { startS: number; endS: number; reason: string }[];
}

const StoreFingerprints = z.object({
  subjectKind: z.enum(SUBJECT_KINDS),
  subjectId: z.string(),
  engineVersion: z.int(),
  fileKey: z.string().nullable().default(null),
  rows: z
    .array(
      z.object({
        channel: z.enum(CHANNELS),
        packed: z.custom<Uint8Array>((value) => value instanceof Uint8Array),
        durationS: z.number(),
        contentS: z.number(),
        comparable: z.boolean(),
        notComparable: z.array(z.object({ startS: z.number(), endS: z.number(), reason: z.string() })),
      }),
    )
    .min(1),
});

/** Fingerprints at rest: one packed blob per recording and channel. Storing the same again changes nothing. */
export const storeFingerprints = command({
  name: "screening.storeFingerprints",
  who: ["system"],
  input: StoreFingerprints,
  authorise: open("only the screening worker fingerprints"),
  run: async ({ tx, input, now }) => {
    for (const row of input.rows) {
      const packed = Buffer.from(row.packed);
      const values = {
        subjectKind: input.subjectKind,
        subjectId: input.subjectId,
        engineVersion: input.engineVersion,
        fileKey: input.fileKey,
        ...row,
        packed,
        sha256: createHash("sha256").update(packed).digest("hex"),
        createdAt: now,
      };
      await tx
        .insert(recordingFingerprints)
        .values({ id: newId("fpr"), ...values })
        .onDuplicateKeyUpdate({ set: values });
    }
    return { stored: input.rows.length };
  },
  audit: ({ input, result }) => ({
    subject: input.subjectId,
    detail: { engineVersion: input.engineVersion, ...result },
  }),
});

/** The first read of every admission. Whoever goes on to write also raises it, by `takeSequence`. */
export async function lockHead(tx: Tx): Promise<number> {
  const [head] = await tx
    .select({ seq: indexHead.seq })
    .from(indexHead)
    .where(eq(indexHead.name, "index"))
    .for("update");
  assert(head, "the index has no head row");
  return head.seq;
}

/** Locks and raises the head; the caller writes the log row that belongs to the new number. */
export async function takeSequence(tx: Tx): Promise<number> {
  const seq = (await lockHead(tx)) + 1;
  await tx.update(indexHead).set({ seq }).where(eq(indexHead.name, "index"));
  return seq;
}

/** SCREENING-1: the number was taken under the head row in this transaction, so the log has no gap. */
export async function writeIndexLog(
  tx: Tx,
  row: { seq: number; change: "add" | "remove"; subjectKind: SubjectKind; subjectId: string; now: Date },
): Promise<void> {
  const { now, ...columns } = row;
  await tx.insert(indexLog).values({ ...columns, at: now });
}

export async function headSequence(reader: Reader): Promise<number> {
  const [head] = await reader
    .select({ seq: indexHead.seq })
    .from(indexHead)
    .where(eq(indexHead.name, "index"));
  return head?.seq ?? 0;
}

export async function logAfter(reader: Reader, seq: number, through: number, limit = 500) {
  return reader
    .select({
      seq: indexLog.seq,
      change: indexLog.change,
      subjectKind: indexLog.subjectKind,
      subjectId: indexLog.subjectId,
    })
    .from(indexLog)
    .where(and(gt(indexLog.seq, seq), lte(indexLog.seq, through)))
    .orderBy(asc(indexLog.seq))
    .limit(limit);
}

export async function packedMid(
  reader: Reader,
  subjects: readonly { subjectKind: string; subjectId: string }[],
  engineVersion: number,
) {
  if (subjects.length === 0) return [];
  const rows = await reader
    .select({
      subjectKind: recordingFingerprints.subjectKind,
      subjectId: recordingFingerprints.subjectId,
      packed: recordingFingerprints.packed,
      comparable: recordingFingerprints.comparable,
      durationS: recordingFingerprints.durationS,
    })
    .from(recordingFingerprints)
    .where(
      and(
        inArray(
          recordingFingerprints.subjectId,
          subjects.map((subject) => subject.subjectId),
        ),
        eq(recordingFingerprints.channel, "mid"),
        eq(recordingFingerprints.engineVersion, engineVersion),
      ),
    );
  return rows;
}

const nothing = z.object({});

/** What the worker's index must still take in, up to the head: sequence first, content after. */
export const readIndexChanges = query({
  name: "screening.readIndexChanges",
  who: ["system"],
  input: z.object({ after: z.int(), engineVersion: z.int() }),
  authorise: open("only the screening worker keeps an index"),
  run: async ({ reader, input }) => {
    const head = await headSequence(reader);
    const log = await logAfter(reader, input.after, head);
    const through = log.at(-1)?.seq ?? input.after;
    const adds = log.filter((row) => row.change === "add");
    return { head, through, log, fingerprints: await packedMid(reader, adds, input.engineVersion) };
  },
});

export const readHead = query({
  name: "screening.readHead",
  who: ["system"],
  input: nothing,
  authorise: open("only the screening worker asks"),
  run: async ({ reader }) => headSequence(reader),
});
