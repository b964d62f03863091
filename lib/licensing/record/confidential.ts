import { randomBytes } from "node:crypto";
import { canonicalJson, type JsonValue } from "./canonical-json";
import { sha256Hex } from "./signing-key";

/**
 * What a licensee may keep to itself. The signed record holds a salted hash at each of these places, always, so that
 * showing or hiding a value later needs no new signature; the values stand beside the record with their salts.
 */
export const CONFIDENTIAL_FIELDS = [
  "licensee.name",
  "licensee.endClient",
  "licensee.address",
  "production.title",
  "production.parts",
  "production.references",
  "fee.details",
  "acceptance.person",
] as const;
export type ConfidentialField = (typeof CONFIDENTIAL_FIELDS)[number];

export interface Disclosure {
  readonly salt: string;
  readonly value: JsonValue;
}
export type Disclosed = Partial<Record<ConfidentialField, Disclosure>>;

/** 128 random bits: without them a short value could be guessed and tried. */
export function newSalt(): string {
  return randomBytes(16).toString("hex");
}

/** SHA-256 over the canonical JSON of the field's name, its salt and its value. */
export function commitment(field: ConfidentialField, { salt, value }: Disclosure): { sha256: string } {
  return { sha256: sha256Hex(canonicalJson({ field, salt, value })) };
}

/** Only the fields that may be shown; the file stays verifiable. */
export function withhold(disclosed: Disclosed, shown: readonly ConfidentialField[]): Disclosed {
  return Object.fromEntries(
    Object.entries(disclosed).filter(([field]) => shown.includes(field as ConfidentialField)),
  );
}
