import { and, asc, eq, isNull, ne, sql } from "drizzle-orm";
import type { Reader, Tx } from "@/db/client";
import { signingKeys } from "@/db/schema/licensing";
import { env } from "@/lib/kernel/env";
import type { KeyList } from "../record/schema";
import { privateKeyFromSeed, publicKeyHexOf, type SigningKey, sha256Hex } from "../record/signing-key";

/** The key of this installation; its name is made from the key, so that two keys never share one. */
export function installationKey(): SigningKey & { publicKey: string } {
  const privateKey = privateKeyFromSeed(env.RECORD_SIGNING_SEED);
  const publicKey = publicKeyHexOf(privateKey);
  return { keyId: `SW-${sha256Hex(publicKey).slice(0, 8).toUpperCase()}`, privateKey, publicKey };
}

/**
 * The key to sign with, put on the published list at its first use: valid from the start of that year, and from then on the
 * one before it is no longer used. (A demonstration's clock may be set back; the validity then reaches back with it.)
 */
export async function keyToSignWith(tx: Tx, now: Date): Promise<SigningKey> {
  const key = installationKey();
  const validFrom = new Date(Date.UTC(now.getUTCFullYear(), 0, 1));
  const [known] = await tx.select().from(signingKeys).where(eq(signingKeys.keyId, key.keyId));
  if (!known) {
    await tx
      .update(signingKeys)
      .set({ validUntil: now })
      .where(and(ne(signingKeys.keyId, key.keyId), isNull(signingKeys.validUntil)));
    await tx
      .insert(signingKeys)
      .values({ keyId: key.keyId, publicKey: key.publicKey, validFrom, validUntil: null })
      .onDuplicateKeyUpdate({ set: { keyId: sql`key_id` } });
  } else if (known.validFrom > now) {
    await tx.update(signingKeys).set({ validFrom }).where(eq(signingKeys.keyId, key.keyId));
  }
  return key;
}

export async function publishedKeys(reader: Reader): Promise<KeyList> {
  const rows = await reader
    .select()
    .from(signingKeys)
    .orderBy(asc(signingKeys.validFrom), asc(signingKeys.keyId));
  return {
    format: "sedgewren-keys/1",
    keys: rows.map(({ keyId, publicKey, validFrom, validUntil }) => ({
      keyId,
      algorithm: "Ed25519" as const,
      publicKey,
      validFrom: validFrom.toISOString(),
      validUntil: validUntil?.toISOString() ?? null,
    })),
  };
}
