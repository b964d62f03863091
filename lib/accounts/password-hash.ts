import { randomBytes } from "node:crypto";
import { hash, verify } from "@node-rs/argon2";

// The package declares its algorithms as a const enum, which modules compiled one by one cannot read.
const ARGON2ID = 2;

/** Argon2id (RFC 9106) with 19 MiB, two passes, one lane: the smallest setting that OWASP's password storage sheet lists first. */
const SETTING = { algorithm: ARGON2ID, memoryCost: 19_456, timeCost: 2, parallelism: 1 } as const;

/**
 * Two keyboards may send one character in different ways, so a password is brought to NFKC before it is hashed and
 * before it is compared (NIST SP 800-63B-4); nothing else about it is changed, and nothing is cut off.
 */
export const normalisePassword = (password: string): string => password.normalize("NFKC");

export function hashPassword(password: string): Promise<string> {
  return hash(normalisePassword(password), SETTING);
}

let nobodysHash: Promise<string> | undefined;

/**
 * Compares in the same time whether or not there is a hash to compare with: an address without an account, or an
 * account without a password, is compared with a hash that nobody's password gives.
 */
export async function passwordFits(passwordHash: string | null, password: string): Promise<boolean> {
  nobodysHash ??= hash(randomBytes(32), SETTING);
  const nobodys = await nobodysHash;
  const fits = await verify(passwordHash ?? nobodys, normalisePassword(password));
  return fits && passwordHash !== null;
}
