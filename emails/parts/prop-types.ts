import { z } from "zod";

/** Props are kept as JSON until the mail is sent, so times are ISO 8601 in UTC and amounts are text. */
export const instant = z.iso.datetime();
export const link = z.url({ protocol: /^https?$/ });
export const line = z.string().trim().min(1).max(300);
export const prose = z.string().trim().min(1).max(8000);
/** An IANA zone, in which the reader's times are written. */
export const zone = z.string().default("UTC");
export const amount = z.object({
  minor: z.string().regex(/^-?\d{1,18}$/),
  currency: z.string().regex(/^[A-Z]{3}$/),
});

export type Amount = z.infer<typeof amount>;
