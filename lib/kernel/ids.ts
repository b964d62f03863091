import { randomBytes } from "node:crypto";

const ALPHABET = "0123456789abcdefghjkmnpqrstvwxyz";

/** Prefixed, time-ordered public id: `rec_` + 9 characters of milliseconds + 15 of chance (75 bits). */
export function newId(prefix: string): string {
  let time = Date.now();
  let stamp = "";
  for (let index = 0; index < 9; index++) {
    stamp = ALPHABET[time % 32] + stamp;
    time = Math.floor(time / 32);
  }
  const chance = Array.from(randomBytes(15), (byte) => ALPHABET[byte % 32]).join("");
  return `${prefix}_${stamp}${chance}`;
}

export const ID_PATTERN = /^[a-z]{2,5}_[0-9a-z]{24}$/;

/** 160 random bits for links and one-use tickets, URL-safe. */
export function newSecret(): string {
  return randomBytes(20).toString("base64url");
}
