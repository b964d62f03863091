import { z } from "zod";

const id = z.string().max(40);
const currency = z.string().regex(/^[A-Z]{3}$/, "a currency is three capital letters");

export const StartPayee = z.object({
  legalName: z
    .string()
    .trim()
    .min(2, "Write the name that the bank account is in.")
    .max(200, "At most 200 characters."),
  countryCode: z
    .string()
    .trim()
    .toUpperCase()
    .regex(/^[A-Z]{2}$/, "Write the country's two letters, for example GB."),
});

export const PreparePayoutRun = z.object({ libraryId: id, currency });
export const RunInput = z.object({ runId: id });

/** A month of the journal: "2026-03". */
export const period = z.string().regex(/^\d{4}-(0[1-9]|1[0-2])$/, "A month is written 2026-03.");
