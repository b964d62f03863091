import { z } from "zod";

/** Addresses are kept in lower case without spaces around them. */
export const EmailAddress = z
  .string()
  .trim()
  .toLowerCase()
  .max(254, "An e-mail address has at most 254 characters.")
  .pipe(z.email("This is not an e-mail address: write it like name@example.org."));
