import type { JsonValue } from "./canonical-json";
import { canonicalJson } from "./canonical-json";
import type { Disclosed } from "./confidential";
import type { DayRoot } from "./day-root";
import type { LicenceRecord, StatusEvent } from "./schema";
import { type SigningKey, sha256Hex, signHex } from "./signing-key";

/** A statement, and a signature over its canonical JSON. The key's name stands in both. */
export interface Signed<T> {
  readonly statement: T;
  readonly signature: { readonly keyId: string; readonly algorithm: "Ed25519"; readonly value: string };
}

export function signStatement<T extends { readonly keyId: string }>(
  statement: T,
  key: SigningKey,
): Signed<T> {
  if (statement.keyId !== key.keyId)
    throw new RangeError(`the statement names key ${statement.keyId}, not ${key.keyId}`);
  const value = signHex(canonicalJson(statement as unknown as JsonValue), key.privateKey);
  return { statement, signature: { keyId: key.keyId, algorithm: "Ed25519", value } };
}

/**
 * What is signed of a record: its hash, and the hash of each of its parts, so that a reader of an altered copy
 * learns which part was altered. The seal's canonical JSON is the record's leaf in the day's tree.
 */
export interface Seal {
  readonly format: "sedgewren-seal/1";
  readonly number: string;
  readonly keyId: string;
  readonly recordSha256: string;
  readonly parts: Readonly<Record<string, string>>;
}

/** A licence's whole history up to `asOf`, signed when it is served: a line cannot be left out unnoticed. */
export interface StatusStatement {
  readonly format: "sedgewren-licence-status/1";
  readonly number: string;
  readonly keyId: string;
  readonly recordSha256: string;
  readonly asOf: string;
  readonly events: readonly StatusEvent[];
}

export interface Inclusion {
  readonly leafIndex: number;
  readonly path: readonly string[];
  readonly root: Signed<DayRoot>;
}

/** The file that a licensee keeps and a stranger checks. */
export interface LicenceFile {
  readonly record: LicenceRecord;
  readonly disclosed: Disclosed;
  readonly seal: Signed<Seal>;
  readonly status: Signed<StatusStatement> | null;
  readonly inclusion: Inclusion | null;
}

export function recordSha256(record: LicenceRecord): string {
  return sha256Hex(canonicalJson(record as unknown as JsonValue));
}

export function sealOf(record: LicenceRecord): Seal {
  const parts = Object.entries(record).map(
    ([name, part]) => [name, sha256Hex(canonicalJson(part as JsonValue))] as const,
  );
  return {
    format: "sedgewren-seal/1",
    number: record.number,
    keyId: record.signing.keyId,
    recordSha256: recordSha256(record),
    parts: Object.fromEntries(parts),
  };
}

export function signRecord(record: LicenceRecord, key: SigningKey): Signed<Seal> {
  return signStatement(sealOf(record), key);
}

export function signStatus(
  record: LicenceRecord,
  events: readonly StatusEvent[],
  asOf: Date,
  key: SigningKey,
): Signed<StatusStatement> {
  events.forEach((event, index) => {
    const before = events[index - 1];
    if (event.number !== record.number || event.sequence !== index + 1 || (before && event.at < before.at))
      throw new RangeError(`status line ${index + 1} of ${record.number} is out of place`);
  });
  const statement: StatusStatement = {
    format: "sedgewren-licence-status/1",
    number: record.number,
    keyId: key.keyId,
    recordSha256: recordSha256(record),
    asOf: asOf.toISOString(),
    events,
  };
  return signStatement(statement, key);
}
