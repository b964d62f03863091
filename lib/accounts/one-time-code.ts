import { Secret, TOTP } from "otpauth";

/** RFC 6238 with the values that every authenticator takes: SHA-1, six digits, 30 seconds. */
const PERIOD_S = 30;
const SHAPE = { algorithm: "SHA1", digits: 6, period: PERIOD_S } as const;
const ISSUER = "Sedgewren";

export const newCodeSecret = (): string => new Secret({ size: 20 }).base32;

const totpOf = (secret: string, label = "") =>
  new TOTP({ ...SHAPE, issuer: ISSUER, label, secret: Secret.fromBase32(secret) });

export const codeAddress = (secret: string, email: string): string => totpOf(secret, email).toString();

export const stepAt = (at: Date): number => Math.floor(at.getTime() / 1000 / PERIOD_S);

/**
 * The step a code stands for, or null. A step beside the present one is taken, because clocks differ; a step at or
 * before the last one used is not, because a code works once.
 */
export function stepOfCode(secret: string, code: string, at: Date, lastStep: number | null): number | null {
  const digits = code.replace(/\s/g, "");
  if (!/^\d{6}$/.test(digits)) return null;
  const delta = totpOf(secret).validate({ token: digits, timestamp: at.getTime(), window: 1 });
  if (delta === null) return null;
  const step = stepAt(at) + delta;
  return lastStep !== null && step <= lastStep ? null : step;
}

/** The code of the first step that would still be taken, or null until the next step begins. */
export function usableCode(secret: string, at: Date, lastStep: number | null): string | null {
  const present = stepAt(at);
  const step = Math.max(present, (lastStep ?? 0) + 1);
  if (step > present + 1) return null;
  return totpOf(secret).generate({ timestamp: step * PERIOD_S * 1000 });
}
