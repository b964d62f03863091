import { asc, desc, eq, ne } from "drizzle-orm";
import { z } from "zod";
import { noticeEvents, notices, reportedWorks } from "@/db/schema/reports";
import { familyById } from "@/lib/catalogue";
import { EVERYONE } from "@/lib/kernel/actor";
import { addBusinessDays, civilDateIn, endOfDay } from "@/lib/kernel/calendar";
import { Forbidden, Invalid, NotFound } from "@/lib/kernel/errors";
import { openField } from "@/lib/kernel/field-crypto";
import { UK_HOLIDAYS } from "@/lib/kernel/holidays";
import { command, query } from "@/lib/kernel/verb";
import { type ClaimOfNotice, MISTYPED, receiptNumberOf } from "./schemas";
import { TRIAGE_WORKING_DAYS } from "./states";

/** Status by receipt number, without an account: what happened and when; no name, no address, no library's data. */
export const getNoticeStatus = query({
  name: "reports.getNoticeStatus",
  who: EVERYONE,
  input: z.object({ receiptNumber: z.string().trim().max(40) }),
  authorise: async ({ reader, input }) => {
    const receiptNumber = receiptNumberOf(input.receiptNumber);
    if (!receiptNumber) throw new Invalid(MISTYPED);
    const [row] = await reader.select().from(notices).where(eq(notices.receiptNumber, receiptNumber));
    if (!row) throw new NotFound("There is no report of this number.");
    return row;
  },
  run: async ({ reader, subject }) => {
    const events = await reader
      .select({ words: noticeEvents.words, at: noticeEvents.at, visible: noticeEvents.visibleToReporter })
      .from(noticeEvents)
      .where(eq(noticeEvents.noticeId, subject.id))
      .orderBy(asc(noticeEvents.at));
    return {
      noticeId: subject.id,
      receiptNumber: subject.receiptNumber,
      workTitle: String(subject.claim.workTitle ?? ""),
      state: subject.state,
      outcome: subject.outcome,
      reasons: subject.state === "decided" || subject.state === "incomplete" ? subject.reasons : null,
      receivedAt: subject.receivedAt,
      decidedAt: subject.decidedAt,
      addressConfirmed: subject.emailConfirmedAt !== null,
      expectsRecording: Boolean(subject.claim.hasRecording) && subject.confidentialKey === null,
      events: events.filter((event) => event.visible).map(({ words, at }) => ({ words, at })),
    };
  },
});

export type NoticeStatus = Awaited<ReturnType<typeof getNoticeStatus>>;

const marketplaceOnly = async ({ actor }: { actor: { libraryId: string | null } }) => {
  if (actor.libraryId !== null) throw new Forbidden("Reported works belong to the marketplace's moderators.");
  return null;
};

/** The first reading is due at the end of the next working day. */
const firstReadingBy = (receivedAt: Date) =>
  endOfDay(
    addBusinessDays(civilDateIn(receivedAt, "Europe/London"), TRIAGE_WORKING_DAYS, UK_HOLIDAYS),
    "Europe/London",
  );

/** Reports and the blocklist: what is open first, oldest first. */
export const listReports = query({
  name: "reports.listReports",
  who: ["moderator"],
  input: z.object({}),
  authorise: marketplaceOnly,
  run: async ({ reader }) => {
    const open = await reader
      .select()
      .from(notices)
      .where(ne(notices.state, "decided"))
      .orderBy(asc(notices.receivedAt))
      .limit(300);
    const decided = await reader
      .select()
      .from(notices)
      .where(eq(notices.state, "decided"))
      .orderBy(desc(notices.decidedAt))
      .limit(300);
    const works = await reader.select().from(reportedWorks).orderBy(asc(reportedWorks.code)).limit(500);
    return {
      notices: [...open, ...decided].map((row) => ({
        id: row.id,
        receiptNumber: row.receiptNumber,
        workTitle: String(row.claim.workTitle ?? ""),
        state: row.state,
        outcome: row.outcome,
        receivedAt: row.receivedAt,
        dueAt: firstReadingBy(row.receivedAt),
        decidedAt: row.decidedAt,
        addressConfirmed: row.emailConfirmedAt !== null,
        hasRecording: row.confidentialKey !== null,
      })),
      works: works.map((row) => ({
        id: row.id,
        code: row.code,
        title: row.title,
        concerns: row.concerns,
        owner: row.owner,
        level: row.level,
        hasRecording: row.fileKey !== null,
        fingerprinted: row.fingerprinted,
        reviewAt: row.reviewAt,
        createdAt: row.createdAt,
        removedAt: row.removedAt,
      })),
    };
  },
});

export type ReportList = Awaited<ReturnType<typeof listReports>>;

/** REPORTS-2: the reporter's contact reaches the marketplace's moderators and nobody else. */
export const getReport = query({
  name: "reports.getReport",
  who: ["moderator"],
  input: z.object({ noticeId: z.string() }),
  authorise: async ({ reader, actor, input }) => {
    await marketplaceOnly({ actor });
    const [row] = await reader.select().from(notices).where(eq(notices.id, input.noticeId));
    if (!row) throw new NotFound();
    return row;
  },
  run: async ({ reader, subject }) => {
    const events = await reader
      .select()
      .from(noticeEvents)
      .where(eq(noticeEvents.noticeId, subject.id))
      .orderBy(asc(noticeEvents.at));
    const earlier = await reader
      .select({
        receiptNumber: notices.receiptNumber,
        state: notices.state,
        outcome: notices.outcome,
        id: notices.id,
      })
      .from(notices)
      .where(eq(notices.emailHash, subject.emailHash));
    const [work] = subject.reportedWorkId
      ? await reader
          .select({
            id: reportedWorks.id,
            code: reportedWorks.code,
            level: reportedWorks.level,
            fingerprinted: reportedWorks.fingerprinted,
          })
          .from(reportedWorks)
          .where(eq(reportedWorks.id, subject.reportedWorkId))
      : [];
    const family = subject.targetFamilyId ? await familyById(reader, subject.targetFamilyId) : null;
    return {
      id: subject.id,
      receiptNumber: subject.receiptNumber,
      state: subject.state,
      outcome: subject.outcome,
      reasons: subject.reasons,
      receivedAt: subject.receivedAt,
      dueAt: firstReadingBy(subject.receivedAt),
      decidedAt: subject.decidedAt,
      work: work ?? null,
      claim: subject.claim as unknown as ClaimOfNotice,
      contact: JSON.parse(openField(subject.contact.toString(), `notice:${subject.id}`)) as {
        name: string;
        capacity: string;
        email: string;
        countryCode: string;
        postal: string;
        signedName: string;
      },
      addressConfirmed: subject.emailConfirmedAt !== null,
      hasRecording: subject.confidentialKey !== null,
      target: family ? { catalogueNumber: family.catalogueNumber, title: family.title } : null,
      events: events.map((event) => ({ words: event.words, at: event.at })),
      earlier: earlier.filter((row) => row.id !== subject.id),
    };
  },
});
export type ReportView = Awaited<ReturnType<typeof getReport>>;

/** The confidential recording of a report, for the marketplace's moderators; each hearing stands in the log. */
export const hearReported = command({
  name: "reports.hearReported",
  who: ["moderator"],
  input: z.object({ noticeId: z.string() }),
  authorise: async ({ tx, actor, input }) => {
    await marketplaceOnly({ actor });
    const [row] = await tx
      .select({ key: notices.confidentialKey })
      .from(notices)
      .where(eq(notices.id, input.noticeId));
    if (!row?.key) throw new NotFound();
    return row.key;
  },
  run: async ({ subject }) => ({ fileKey: subject }),
  audit: ({ input }) => ({ subject: input.noticeId }),
});
