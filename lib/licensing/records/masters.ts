import { timingSafeEqual } from "node:crypto";
import { asc, eq } from "drizzle-orm";
import { z } from "zod";
import type { Reader } from "@/db/client";
import { masterDownloads } from "@/db/schema/licensing";
import { peopleByIds } from "@/lib/accounts";
import { licensedMastersOf } from "@/lib/catalogue";
import { enqueue } from "@/lib/jobs";
import { type Actor, EVERYONE } from "@/lib/kernel/actor";
import { civilDateIn } from "@/lib/kernel/calendar";
import { systemNow } from "@/lib/kernel/clock";
import { Forbidden, NotFound, Precondition } from "@/lib/kernel/errors";
import { blindHash } from "@/lib/kernel/field-crypto";
import { newId } from "@/lib/kernel/ids";
import { command, query } from "@/lib/kernel/verb";
import { inForceOn } from "../record/in-force";
import type { LicenceRecord } from "../record/schema";
import { MASTER_LINK_MINUTES } from "../states";
import { recordByNumber } from "./licence-file";
import { statusHistory } from "./record-log";

/** LICENSING-11: a master goes to the licensee while the licence is in force, by a link that works for minutes; each is logged. */
const logDownload = command({
  name: "licensing.downloadMaster",
  who: ["buyer"],
  input: z.object({ number: z.string().max(30), recordingId: z.string().max(40) }),
  authorise: async ({ tx, actor, input }) => {
    const row = await recordByNumber(tx, input.number);
    if (row?.companyId !== actor.companyId) throw new NotFound();
    const record = JSON.parse(row.canonical) as LicenceRecord;
    const version = record.cue.versions.find(({ versionId }) => versionId === input.recordingId);
    if (!version) throw new NotFound();
    return { record, version };
  },
  run: async ({ tx, actor, subject: { record, version }, now }) => {
    const { term } = record.scope;
    const { answer, sentence } = inForceOn(
      await statusHistory(tx, record.number),
      term,
      civilDateIn(now, term.zone),
    );
    if (answer === "not in force") throw new Precondition(`${sentence} Masters go with a licence in force.`);
    const isThere = (await licensedMastersOf(tx, [version.versionId])).has(version.versionId);
    if (!isThere) {
      const recordingId = version.versionId;
      await enqueue(tx, "catalogue.renderMaster", { recordingId }, { key: recordingId, priority: 10 });
      return { isThere };
    }
    await tx.insert(masterDownloads).values({
      id: newId("dow"),
      licenceNumber: record.number,
      recordingId: version.versionId,
      personId: actor.personId,
      at: now,
    });
    return { isThere };
  },
  audit: ({ input, result }) => ({
    subject: input.number,
    detail: { recordingId: input.recordingId, isThere: result.isThere },
  }),
});

const signatureOf = (payload: string) => blindHash(payload, "master link");

/** A link of our own that reads one master for some minutes. */
export async function linkToMaster(
  actor: Actor,
  input: { number: string; recordingId: string },
): Promise<{ path: string } | null> {
  const { isThere } = await logDownload(actor, input);
  if (!isThere) return null;
  const untilMs = systemNow().getTime() + MASTER_LINK_MINUTES * 60_000;
  const payload = Buffer.from(
    JSON.stringify({ number: input.number, recordingId: input.recordingId, untilMs }),
  ).toString("base64url");
  return { path: `/api/masters/${payload}.${signatureOf(payload)}` };
}

const Payload = z.object({ number: z.string(), recordingId: z.string(), untilMs: z.number() });

/** What a link opens, or null where its signature is not ours or its time is over. */
function readToken(token: string): z.output<typeof Payload> | null {
  const [payload = "", signature = ""] = token.split(".");
  const wanted = Buffer.from(signatureOf(payload));
  const given = Buffer.from(signature);
  if (given.length !== wanted.length || !timingSafeEqual(given, wanted)) return null;
  const parsed = Payload.safeParse(JSON.parse(Buffer.from(payload, "base64url").toString("utf8")));
  return parsed.success && parsed.data.untilMs >= systemNow().getTime() ? parsed.data : null;
}

export interface MasterFile {
  fileKey: string;
  fileName: string;
  sizeBytes: number;
  sha256: string;
}

/** The file behind a link. The link is what admits: it was given to one licensee a moment ago. */
export const readMaster = query({
  name: "licensing.readMaster",
  who: EVERYONE,
  input: z.object({ token: z.string().max(600) }),
  authorise: async ({ reader, input }) => {
    const link = readToken(input.token);
    if (!link) throw new Forbidden("This link has lapsed. Go back to the licence for a new one.");
    const row = await recordByNumber(reader, link.number);
    const master = (await licensedMastersOf(reader, [link.recordingId])).get(link.recordingId);
    if (!row || !master) throw new NotFound();
    return { record: JSON.parse(row.canonical) as LicenceRecord, master };
  },
  run: async ({ subject: { record, master } }): Promise<MasterFile> => {
    const version = record.cue.versions.find(({ versionId }) => versionId === master.recordingId);
    const name = `${record.cue.catalogueNumber} ${record.cue.title} ${version?.role ?? ""}`;
    return {
      fileKey: master.fileKey,
      fileName: `${name.replace(/[^\p{L}\p{N} ._-]/gu, "").trim()}.wav`,
      sizeBytes: master.sizeBytes,
      sha256: master.sha256,
    };
  },
});

export interface Download {
  recordingId: string;
  person: string;
  at: Date;
}

export async function downloadsOf(reader: Reader, number: string): Promise<Download[]> {
  const rows = await reader
    .select()
    .from(masterDownloads)
    .where(eq(masterDownloads.licenceNumber, number))
    .orderBy(asc(masterDownloads.at));
  const people = await peopleByIds(
    reader,
    rows.map(({ personId }) => personId),
  );
  return rows.map(({ recordingId, personId, at }) => ({
    recordingId,
    person: people.get(personId)?.name ?? "somebody who has left",
    at,
  }));
}
