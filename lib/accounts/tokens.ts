import { createHash } from "node:crypto";

/** Only the hash of a token is kept; the token itself is 160 random bits and needs no salt. */
export const tokenHash = (token: string): string => createHash("sha256").update(token).digest("hex");
