import { createCipheriv, createDecipheriv, createHmac, randomBytes } from "node:crypto";
import { env } from "./env";

/*
 * Fields that must not be readable in a copy of the database: second-factor secrets, reporters' contact data.
 * AES-256-GCM (NIST SP 800-38D) under FIELD_KEY with a fresh 96-bit nonce; the place of the field is authenticated
 * with it, so that a value moved to another row or column does not open.
 */
const FORM = "f1";
const NONCE_BYTES = 12;
const TAG_BYTES = 16;

const key = (): Buffer => Buffer.from(env.FIELD_KEY, "hex");

/** `place` names table, column and row: "people.totp:per_…". */
export function sealField(plain: string, place: string): string {
  const nonce = randomBytes(NONCE_BYTES);
  const cipher = createCipheriv("aes-256-gcm", key(), nonce, { authTagLength: TAG_BYTES });
  cipher.setAAD(Buffer.from(place, "utf8"));
  const sealed = Buffer.concat([cipher.update(plain, "utf8"), cipher.final()]);
  return `${FORM}.${Buffer.concat([nonce, cipher.getAuthTag(), sealed]).toString("base64url")}`;
}

/** Throws where the value was altered, sealed for another place or under another key. */
export function openField(sealed: string, place: string): string {
  const [form, body, ...rest] = sealed.split(".");
  if (form !== FORM || !body || rest.length > 0) throw new Error(`${place}: not a sealed field`);
  const bytes = Buffer.from(body, "base64url");
  const decipher = createDecipheriv("aes-256-gcm", key(), bytes.subarray(0, NONCE_BYTES), {
    authTagLength: TAG_BYTES,
  });
  decipher.setAAD(Buffer.from(place, "utf8"));
  decipher.setAuthTag(bytes.subarray(NONCE_BYTES, NONCE_BYTES + TAG_BYTES));
  try {
    return (
      decipher.update(bytes.subarray(NONCE_BYTES + TAG_BYTES), undefined, "utf8") + decipher.final("utf8")
    );
  } catch (cause) {
    throw new Error(`${place}: the sealed field does not open`, { cause });
  }
}

/** A keyed hash: equal values can be found again, and the value cannot be guessed from a copy of the database. */
export function blindHash(value: string, purpose: string): string {
  return createHmac("sha256", key()).update(`${purpose}\0${value}`, "utf8").digest("hex");
}
