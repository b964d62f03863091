import "@/tests/support/database";
import { and, eq, like } from "drizzle-orm";
import { describe, expect, test } from "vitest";
import { db } from "@/db/client";
import { holds } from "@/db/schema/catalogue";
import { jobs, mailOutbox, tickets } from "@/db/schema/infrastructure";
import { auditLog } from "@/db/schema/kernel";
import { noticeEvents, notices, reportedWorks } from "@/db/schema/reports";
import { type ActorOf, ANONYMOUS, system } from "@/lib/kernel/actor";
import { mod3736 } from "@/lib/kernel/check-characters";
import { withBusinessClock } from "@/lib/kernel/clock";
import { Forbidden, Invalid, Limit, NotFound, Precondition } from "@/lib/kernel/errors";
import { newId } from "@/lib/kernel/ids";
import {
  addReportedWork,
  admitConfidential,
  confidentialArrived,
  confirmReporterAddress,
  getNoticeStatus,
  getReport,
  hearReported,
  judgeNotice,
  listReports,
  recordFingerprinted,
  type SubmitNoticeInput,
  setEvidenceLevel,
  submitNotice,
  takeNotice,
} from "@/lib/reports";
import { makeFamily, makeLibrary } from "@/tests/support/make";
import { makeModerator } from "@/tests/support/make-case";

const worker = system("tests");
const SECRET = { name: "Reporter Of A Test", postal: "7 Lantern Row, Nowhere", signedName: "R. O. A. Test" };
let counter = 0;
const notice = (changes: Partial<SubmitNoticeInput> = {}) => ({
  ...SECRET,
  capacity: "owner" as const,
  email: `reporter-${++counter}-${process.pid}@test.example`,
  countryCode: "DE",
  workTitle: "A Work That Is Reported",
  concerns: "recording" as const,
  owner: "An Estate",
  where: "the cue on the front page",
  grounds: ["not licensed" as const],
  why: "The melody of the first eight bars is the one of my recording of 2019.",
  goodFaith: true as const,
  accuracy: true as const,
  fromAddress: `address-${counter}`,
  ...changes,
});
const send = (changes: Partial<SubmitNoticeInput> & { fromAddress?: string } = {}) =>
  submitNotice(ANONYMOUS, notice(changes));
const REASONS =
  "The papers and both recordings support it. The passage from 0:20 on is the same performance.";

const mailsOf = (noticeId: string) =>
  db().select().from(mailOutbox).where(eq(mailOutbox.subjectId, noticeId));
const rowOf = async (noticeId: string) =>
  (await db().select().from(notices).where(eq(notices.id, noticeId)))[0];
const jobsOf = async (reportedWorkId: string) =>
  (
    await db()
      .select()
      .from(jobs)
      .where(like(jobs.dedupeKey, `%${reportedWorkId}%`))
  ).map((job) => job.name);

async function confirmLink(noticeId: string): Promise<string> {
  const mail = (await mailsOf(noticeId)).find((row) => row.template === "report-confirm-address");
  return new URL(String(mail?.props.url)).searchParams.get("confirm") ?? "";
}

async function withTicket(): Promise<{ noticeId: string; receiptNumber: string; ticket: string }> {
  const { noticeId, receiptNumber } = await send({ hasRecording: true });
  const { uploadTicket } = await confirmReporterAddress(ANONYMOUS, { secret: await confirmLink(noticeId) });
  return { noticeId, receiptNumber, ticket: uploadTicket ?? "" };
}

async function withRecording(): Promise<string> {
  const { noticeId } = await withTicket();
  await confidentialArrived(worker, { noticeId, fileKey: `confidential-${noticeId}` });
  return noticeId;
}

describe("a report and its number", () => {
  test("REPORTS-1: without an account it gets a number with a check character and two mails at once", async () => {
    const { noticeId, receiptNumber } = await send();
    expect(receiptNumber).toMatch(/^RN-2026-[A-Z0-9]{8}-[A-Z0-9]$/);
    const code = receiptNumber.replaceAll("-", "");
    expect(mod3736(code.slice(0, -1))).toBe(code.slice(-1));
    expect((await mailsOf(noticeId)).map((mail) => mail.template).sort()).toEqual([
      "report-confirm-address",
      "report-receipt",
    ]);
    const status = await getNoticeStatus(ANONYMOUS, {
      receiptNumber: receiptNumber.toLowerCase().replaceAll("-", " "),
    });
    expect(status).toMatchObject({ receiptNumber, state: "received", workTitle: "A Work That Is Reported" });
  });

  // ISO 7064 MOD 37,36: every single wrong character is found.
  test("REPORTS-1: a mistyped character is told before anything is looked up; a number nobody has is told apart", async () => {
    const { receiptNumber } = await send();
    const code = receiptNumber.replaceAll("-", "");
    for (let place = 6; place < code.length; place++) {
      const typed = `${code.slice(0, place)}${code[place] === "A" ? "B" : "A"}${code.slice(place + 1)}`;
      await expect(getNoticeStatus(ANONYMOUS, { receiptNumber: typed }), typed).rejects.toThrow(Invalid);
    }
    const nobodys = "RN2026AAAAAAAA";
    const asked = getNoticeStatus(ANONYMOUS, { receiptNumber: `${nobodys}${mod3736(nobodys)}` });
    await expect(asked).rejects.toThrow(NotFound);
  });

  test("REPORTS-1: two numbers of one second have nothing in common that could be counted on", async () => {
    const made = await Promise.all(Array.from({ length: 12 }, () => send()));
    const chances = made.map(({ receiptNumber }) => receiptNumber.slice(8, 16));
    expect(new Set(chances).size).toBe(12);
    for (let place = 0; place < 8; place++)
      expect(new Set(chances.map((chance) => chance[place])).size, `place ${place}`).toBeGreaterThan(1);
  });

  test("what is missing is named field by field", async () => {
    const { goodFaith: _goodFaith, ...without } = notice({
      why: "Mine.",
      isrc: "GB-XXX-26-0000",
      grounds: [],
    });
    const refused = await submitNotice(ANONYMOUS, without as Parameters<typeof submitNotice>[1]).catch(
      (error) => error,
    );
    expect(refused).toBeInstanceOf(Invalid);
    expect(Object.keys((refused as Invalid).fields).sort()).toEqual(["goodFaith", "grounds", "isrc", "why"]);
    expect((refused as Invalid).fields.goodFaith).toContain("Everything else you wrote is kept");
  });
});

describe("who sees the reporter", () => {
  test("REPORTS-2: name, address and signature are encrypted at rest and stand in no other table and no log", async () => {
    const { noticeId } = await send();
    const row = await rowOf(noticeId);
    const atRest = `${row?.contact.toString("latin1")} ${JSON.stringify(row?.claim)}`;
    const logged = JSON.stringify(await db().select().from(auditLog).where(eq(auditLog.subject, noticeId)));
    const events = JSON.stringify(
      await db().select().from(noticeEvents).where(eq(noticeEvents.noticeId, noticeId)),
    );
    const mails = JSON.stringify((await mailsOf(noticeId)).map((mail) => mail.props));
    for (const secret of [...Object.values(SECRET), "@test.example"])
      for (const text of [atRest, logged, events, mails]) expect(text).not.toContain(secret);
  });

  test("REPORTS-2: the marketplace's moderators read it; a library's moderator, its owner and the public do not", async () => {
    const libraryId = await makeLibrary();
    const familyId = await makeFamily({ libraryId, catalogueNumber: "QQ4711" });
    const { noticeId, receiptNumber } = await send({ where: "cue QQ4711, from the start" });
    const marketplace = await makeModerator(null);
    const report = await getReport(marketplace, { noticeId });
    expect(report.contact).toMatchObject({ ...SECRET, countryCode: "DE" });
    expect(report.target?.catalogueNumber).toBe("QQ4711");
    const library = await makeModerator(libraryId);
    const owner: ActorOf<"owner"> = { kind: "owner", personId: "per_o", name: "O", libraryId };
    for (const actor of [library, owner]) {
      await expect(getReport(actor, { noticeId })).rejects.toThrow(Forbidden);
      await expect(listReports(actor, {})).rejects.toThrow(Forbidden);
      await expect(hearReported(actor, { noticeId })).rejects.toThrow(Forbidden);
    }
    const status = JSON.stringify(await getNoticeStatus(ANONYMOUS, { receiptNumber }));
    const list = JSON.stringify(await listReports(marketplace, {}));
    for (const secret of [...Object.values(SECRET), "@test.example"]) {
      expect(status).not.toContain(secret);
      expect(list).not.toContain(secret);
    }
    expect(status).not.toContain(familyId);
  });

  test("REPORTS-2: a hearing of the confidential recording stands in the log with the person", async () => {
    const noticeId = await withRecording();
    const marketplace = await makeModerator(null);
    expect(await hearReported(marketplace, { noticeId })).toEqual({ fileKey: `confidential-${noticeId}` });
    const log = await db()
      .select()
      .from(auditLog)
      .where(and(eq(auditLog.subject, noticeId), eq(auditLog.verb, "reports.hearReported")));
    expect(log.map((row) => row.actorPersonId)).toEqual([marketplace.personId]);
  });
});

describe("a person judges", () => {
  async function aboutACue() {
    const catalogueNumber = `ZZ${1000 + ++counter}`;
    const familyId = await makeFamily({ libraryId: await makeLibrary(), catalogueNumber });
    const { noticeId, receiptNumber } = await send({ where: catalogueNumber });
    return { familyId, catalogueNumber, noticeId, receiptNumber, marketplace: await makeModerator(null) };
  }
  const holdsOn = (familyId: string) => db().select().from(holds).where(eq(holds.familyId, familyId));

  test("REPORTS-3: however many reports name a cue, nothing of it is hidden until a person decides", async () => {
    const { familyId, catalogueNumber, noticeId } = await aboutACue();
    const target = (await rowOf(noticeId))?.targetFamilyId;
    expect(target).toBe(familyId);
    await Promise.all(Array.from({ length: 6 }, () => send({ where: catalogueNumber })));
    expect(await holdsOn(familyId)).toEqual([]);
    expect((await rowOf(noticeId))?.state).toBe("received");
  });

  test("REPORTS-3: received, under review, decided: each with its time, and the decision with reasons by mail", async () => {
    const { familyId, noticeId, receiptNumber, marketplace } = await aboutACue();
    await takeNotice(marketplace, { noticeId });
    await takeNotice(marketplace, { noticeId });
    expect(await getNoticeStatus(ANONYMOUS, { receiptNumber })).toMatchObject({ state: "under review" });
    const decision = {
      noticeId,
      decision: "accept" as const,
      reasons: REASONS,
      level: "claimed" as const,
      holdTarget: true,
    };
    await judgeNotice(marketplace, decision);
    const status = await getNoticeStatus(ANONYMOUS, { receiptNumber });
    expect(status).toMatchObject({ state: "decided", outcome: "claimed", reasons: REASONS });
    expect(status.events.map((event) => event.words)).toEqual([
      "Received.",
      "A person is reading it.",
      "Decided: accepted.",
    ]);
    expect((await holdsOn(familyId)).map((hold) => hold.cause)).toEqual(["reported work"]);
    const mail = (await mailsOf(noticeId)).find((row) => row.template === "report-status");
    expect(mail?.props).toMatchObject({ reasons: REASONS });
    await expect(judgeNotice(marketplace, decision)).rejects.toThrow(Precondition);
    expect(await holdsOn(familyId)).toHaveLength(1);
  });

  test("REPORTS-3: rejected, nothing is removed and nothing joins the list; asked for more, it stays open", async () => {
    const { familyId, noticeId, receiptNumber, marketplace } = await aboutACue();
    await expect(judgeNotice(marketplace, { noticeId, decision: "reject", reasons: "No." })).rejects.toThrow(
      Invalid,
    );
    await judgeNotice(marketplace, {
      noticeId,
      decision: "ask for more",
      reasons: "Please tell us which bars of the recording you mean.",
    });
    expect(await getNoticeStatus(ANONYMOUS, { receiptNumber })).toMatchObject({ state: "incomplete" });
    await judgeNotice(marketplace, { noticeId, decision: "reject", reasons: REASONS });
    expect(await getNoticeStatus(ANONYMOUS, { receiptNumber })).toMatchObject({ outcome: "rejected" });
    expect(await holdsOn(familyId)).toEqual([]);
    expect(await db().select().from(reportedWorks).where(eq(reportedWorks.noticeId, noticeId))).toEqual([]);
  });

  // D5: a restriction notified on 31 August 2026 may be contested at least through 28 February 2027 (Regulation (EU) 2022/2065, Article 20(1): at least six months).
  test("REPORTS-3: a decision of 31 August 2026 may be contested through 28 February 2027", async () => {
    const { noticeId, marketplace } = await aboutACue();
    await withBusinessClock(new Date("2026-08-31T10:00:00Z"), () =>
      judgeNotice(marketplace, { noticeId, decision: "reject", reasons: REASONS }),
    );
    const mail = (await mailsOf(noticeId)).find((row) => row.template === "report-status");
    expect(String(mail?.props.complaintUntil) >= "2027-02-28T23:59:59").toBe(true);
  });

  test("the list stands by deadline, open ones first: the end of the next working day in London", async () => {
    const at = (iso: string) => withBusinessClock(new Date(iso), () => send());
    const friday = await at("2026-05-22T15:00:00Z");
    const thursday = await at("2026-05-21T15:00:00Z");
    const { notices: list } = await listReports(await makeModerator(null), {});
    const mine = list.filter((row) => [friday.noticeId, thursday.noticeId].includes(row.id));
    expect(mine.map((row) => row.id)).toEqual([thursday.noticeId, friday.noticeId]);
    // 25 May 2026 is a bank holiday in England.
    expect(mine.map((row) => row.dueAt.toISOString().slice(0, 16))).toEqual([
      "2026-05-22T22:59",
      "2026-05-26T22:59",
    ]);
    const states = list.map((row) => row.state === "decided");
    expect(states.indexOf(true) === -1 || states.lastIndexOf(false) < states.indexOf(true)).toBe(true);
  });
});

describe("evidence levels", () => {
  const enter = async (level: "claimed" | "supported" | "adjudicated", fileKey: string | null) => {
    const code = `RW-${String(1000 + ++counter)}`;
    const input = { code, title: "A", concerns: "recording" as const, owner: "Owner", level, fileKey };
    return (await addReportedWork(worker, input)).reportedWorkId;
  };
  const words = "A court's judgment of March settles it.";

  test("REPORTS-4: only a supported or adjudicated entry that has a recording is sent to be compared", async () => {
    expect(await jobsOf(await enter("claimed", "a-file"))).toEqual([]);
    expect(await jobsOf(await enter("supported", null))).toEqual([]);
    expect(await jobsOf(await enter("supported", "a-file"))).toEqual(["screening.fingerprintReported"]);
    expect(await jobsOf(await enter("adjudicated", "a-file"))).toEqual(["screening.fingerprintReported"]);
  });

  test("REPORTS-4: raised from claimed it joins, lowered it leaves, raised again it joins again", async () => {
    const marketplace = await makeModerator(null);
    const reportedWorkId = await enter("claimed", "a-file");
    await setEvidenceLevel(marketplace, { reportedWorkId, level: "supported", words });
    await recordFingerprinted(worker, { reportedWorkId, comparable: true });
    await setEvidenceLevel(marketplace, { reportedWorkId, level: "adjudicated", words });
    expect(await jobsOf(reportedWorkId)).toEqual(["screening.fingerprintReported"]);
    await setEvidenceLevel(marketplace, { reportedWorkId, level: "claimed", words });
    await setEvidenceLevel(marketplace, { reportedWorkId, level: "supported", words });
    expect((await jobsOf(reportedWorkId)).sort()).toEqual([
      "screening.dropReported",
      "screening.fingerprintReported",
      "screening.fingerprintReported",
    ]);
  });

  test("REPORTS-4: lowered while its recording is being read, it leaves the index as soon as it has joined", async () => {
    const marketplace = await makeModerator(null);
    const reportedWorkId = await enter("supported", "a-file");
    await setEvidenceLevel(marketplace, { reportedWorkId, level: "claimed", words });
    await recordFingerprinted(worker, { reportedWorkId, comparable: true });
    expect((await jobsOf(reportedWorkId)).sort()).toEqual([
      "screening.dropReported",
      "screening.fingerprintReported",
    ]);
    const [row] = await db().select().from(reportedWorks).where(eq(reportedWorks.id, reportedWorkId));
    expect(row?.fingerprinted).toBe(false);
  });

  test("REPORTS-4: an accepted report without a recording is a note for people", async () => {
    const { noticeId } = await send();
    const { reportedWorkId } = await judgeNotice(await makeModerator(null), {
      noticeId,
      decision: "accept",
      reasons: REASONS,
      level: "supported",
      holdTarget: false,
    });
    expect(await jobsOf(reportedWorkId ?? "")).toEqual([]);
  });
});

describe("tickets", () => {
  test("REPORTS-5: the link of the mail confirms once; only who announced a recording gets a ticket for it", async () => {
    const { noticeId } = await send();
    const secret = await confirmLink(noticeId);
    expect(await confirmReporterAddress(ANONYMOUS, { secret })).toMatchObject({ uploadTicket: null });
    await expect(confirmReporterAddress(ANONYMOUS, { secret })).rejects.toThrow(NotFound);
    expect((await rowOf(noticeId))?.emailConfirmedAt).not.toBeNull();
    const { ticket } = await withTicket();
    expect(ticket.length).toBeGreaterThan(20);
  });

  test("REPORTS-5: of two who use a ticket at once one is let in, and a ticket serves its own purpose only", async () => {
    const { noticeId } = await send({ hasRecording: true });
    const link = await confirmLink(noticeId);
    const file = { sizeBytes: 1000, files: 1 };
    await expect(admitConfidential(ANONYMOUS, { ticket: link, ...file })).rejects.toThrow(NotFound);
    const { uploadTicket } = await confirmReporterAddress(ANONYMOUS, { secret: link });
    const ticket = uploadTicket ?? "";
    await expect(confirmReporterAddress(ANONYMOUS, { secret: ticket })).rejects.toThrow(NotFound);
    const answers = await Promise.allSettled(
      [1, 2, 3].map(() => admitConfidential(ANONYMOUS, { ticket, ...file })),
    );
    expect(answers.filter((answer) => answer.status === "fulfilled")).toEqual([
      { status: "fulfilled", value: { noticeId } },
    ]);
  });

  test("REPORTS-5: too large or too many, and the ticket is still good; expired, it is not", async () => {
    const { ticket, noticeId } = await withTicket();
    await expect(
      admitConfidential(ANONYMOUS, { ticket, files: 1, sizeBytes: 301 * 2 ** 20 }),
    ).rejects.toThrow(Precondition);
    await expect(admitConfidential(ANONYMOUS, { ticket, files: 2, sizeBytes: 10 })).rejects.toThrow(Invalid);
    const late = and(eq(tickets.subjectId, noticeId), eq(tickets.purpose, "confidential recording"));
    await db()
      .update(tickets)
      .set({ expiresAt: new Date(Date.now() - 1000) })
      .where(late);
    await expect(admitConfidential(ANONYMOUS, { ticket, files: 1, sizeBytes: 10 })).rejects.toThrow(NotFound);
    await db()
      .update(tickets)
      .set({ expiresAt: new Date(Date.now() + 60_000) })
      .where(late);
    expect(await admitConfidential(ANONYMOUS, { ticket, files: 1, sizeBytes: 300 * 2 ** 20 })).toEqual({
      noticeId,
    });
  });

  test("REPORTS-5: the database holds hashes of tickets, not tickets", async () => {
    const { noticeId } = await send();
    const link = await confirmLink(noticeId);
    const rows = await db().select().from(tickets).where(eq(tickets.subjectId, noticeId));
    expect(rows).toHaveLength(1);
    expect(JSON.stringify(rows)).not.toContain(link);
  });

  test("an arrival announced twice is one recording and one line in the history", async () => {
    const noticeId = await withRecording();
    await confidentialArrived(worker, { noticeId, fileKey: `confidential-${noticeId}` });
    const status = await getNoticeStatus(ANONYMOUS, {
      receiptNumber: (await rowOf(noticeId))?.receiptNumber ?? "",
    });
    expect(status.events.filter((event) => event.words.includes("recording arrived"))).toHaveLength(1);
    expect(status.expectsRecording).toBe(false);
  });
});

describe("limits", () => {
  test("REPORTS-6: the sixth report of a day from one address is refused, however it is written, and keeps what was written", async () => {
    const email = `busy-${newId("x").slice(4)}@test.example`;
    for (let count = 0; count < 5; count++) await send({ email });
    const sixth = send({ email: email.toUpperCase() });
    await expect(sixth).rejects.toThrow(Limit);
    await expect(sixth).rejects.toThrow(/kept in this browser/);
    expect((await send()).receiptNumber).toMatch(/^RN-/);
  });

  test("REPORTS-6: of eight sent at once over one connection five are taken", async () => {
    const fromAddress = `connection-${newId("x").slice(4)}`;
    const answers = await Promise.allSettled(Array.from({ length: 8 }, () => send({ fromAddress })));
    expect(answers.filter((answer) => answer.status === "fulfilled")).toHaveLength(5);
    for (const answer of answers)
      if (answer.status === "rejected") expect(answer.reason).toBeInstanceOf(Limit);
  });
});
