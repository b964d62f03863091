import { eq, sql } from "drizzle-orm";
import type { Reader } from "@/db/client";
import { licenceRecords, licenceVisibility } from "@/db/schema/licensing";
import { recordingById } from "@/lib/catalogue";
import { EVERYONE } from "@/lib/kernel/actor";
import { type CivilDate, civilDateIn, formatCivilDate } from "@/lib/kernel/calendar";
import { Forbidden, NotFound } from "@/lib/kernel/errors";
import { parseLicenceNumber } from "@/lib/kernel/licence-number";
import { formatProofCode, parseProofCode } from "@/lib/kernel/proof-code";
import { command, open, query } from "@/lib/kernel/verb";
import type { Disclosed } from "../record/confidential";
import { type InForce, inForceOn, type LicenceTerm } from "../record/in-force";
import type { LicenceRecord, StatusEvent } from "../record/schema";
import type { LicenceFile } from "../record/sign-record";
import { type Verification, verifyRecord } from "../record/verify-record";
import { CheckFile, CheckProof, SetWithheld } from "../schemas";
import { PUBLIC_FIELDS, type Withholdable } from "../states";
import { countCheck } from "./check-limit";
import { publishedKeys } from "./current-key";
import { licenceFile, type RecordRow, recordByNumber, recordByProof } from "./licence-file";

/** What a stranger may know of a licence whose code or file is in hand. */
export interface CheckedLicence {
  number: string;
  /** The code as people write it. */
  proofCode: string;
  demonstration: boolean;
  origin: LicenceRecord["origin"];
  signedAt: string;
  licensor: LicenceRecord["licensor"];
  /** null: kept private by the licensee. */
  licensee: string | null;
  endClient: string | null;
  production: { type: string; title: string | null; parts: string | null };
  withheld: Withholdable[];
  cue: LicenceRecord["cue"];
  writers: string[];
  scope: LicenceRecord["scope"];
  notIncluded: string[];
  term: LicenceTerm;
  screening: LicenceRecord["screening"];
  history: StatusEvent[];
  seal: { keyId: string; sha256: string; day: string; position: number; isInPublishedLog: boolean };
  /** The recording as delivered: its contours, packed, and its ending; null where it has none. */
  heard: { recordingId: string; durationS: number; contour: string; ending: string } | null;
}

export interface Checked {
  verdict: "genuine" | "altered";
  sentence: string;
  failing: string[];
  /** The day asked about, in the licence's own zone, and today. */
  on: { date: CivilDate; answer: InForce["answer"]; sentence: string };
  today: { date: CivilDate; answer: InForce["answer"]; sentence: string };
  licence: CheckedLicence;
}

export type CheckAnswer = Checked | { verdict: "mistyped" | "unknown"; sentence: string };

export const UNKNOWN_SENTENCE =
  "Unknown: no licence of this service has that proof code. Nothing is wrong with how it is written.";

function shownText(disclosed: Disclosed, field: Withholdable): string | null {
  const value = disclosed[field]?.value;
  return typeof value === "string" ? value : null;
}

function licenceOf(file: {
  record: LicenceRecord;
  disclosed: Disclosed;
  history: readonly StatusEvent[];
  sha256: string;
  isInPublishedLog: boolean;
  heard: CheckedLicence["heard"];
}): CheckedLicence {
  const { record, disclosed } = file;
  const withheld = PUBLIC_FIELDS.filter((field) => disclosed[field] === undefined);
  return {
    number: record.number,
    proofCode: formatProofCode(record.verify.proofCode),
    demonstration: record.demonstration,
    origin: record.origin,
    signedAt: record.issuedAt,
    licensor: record.licensor,
    licensee: shownText(disclosed, "licensee.name"),
    endClient: shownText(disclosed, "licensee.endClient"),
    production: {
      type: record.production.type,
      title: shownText(disclosed, "production.title"),
      parts: shownText(disclosed, "production.parts"),
    },
    withheld,
    cue: record.cue,
    writers: record.shares.writers.map(({ name }) => name),
    scope: record.scope,
    notIncluded: record.notIncluded,
    term: record.scope.term,
    screening: record.screening,
    history: [...file.history],
    seal: {
      keyId: record.signing.keyId,
      sha256: file.sha256,
      ...record.signing.log,
      isInPublishedLog: file.isInPublishedLog,
    },
    heard: file.heard,
  };
}

function answerOf(
  verification: Verification,
  licence: CheckedLicence,
  on: CivilDate | undefined,
  now: Date,
): Checked {
  const today = civilDateIn(now, licence.term.zone);
  const date = on ?? today;
  const say = (day: CivilDate) => {
    const { answer, sentence } = inForceOn(licence.history, licence.term, day);
    return { date: day, answer, sentence };
  };
  return {
    verdict: verification.verdict === "genuine" ? "genuine" : "altered",
    sentence: verification.sentence,
    failing: verification.failing,
    on: say(date),
    today: say(today),
    licence,
  };
}

async function heardIn(reader: Reader, record: LicenceRecord): Promise<CheckedLicence["heard"]> {
  const versionId = record.cue.versions[0]?.versionId;
  const recording = versionId ? await recordingById(reader, versionId) : null;
  if (!recording?.contour) return null;
  const { id, durationS, ending } = recording;
  return { recordingId: id, durationS, ending, contour: Buffer.from(recording.contour).toString("base64") };
}

/** What is held here is verified like a file that somebody brings: the database is not believed either. */
async function checkRow(
  reader: Reader,
  row: RecordRow,
  on: CivilDate | undefined,
  now: Date,
): Promise<Checked> {
  const file = await licenceFile(reader, row, "public", now);
  const verification = verifyRecord(JSON.stringify(file), await publishedKeys(reader));
  const licence = licenceOf({
    record: file.record,
    disclosed: file.disclosed,
    history: file.status?.statement.events ?? [],
    sha256: row.sha256,
    isInPublishedLog: file.inclusion !== null,
    heard: await heardIn(reader, file.record),
  });
  return answerOf(verification, licence, on, now);
}

/**
 * A licence by its proof code, without an account. LICENSING-10: the check character is looked at before anything is looked up;
 * a licence number alone, right or wrong, is answered alike.
 */
export const verifyByProof = query({
  name: "licensing.verifyByProof",
  who: EVERYONE,
  input: CheckProof,
  authorise: open("whoever holds the proof code may check the licence"),
  run: async ({ reader, input, now }): Promise<CheckAnswer> => {
    if (/^\s*LR/i.test(input.proof)) {
      const number = parseLicenceNumber(input.proof);
      if (!number.ok) return { verdict: "mistyped", sentence: number.message };
      return {
        verdict: "unknown",
        sentence: `${number.number} is a well-formed licence number. A number alone reveals nothing: the proof code that stands beside it on the record opens this page.`,
      };
    }
    const parsed = parseProofCode(input.proof);
    if (!parsed.ok) return { verdict: "mistyped", sentence: parsed.message };
    countCheck(input.address);
    const row = await recordByProof(reader, parsed.code);
    return row ? checkRow(reader, row, input.on, now) : { verdict: "unknown", sentence: UNKNOWN_SENTENCE };
  },
});

/** The signed file as the public may have it: what the licensee keeps private is left out, and it still verifies. */
export const getPublicFile = query({
  name: "licensing.getPublicFile",
  who: EVERYONE,
  input: CheckProof.pick({ proof: true, address: true }),
  authorise: async ({ reader, input }) => {
    const parsed = parseProofCode(input.proof);
    if (!parsed.ok) throw new NotFound(parsed.message);
    countCheck(input.address);
    const row = await recordByProof(reader, parsed.code);
    if (!row) throw new NotFound(UNKNOWN_SENTENCE);
    return row;
  },
  run: ({ reader, subject, now }): Promise<LicenceFile> => licenceFile(reader, subject, "public", now),
});

export interface CheckedFile {
  verdict: Verification["verdict"];
  sentence: string;
  failing: string[];
  number: string | null;
  /** The state at the time the file's own history was signed. */
  asOf: string | null;
  on: { date: CivilDate; sentence: string } | null;
  history: StatusEvent[];
  /** Where the same licence stands today, if this service holds it. */
  proofCode: string | null;
}

/** A licence file that somebody brings: genuine, altered and in which part, or unknown. It is read and not kept. */
export const verifyFile = query({
  name: "licensing.verifyFile",
  who: EVERYONE,
  input: CheckFile,
  authorise: open("whoever holds a file may check it"),
  run: async ({ reader, input, now }): Promise<CheckedFile> => {
    countCheck(input.address);
    const found = verifyRecord(input.text, await publishedKeys(reader));
    const { verdict, sentence, failing, number, asOf, events, term } = found;
    const known = verdict === "genuine" && number ? await recordByNumber(reader, number) : null;
    const date = input.on ?? (term ? civilDateIn(now, term.zone) : null);
    const on =
      verdict === "genuine" && term && date
        ? { date, sentence: inForceOn(events, term, date).sentence }
        : null;
    return {
      verdict,
      sentence,
      failing,
      number,
      asOf,
      on,
      history: verdict === "genuine" ? events : [],
      proofCode: known?.proofCode ?? null,
    };
  },
});

/** Somebody who may approve for the licensee keeps client, title or name from the public page, or shows them again. */
export const setWithheld = command({
  name: "licensing.setWithheld",
  who: ["buyer"],
  input: SetWithheld,
  authorise: async ({ tx, actor, input }) => {
    const [row] = await tx
      .select({ number: licenceRecords.number, companyId: licenceRecords.companyId })
      .from(licenceRecords)
      .where(eq(licenceRecords.number, input.number));
    if (row?.companyId !== actor.companyId) throw new NotFound();
    if (!actor.mayApprove)
      throw new Forbidden("Somebody of your company who may approve decides what the public page shows.");
    return row;
  },
  run: async ({ tx, actor, input, subject, now }) => {
    const change = { withheld: input.withheld, changedBy: actor.personId, changedAt: now };
    await tx
      .insert(licenceVisibility)
      .values({ licenceNumber: subject.number, ...change })
      .onDuplicateKeyUpdate({ set: { ...change, version: sql`version + 1` } });
    return null;
  },
  audit: ({ subject, input }) => ({ subject: subject.number, detail: { withheld: input.withheld } }),
});

/** "in force until 19 February 2029", for the strip of time on the page. */
export function untilWords(term: LicenceTerm): string {
  if (term.lastUseAt === null) return "without end";
  return `until ${formatCivilDate(civilDateIn(new Date(term.lastUseAt), term.zone))}`;
}
