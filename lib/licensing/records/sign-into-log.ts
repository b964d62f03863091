import type { Tx } from "@/db/client";
import { licenceRecords } from "@/db/schema/licensing";
import { env } from "@/lib/kernel/env";
import { newProofCode } from "@/lib/kernel/proof-code";
import { buildRecord } from "../record/build-record";
import { canonicalJson, type JsonValue } from "../record/canonical-json";
import type { LicenceRecord, LicenceRecordInput } from "../record/schema";
import { signRecord } from "../record/sign-record";
import type { RecordOrigin } from "../states";
import { TERMS_TEXT, TERMS_VERSION, WARRANTIES } from "../terms";
import { keyToSignWith } from "./current-key";
import { takeLogPlace, writeRecordLeaf } from "./record-log";

/** What the caller knows of a licence; what every record has alike is added here. */
export type RecordContent = Omit<
  LicenceRecordInput,
  | "demonstration"
  | "origin"
  | "verify"
  | "issuedAt"
  | "statusAtIssue"
  | "signing"
  | "terms"
  | "warranties"
  | "amendments"
  | "performanceIncluded"
>;

export interface RecordRefs {
  origin: RecordOrigin;
  orderLineId: string | null;
  libraryId: string;
  companyId: string | null;
  productionId: string | null;
  familyId: string;
}

/** LICENSING-5: builds, signs and stores the record of one licence and gives it its place in the log. */
export async function signIntoLog(
  tx: Tx,
  content: RecordContent,
  refs: RecordRefs,
  now: Date,
): Promise<{ record: LicenceRecord; proofCode: string }> {
  const key = await keyToSignWith(tx, now);
  const log = await takeLogPlace(tx, now);
  const proofCode = newProofCode();
  const { record, disclosed } = buildRecord({
    ...content,
    demonstration: env.SEDGEWREN_MODE === "demo",
    origin: refs.origin,
    verify: { address: `${env.SITE_URL}/check`, proofCode },
    issuedAt: now.toISOString(),
    statusAtIssue: "in force",
    performanceIncluded: false,
    terms: { version: TERMS_VERSION, text: TERMS_TEXT },
    warranties: [...WARRANTIES],
    amendments: [],
    signing: { keyId: key.keyId, algorithm: "Ed25519", log },
  });
  const seal = signRecord(record, key);
  await tx.insert(licenceRecords).values({
    number: record.number,
    proofCode,
    ...refs,
    canonical: canonicalJson(record as unknown as JsonValue),
    confidential: disclosed,
    sha256: seal.statement.recordSha256,
    keyId: key.keyId,
    signature: seal.signature.value,
    lastUseAt: record.scope.term.lastUseAt === null ? null : new Date(record.scope.term.lastUseAt),
    issuedAt: now,
  });
  await writeRecordLeaf(tx, log, seal.statement);
  return { record, proofCode };
}
