import { randomBytes, randomInt } from "node:crypto";
import { and, eq } from "drizzle-orm";
import { db } from "@/db/client";
import { mailOutbox } from "@/db/schema/infrastructure";
import { ANONYMOUS, system } from "@/lib/kernel/actor";
import { addReportedWork, confidentialArrived, confirmReporterAddress, submitNotice } from "@/lib/reports";
import { COLUMNS, type Column, type Rows } from "../columns";

const EVERYBODY = [...COLUMNS];
const SYSTEM: readonly Column[] = ["system"];
const MARKETPLACE: readonly Column[] = ["marketplaceModerator"];
const worker = system("the matrix");

const fresh = () => randomBytes(8).toString("hex");
const notice = () => ({
  name: "A Reporter",
  capacity: "owner" as const,
  email: `row-${fresh()}@test.example`,
  countryCode: "GB",
  workTitle: "A reported work",
  concerns: "recording" as const,
  owner: "An Owner",
  where: "the page of a cue",
  grounds: ["sample" as const],
  why: "A part of our recording is heard in it, from the start on.",
  hasRecording: true,
  goodFaith: true as const,
  accuracy: true as const,
  signedName: "A Reporter",
  fromAddress: fresh(),
});

const sent = () => submitNotice(ANONYMOUS, notice());

/** The secret of the confirming mail. */
async function link(): Promise<string> {
  const { noticeId } = await sent();
  const [mail] = await db()
    .select({ props: mailOutbox.props })
    .from(mailOutbox)
    .where(and(eq(mailOutbox.subjectId, noticeId), eq(mailOutbox.template, "report-confirm-address")));
  return new URL(String(mail?.props.url)).searchParams.get("confirm") ?? "";
}

async function withRecording(): Promise<string> {
  const { noticeId } = await sent();
  await confidentialArrived(worker, { noticeId, fileKey: `confidential-${noticeId}` });
  return noticeId;
}

const entry = () => ({
  code: `RW-${randomInt(1000, 9999)}`,
  title: "A reported work",
  concerns: "work" as const,
  owner: "An Owner",
  level: "claimed" as const,
  fileKey: null,
});

/** Codes are few; a taken one is tried again. */
async function entered(): Promise<string> {
  for (;;) {
    const made = await addReportedWork(worker, entry()).catch(() => null);
    if (made) return made.reportedWorkId;
  }
}

export const rows = {
  "reports.submitNotice": { input: async () => notice(), may: EVERYBODY },
  "reports.getNoticeStatus": {
    input: async () => ({ receiptNumber: (await sent()).receiptNumber }),
    may: EVERYBODY,
  },
  "reports.confirmReporterAddress": { input: async () => ({ secret: await link() }), may: EVERYBODY },
  "reports.admitConfidential": {
    input: async () => {
      const { uploadTicket } = await confirmReporterAddress(ANONYMOUS, { secret: await link() });
      return { ticket: uploadTicket, sizeBytes: 1, files: 1 };
    },
    may: EVERYBODY,
  },
  "reports.confidentialArrived": {
    input: async () => ({ noticeId: (await sent()).noticeId, fileKey: `file-${fresh()}` }),
    may: SYSTEM,
  },
  "reports.listReports": { input: async () => ({}), may: MARKETPLACE },
  "reports.getReport": { input: async () => ({ noticeId: (await sent()).noticeId }), may: MARKETPLACE },
  "reports.hearReported": { input: async () => ({ noticeId: await withRecording() }), may: MARKETPLACE },
  "reports.takeNotice": { input: async () => ({ noticeId: (await sent()).noticeId }), may: MARKETPLACE },
  "reports.judgeNotice": {
    input: async () => ({
      noticeId: (await sent()).noticeId,
      decision: "ask for more",
      reasons: "Please say which recording you mean.",
    }),
    may: MARKETPLACE,
  },
  "reports.addReportedWork": {
    input: async () => entry(),
    may: [...MARKETPLACE, "system"],
    orAnswers: ["conflict"],
  },
  "reports.setEvidenceLevel": {
    input: async () => ({
      reportedWorkId: await entered(),
      level: "supported",
      words: "Papers of the label support it.",
    }),
    may: MARKETPLACE,
  },
  "reports.recordFingerprinted": {
    input: async () => ({ reportedWorkId: await entered(), comparable: true }),
    may: SYSTEM,
  },
} satisfies Rows;
