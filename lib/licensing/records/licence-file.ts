import { asc, eq } from "drizzle-orm";
import type { Reader } from "@/db/client";
import { dayRoots, licenceRecords, licenceVisibility, recordLog } from "@/db/schema/licensing";
import {
  CONFIDENTIAL_FIELDS,
  type ConfidentialField,
  type Disclosed,
  withhold,
} from "../record/confidential";
import { proveInclusion } from "../record/day-root";
import type { LicenceRecord } from "../record/schema";
import { type Inclusion, type LicenceFile, sealOf, signStatus } from "../record/sign-record";
import { PUBLIC_FIELDS } from "../states";
import { installationKey, publishedKeys } from "./current-key";
import { signedRootOf } from "./publish-day";
import { statusHistory } from "./record-log";

export type RecordRow = typeof licenceRecords.$inferSelect;

export async function recordByNumber(reader: Reader, number: string): Promise<RecordRow | null> {
  const [row] = await reader.select().from(licenceRecords).where(eq(licenceRecords.number, number));
  return row ?? null;
}

export async function recordByProof(reader: Reader, proofCode: string): Promise<RecordRow | null> {
  const [row] = await reader.select().from(licenceRecords).where(eq(licenceRecords.proofCode, proofCode));
  return row ?? null;
}

export async function withheldOf(reader: Reader, number: string): Promise<string[]> {
  const [row] = await reader
    .select({ withheld: licenceVisibility.withheld })
    .from(licenceVisibility)
    .where(eq(licenceVisibility.licenceNumber, number));
  return row?.withheld ?? [];
}

async function inclusionOf(reader: Reader, record: LicenceRecord): Promise<Inclusion | null> {
  const { day, position } = record.signing.log;
  const [root] = await reader.select().from(dayRoots).where(eq(dayRoots.day, day));
  if (!root) return null;
  const leaves = await reader
    .select({ leaf: recordLog.leaf })
    .from(recordLog)
    .where(eq(recordLog.day, day))
    .orderBy(asc(recordLog.position));
  return proveInclusion(
    leaves.map(({ leaf }) => leaf),
    position,
    signedRootOf(root),
  );
}

/**
 * The file of one licence as it is served at a moment: the stored record and seal, what may be shown of the confidential
 * fields, the history in one statement signed now, and the proof of its place in the log once its day has a root.
 */
export async function licenceFile(
  reader: Reader,
  row: RecordRow,
  audience: "licensee" | "public",
  now: Date,
): Promise<LicenceFile> {
  const record = JSON.parse(row.canonical) as LicenceRecord;
  const withheld = audience === "public" ? await withheldOf(reader, row.number) : [];
  const shown = (audience === "public" ? PUBLIC_FIELDS : CONFIDENTIAL_FIELDS).filter(
    (field) => !withheld.includes(field),
  ) as ConfidentialField[];
  const key = installationKey();
  const { keys } = await publishedKeys(reader);
  const isPublished = keys.some(
    ({ keyId, validFrom }) => keyId === key.keyId && validFrom <= now.toISOString(),
  );
  return {
    record,
    disclosed: withhold(row.confidential as Disclosed, shown),
    seal: {
      statement: sealOf(record),
      signature: { keyId: row.keyId, algorithm: "Ed25519", value: row.signature },
    },
    status: isPublished ? signStatus(record, await statusHistory(reader, row.number), now, key) : null,
    inclusion: await inclusionOf(reader, record),
  };
}

/** Licences of a family, for rooms that must tell their holders something. */
export async function licencesOfFamily(reader: Reader, familyId: string) {
  return reader
    .select({
      number: licenceRecords.number,
      companyId: licenceRecords.companyId,
      productionId: licenceRecords.productionId,
      origin: licenceRecords.origin,
    })
    .from(licenceRecords)
    .where(eq(licenceRecords.familyId, familyId))
    .orderBy(asc(licenceRecords.number));
}
