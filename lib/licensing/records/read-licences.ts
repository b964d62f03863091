import { desc, eq } from "drizzle-orm";
import { z } from "zod";
import type { Reader } from "@/db/client";
import { licenceRecords, orderLines } from "@/db/schema/licensing";
import { licensedMastersOf, recordingById } from "@/lib/catalogue";
import type { ActorOf } from "@/lib/kernel/actor";
import { type CivilDate, civilDateIn } from "@/lib/kernel/calendar";
import { NotFound } from "@/lib/kernel/errors";
import { parseLicenceNumber } from "@/lib/kernel/licence-number";
import { formatProofCode } from "@/lib/kernel/proof-code";
import { open, query } from "@/lib/kernel/verb";
import type { Disclosed } from "../record/confidential";
import { type InForce, inForceOn } from "../record/in-force";
import type { LicenceFee, LicenceRecord, StatusEvent } from "../record/schema";
import type { LicenceFile } from "../record/sign-record";
import { licenceFile, type RecordRow, recordByNumber, withheldOf } from "./licence-file";
import { type Download, downloadsOf } from "./masters";
import { statusHistory } from "./record-log";

type Viewer = ActorOf<"buyer" | "owner" | "staff" | "accountant" | "auditor">;

export interface LicenceEntry {
  number: string;
  title: string;
  production: string;
  useWords: string;
  fee: string;
  currency: string;
  isBroughtIn: boolean;
  issuedAt: Date;
  startsOn: CivilDate;
  lastUseAt: Date | null;
  zone: string;
  today: InForce["answer"];
  todaySentence: string;
}

const value = <T>(disclosed: Disclosed, field: keyof Disclosed): T | null =>
  (disclosed[field]?.value as T | undefined) ?? null;

function wordsOfScope(record: LicenceRecord): string {
  const { media, territory, quantity } = record.scope;
  const episodes = quantity.episodes > 1 ? `, ${quantity.episodes} episodes` : "";
  return `${media.words}, ${territory.words}${episodes}`;
}

/** Every licence of the buyer's company, the newest first. */
export const listLicences = query({
  name: "licensing.listLicences",
  who: ["buyer"],
  input: z.object({}),
  authorise: open("each row is of the buyer's own company"),
  run: async ({ reader, actor, now }): Promise<LicenceEntry[]> => {
    const rows = await reader
      .select()
      .from(licenceRecords)
      .where(eq(licenceRecords.companyId, actor.companyId))
      .orderBy(desc(licenceRecords.number));
    const entries: LicenceEntry[] = [];
    for (const row of rows) {
      const record = JSON.parse(row.canonical) as LicenceRecord;
      const disclosed = row.confidential as Disclosed;
      const { term } = record.scope;
      const today = inForceOn(await statusHistory(reader, row.number), term, civilDateIn(now, term.zone));
      const fee = value<LicenceFee>(disclosed, "fee.details");
      entries.push({
        number: row.number,
        title: record.cue.title,
        production: value<string>(disclosed, "production.title") ?? "",
        useWords: wordsOfScope(record),
        fee: fee?.net ?? "",
        currency: fee?.currency ?? "",
        isBroughtIn: row.origin === "brought in",
        issuedAt: row.issuedAt,
        startsOn: term.startsOn,
        lastUseAt: row.lastUseAt,
        zone: term.zone,
        today: today.answer,
        todaySentence: today.sentence,
      });
    }
    return entries;
  },
});

export interface LicencePage {
  record: LicenceRecord;
  proofCode: string;
  isLicensees: boolean;
  mayApprove: boolean;
  licensee: { name: string; endClient: string | null; address: string | null };
  production: {
    title: string;
    parts: string;
    references: { internal: string | null; isan: string | null; eidr: string | null } | null;
  };
  fee: LicenceFee;
  acceptedBy: { name: string; role: string };
  history: StatusEvent[];
  today: { date: CivilDate; answer: InForce["answer"]; sentence: string };
  withheld: string[];
  sha256: string;
  isInPublishedLog: boolean;
  orderId: string | null;
  /** By version: whether its master can be fetched. */
  masters: string[];
  downloads: Download[];
  /** Of the recording as delivered, packed; null where there is none. */
  contour: string | null;
  ending: string | null;
}

function maySee(actor: Viewer, row: RecordRow): boolean {
  if (actor.kind === "buyer") return actor.companyId === row.companyId;
  const isAll = (actor.kind === "accountant" || actor.kind === "auditor") && actor.libraryId === null;
  return isAll || actor.libraryId === row.libraryId;
}

/** LICENSING-3: a record with its confidential fields is for the licensee's company and the library that licensed. */
async function seenRecord(reader: Reader, actor: Viewer, text: string): Promise<RecordRow> {
  const parsed = parseLicenceNumber(text);
  const row = parsed.ok ? await recordByNumber(reader, parsed.number) : null;
  if (!row || !maySee(actor, row)) throw new NotFound();
  return row;
}

async function orderIdOf(reader: Reader, orderLineId: string | null): Promise<string | null> {
  if (!orderLineId) return null;
  const [line] = await reader
    .select({ orderId: orderLines.orderId })
    .from(orderLines)
    .where(eq(orderLines.id, orderLineId));
  return line?.orderId ?? null;
}

const NUMBER = z.object({ number: z.string().max(40) });

export const getLicence = query({
  name: "licensing.getLicence",
  who: ["buyer", "owner", "staff", "accountant", "auditor"],
  input: NUMBER,
  authorise: ({ reader, actor, input }) => seenRecord(reader, actor, input.number),
  run: async ({ reader, actor, subject: row, now }): Promise<LicencePage> => {
    const file = await licenceFile(reader, row, "licensee", now);
    const { record, disclosed } = file;
    const { term } = record.scope;
    const history = file.status?.statement.events ?? [];
    const date = civilDateIn(now, term.zone);
    const versionIds = record.cue.versions.map(({ versionId }) => versionId);
    const head = versionIds[0] ? await recordingById(reader, versionIds[0]) : null;
    return {
      record,
      proofCode: formatProofCode(row.proofCode),
      isLicensees: actor.kind === "buyer",
      mayApprove: actor.kind === "buyer" && actor.mayApprove,
      licensee: {
        name: value<string>(disclosed, "licensee.name") ?? "",
        endClient: value<string>(disclosed, "licensee.endClient"),
        address: value<string>(disclosed, "licensee.address"),
      },
      production: {
        title: value<string>(disclosed, "production.title") ?? "",
        parts: value<string>(disclosed, "production.parts") ?? "",
        references: value(disclosed, "production.references"),
      },
      fee: value<LicenceFee>(disclosed, "fee.details") as LicenceFee,
      acceptedBy: value(disclosed, "acceptance.person") ?? { name: "", role: "" },
      history: [...history],
      today: { date, ...answerOn(history, term, date) },
      withheld: await withheldOf(reader, row.number),
      sha256: row.sha256,
      isInPublishedLog: file.inclusion !== null,
      orderId: await orderIdOf(reader, row.orderLineId),
      masters: [...(await licensedMastersOf(reader, versionIds)).keys()],
      downloads: actor.kind === "buyer" ? await downloadsOf(reader, row.number) : [],
      contour: head?.contour ? Buffer.from(head.contour).toString("base64") : null,
      ending: head?.ending ?? null,
    };
  },
});

function answerOn(
  history: readonly StatusEvent[],
  term: LicenceRecord["scope"]["term"],
  date: CivilDate,
): Pick<InForce, "answer" | "sentence"> {
  const { answer, sentence } = inForceOn(history, term, date);
  return { answer, sentence };
}

/** The signed file for the licensee's own keeping, nothing withheld. */
export const getLicenceFile = query({
  name: "licensing.getLicenceFile",
  who: ["buyer", "owner", "staff", "accountant", "auditor"],
  input: NUMBER,
  authorise: ({ reader, actor, input }) => seenRecord(reader, actor, input.number),
  run: ({ reader, subject, now }): Promise<LicenceFile> => licenceFile(reader, subject, "licensee", now),
});
