import type { Reader } from "@/db/client";
import { confirmedNamesOf } from "@/lib/accounts";
import { libraryById, licensedMastersOf, recordingsOfFamily, splitAt } from "@/lib/catalogue";
import { versionRoleLabel } from "@/lib/catalogue/version-roles";
import { civilDateIn } from "@/lib/kernel/calendar";
import { env } from "@/lib/kernel/env";
import { assert } from "@/lib/kernel/errors";
import { certificateOf } from "@/lib/screening";
import type { LicenceRecordInput } from "../record/schema";

type Library = NonNullable<Awaited<ReturnType<typeof libraryById>>>;
interface Family {
  id: string;
  libraryId: string;
  title: string;
  otherTitles: string[];
  iswc: string | null;
  catalogueNumber: string;
  deal: string;
  yearRecorded: number | null;
  headRecordingId: string | null;
}

const percent = (shareBps: number) => (shareBps / 100).toFixed(2);

async function versionsOf(reader: Reader, familyId: string, recordingIds: readonly string[]) {
  const all = await recordingsOfFamily(reader, familyId);
  const chosen = all.filter(({ id }) => recordingIds.includes(id));
  const masters = await licensedMastersOf(reader, recordingIds);
  return chosen.map((recording) => ({
    role: versionRoleLabel(recording.versionRole),
    versionId: recording.id,
    isrc: recording.isrc,
    durationMs: Math.round(recording.durationS * 1000),
    masterSha256: masters.get(recording.id)?.sha256 ?? null,
    deliveredSha256: recording.fileSha256,
  }));
}

async function sharesOf(
  reader: Reader,
  family: Family,
  library: Library,
  at: Date,
): Promise<{ shares: LicenceRecordInput["shares"]; splitVersionId: string }> {
  const split = await splitAt(reader, family.id, at);
  assert(split, `the family ${family.id} has a split`);
  const ids = split.writers.flatMap(({ personId }) => personId ?? []);
  const names = await confirmedNamesOf(reader, library.id, ids);
  const confirmed = (personId: string | null) => (personId ? names.get(personId) : undefined);
  return {
    splitVersionId: split.splitVersionId,
    shares: {
      convention: "The writer side and the publisher side each total 100.00.",
      writers: split.writers.map((row) => ({
        name: confirmed(row.personId)?.creditName ?? row.name,
        role: row.role as LicenceRecordInput["shares"]["writers"][number]["role"],
        ipi: row.ipi ?? confirmed(row.personId)?.ipi ?? null,
        society: confirmed(row.personId)?.society ?? null,
        share: percent(row.shareBps),
      })),
      publishers: split.publishers.map((row) => ({
        name: row.name,
        role: row.role as LicenceRecordInput["shares"]["publishers"][number]["role"],
        ipi: row.ipi,
        society: null,
        share: percent(row.shareBps),
        territory: "World",
      })),
    },
  };
}

interface CertificateBody {
  screenedAt?: string;
  index?: { engineVersion?: number | string; sequence?: number; recordings?: number };
  words?: string;
}

/** What the screening certificate of the head says, in the record's form. */
async function screeningOf(reader: Reader, family: Family): Promise<LicenceRecordInput["screening"]> {
  const certificate = family.headRecordingId ? await certificateOf(reader, family.headRecordingId) : null;
  assert(certificate, `the head of ${family.id} has a screening certificate`);
  const body = certificate.body as CertificateBody;
  return {
    certificate: certificate.id,
    screenedAt: new Date(body.screenedAt ?? certificate.issuedAt).toISOString(),
    indexSequence: body.index?.sequence ?? 0,
    recordingsCompared: body.index?.recordings ?? 0,
    engineVersion: String(body.index?.engineVersion ?? "1"),
    result: body.words ?? "See the certificate.",
  };
}

function claimsContactOf(library: Library): LicenceRecordInput["claimsContact"] {
  const address = /<([^>]+)>/.exec(env.MAIL_FROM)?.[1] ?? env.MAIL_FROM;
  return { name: `${library.name}, by way of Sedgewren`, email: address, post: null };
}

export type CatalogueFacts = Pick<
  LicenceRecordInput,
  "licensor" | "cue" | "shares" | "recording" | "screening" | "claimsContact"
>;

/** Everything in a record that the catalogue and the screening know of a cue at a moment. */
export async function catalogueFacts(
  reader: Reader,
  args: { family: Family; recordingIds: readonly string[]; at: Date },
): Promise<{ facts: CatalogueFacts; library: Library }> {
  const { family, recordingIds, at } = args;
  const library = await libraryById(reader, family.libraryId);
  assert(library, `the library of ${family.id} is there`);
  const { shares, splitVersionId } = await sharesOf(reader, family, library, at);
  const year = family.yearRecorded ?? civilDateIn(at, library.timeZone).slice(0, 4);
  return {
    library,
    facts: {
      licensor: {
        legalName: library.name,
        capacity: family.deal === "exclusive" ? "exclusive administrator" : "agent",
        chainReference: `The writers' accepted split ${splitVersionId}, and the declarations signed with the delivery of ${family.catalogueNumber}`,
      },
      cue: {
        title: family.title,
        otherTitles: family.otherTitles,
        library: library.name,
        catalogueNumber: family.catalogueNumber,
        iswc: family.iswc,
        versions: await versionsOf(reader, family.id, recordingIds),
      },
      shares,
      recording: { owner: library.name, performers: [], phonogramLine: `(P) ${year} ${library.name}` },
      screening: await screeningOf(reader, family),
      claimsContact: claimsContactOf(library),
    },
  };
}
