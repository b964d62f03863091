import { count, eq } from "drizzle-orm";
import { z } from "zod";
import type { Tx } from "@/db/client";
import { type notices, reportedWorks } from "@/db/schema/reports";
import { placeHold } from "@/lib/catalogue";
import { enqueue } from "@/lib/jobs";
import { civilDateIn, endOfDay, sameDayOrLast } from "@/lib/kernel/calendar";
import { Conflict, Forbidden, NotFound } from "@/lib/kernel/errors";
import { newId } from "@/lib/kernel/ids";
import { isDuplicateKey } from "@/lib/kernel/transaction";
import { command } from "@/lib/kernel/verb";
import { LEVELS, SetEvidenceLevel } from "./schemas";
import { CONCERNS, type EvidenceLevel, REVIEW_MONTHS } from "./states";

interface Entry {
  code: string;
  title: string;
  concerns: string;
  owner: string;
  level: EvidenceLevel;
  fileKey: string | null;
  noticeId: string | null;
  addedBy: string;
  now: Date;
}

/** REPORTS-4: only a supported or adjudicated entry with a recording joins what deliveries are compared with. */
async function insertEntry(tx: Tx, entry: Entry): Promise<string> {
  const id = newId("rw");
  const reviewAt = endOfDay(sameDayOrLast(civilDateIn(entry.now, "Etc/UTC"), REVIEW_MONTHS), "Etc/UTC");
  const { now, ...columns } = entry;
  try {
    await tx.insert(reportedWorks).values({ id, ...columns, reviewAt, createdAt: now });
  } catch (error) {
    if (isDuplicateKey(error)) throw new Conflict(`${entry.code} is on the list already.`);
    throw error;
  }
  if (entry.fileKey && entry.level !== "claimed")
    await enqueue(
      tx,
      "screening.fingerprintReported",
      { reportedWorkId: id, fileKey: entry.fileKey, turn: 0 },
      { key: id, priority: 10 },
    );
  return id;
}

async function nextCode(tx: Tx): Promise<string> {
  const [row] = await tx.select({ count: count() }).from(reportedWorks);
  return `RW-${String((row?.count ?? 0) + 1).padStart(2, "0")}`;
}

export async function addReported(
  tx: Tx,
  args: { notice: typeof notices.$inferSelect; level: EvidenceLevel; addedBy: string; now: Date },
): Promise<string> {
  const { claim } = args.notice;
  return insertEntry(tx, {
    code: await nextCode(tx),
    title: String(claim.workTitle ?? ""),
    concerns: String(claim.concerns ?? "both"),
    owner: String(claim.owner ?? ""),
    level: args.level,
    fileKey: args.notice.confidentialKey,
    noticeId: args.notice.id,
    addedBy: args.addedBy,
    now: args.now,
  });
}

/** A reported work entered by hand or brought in, with or without a recording; it may hold a cue at once. */
export const addReportedWork = command({
  name: "reports.addReportedWork",
  who: ["moderator", "system"],
  input: z.object({
    code: z.string().regex(/^RW-\d{2,4}$/, "RW- and a number"),
    title: z.string().trim().min(1).max(200),
    concerns: z.enum(CONCERNS),
    owner: z.string().trim().min(2).max(200),
    level: z.enum(LEVELS),
    fileKey: z.string().nullable(),
    holdFamilyId: z.string().nullable().default(null),
  }),
  authorise: async ({ actor }) => {
    if (actor.kind === "moderator" && actor.libraryId !== null)
      throw new Forbidden("Reported works belong to the marketplace's moderators.");
    return null;
  },
  run: async ({ tx, actor, input, now }) => {
    const { holdFamilyId, ...entry } = input;
    const id = await insertEntry(tx, {
      ...entry,
      noticeId: null,
      addedBy: actor.kind === "system" ? "system" : actor.personId,
      now,
    });
    if (holdFamilyId)
      await placeHold(tx, {
        familyId: holdFamilyId,
        cause: "reported work",
        causeId: id,
        reason: "A rights question is open.",
        now,
      });
    return { reportedWorkId: id };
  },
  audit: ({ input, result }) => ({
    subject: result.reportedWorkId,
    detail: { code: input.code, level: input.level },
  }),
});

async function dropFromIndex(tx: Tx, work: { id: string; version: number }): Promise<void> {
  await enqueue(
    tx,
    "screening.dropReported",
    { reportedWorkId: work.id, turn: work.version },
    { key: `${work.id}:${work.version}`, priority: 10 },
  );
}

/** REPORTS-4: an entry lowered to claimed leaves the index; one raised from it joins. */
export const setEvidenceLevel = command({
  name: "reports.setEvidenceLevel",
  who: ["moderator"],
  input: SetEvidenceLevel,
  authorise: async ({ tx, actor, input }) => {
    if (actor.libraryId !== null)
      throw new Forbidden("Reported works belong to the marketplace's moderators.");
    const [row] = await tx
      .select()
      .from(reportedWorks)
      .where(eq(reportedWorks.id, input.reportedWorkId))
      .for("update");
    if (!row) throw new NotFound();
    return row;
  },
  run: async ({ tx, input, subject }) => {
    const isHeldBySound = input.level !== "claimed";
    await tx
      .update(reportedWorks)
      .set({
        level: input.level,
        version: subject.version + 1,
        fingerprinted: isHeldBySound && subject.fingerprinted,
      })
      .where(eq(reportedWorks.id, subject.id));
    if (isHeldBySound && subject.fileKey && !subject.fingerprinted) {
      await enqueue(
        tx,
        "screening.fingerprintReported",
        { reportedWorkId: subject.id, fileKey: subject.fileKey, turn: subject.version },
        { key: `${subject.id}:${subject.version}`, priority: 10 },
      );
    }
    if (!isHeldBySound && subject.fingerprinted) await dropFromIndex(tx, subject);
    return null;
  },
  audit: ({ input }) => ({
    subject: input.reportedWorkId,
    detail: { level: input.level, words: input.words },
  }),
});

export const recordFingerprinted = command({
  name: "reports.recordFingerprinted",
  who: ["system"],
  input: z.object({ reportedWorkId: z.string(), comparable: z.boolean() }),
  authorise: async ({ tx, input }) => {
    const [row] = await tx
      .select()
      .from(reportedWorks)
      .where(eq(reportedWorks.id, input.reportedWorkId))
      .for("update");
    if (!row) throw new NotFound();
    return row;
  },
  run: async ({ tx, input, subject }) => {
    // Lowered while its recording was being read: what has just joined the index leaves it again.
    const isHeldBySound = subject.level !== "claimed";
    await tx
      .update(reportedWorks)
      .set({ fingerprinted: isHeldBySound && input.comparable, version: subject.version + 1 })
      .where(eq(reportedWorks.id, subject.id));
    if (!isHeldBySound) await dropFromIndex(tx, subject);
    return null;
  },
  audit: ({ input }) => ({ subject: input.reportedWorkId, detail: { comparable: input.comparable } }),
});
