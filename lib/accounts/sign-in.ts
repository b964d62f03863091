import { eq } from "drizzle-orm";
import { z } from "zod";
import { people, signInLinks } from "@/db/schema/accounts";
import { system } from "@/lib/kernel/actor";
import { systemNow } from "@/lib/kernel/clock";
import { Invalid, NotFound } from "@/lib/kernel/errors";
import { newId } from "@/lib/kernel/ids";
import { command, open, query } from "@/lib/kernel/verb";
import { EmailAddress } from "./emails";
import { passwordFits } from "./password-hash";
import { PersonName } from "./schemas";
import { forgetAttempts, pause, takeAttempt } from "./throttle";
import { tokenHash } from "./tokens";

export interface SignedInPerson {
  personId: string;
  sessionVersion: number;
}

const readPassword = query({
  name: "accounts.readPassword",
  who: ["system"],
  input: z.object({ email: EmailAddress }),
  authorise: open("the sign-in door compares it and gives nothing of it away"),
  run: async ({ reader, input }) => {
    const [row] = await reader
      .select({ id: people.id, passwordHash: people.passwordHash, disabledAt: people.disabledAt })
      .from(people)
      .where(eq(people.email, input.email));
    return row ?? null;
  },
});

const recordPasswordSignIn = command({
  name: "accounts.recordPasswordSignIn",
  who: ["system"],
  input: z.object({ personId: z.string(), email: z.string(), address: z.string() }),
  authorise: async ({ tx, input }) => {
    const [row] = await tx.select().from(people).where(eq(people.id, input.personId));
    if (!row || row.disabledAt) throw new NotFound();
    return row;
  },
  run: async ({ tx, input, subject }): Promise<SignedInPerson> => {
    await forgetAttempts(tx, "password", input.email, input.address);
    return { personId: subject.id, sessionVersion: subject.sessionVersion };
  },
  audit: ({ input }) => ({ subject: input.personId, detail: { by: "password" } }),
});

/**
 * Null for a wrong password, an unknown address, a disabled account and an account without a password alike, after
 * the same work. Throws Limit where the wait would be long.
 */
export async function signInWithPassword(given: {
  email: string;
  password: string;
  address: string;
}): Promise<SignedInPerson | null> {
  const email = EmailAddress.safeParse(given.email);
  if (!email.success || given.password.length > 1024) return null;
  const door = system("sign-in");
  const attempt = { door: "password" as const, account: email.data, address: given.address };
  const { waitMs } = await takeAttempt(door, attempt);
  await pause(waitMs);
  const found = await readPassword(door, { email: email.data });
  const fits = await passwordFits(found?.passwordHash ?? null, given.password);
  if (!found || !fits || found.disabledAt) return null;
  return recordPasswordSignIn(door, { personId: found.id, email: email.data, address: given.address });
}

/** Uses a link up. An address without an account gets one here, under the name given. */
const spendSignInLink = command({
  name: "accounts.spendSignInLink",
  who: ["system"],
  input: z.object({ token: z.string().max(100), name: PersonName.optional() }),
  guard: async ({ tx, input }) => {
    await tx
      .select({ email: signInLinks.email })
      .from(signInLinks)
      .where(eq(signInLinks.tokenHash, tokenHash(input.token)))
      .for("update");
  },
  authorise: async ({ tx, input }) => {
    const [link] = await tx
      .select()
      .from(signInLinks)
      .where(eq(signInLinks.tokenHash, tokenHash(input.token)));
    if (!link || link.expiresAt <= systemNow())
      throw new NotFound("This link was used already, or is too old.");
    return link;
  },
  run: async ({ tx, input, subject: link }): Promise<SignedInPerson> => {
    const now = systemNow();
    const [found] = await tx.select().from(people).where(eq(people.email, link.email));
    if (found?.disabledAt) throw new NotFound("This link was used already, or is too old.");
    if (!found && !input.name)
      throw new Invalid("Please write your name.", { name: "Please write your name." });
    await tx.delete(signInLinks).where(eq(signInLinks.tokenHash, link.tokenHash));
    if (found) {
      await tx
        .update(people)
        .set({ linkUsedAt: now, emailVerifiedAt: found.emailVerifiedAt ?? now })
        .where(eq(people.id, found.id));
      return { personId: found.id, sessionVersion: found.sessionVersion };
    }
    const personId = newId("per");
    await tx.insert(people).values({
      id: personId,
      email: link.email,
      name: input.name ?? "",
      emailVerifiedAt: now,
      linkUsedAt: now,
      createdAt: now,
    });
    return { personId, sessionVersion: 1 };
  },
  audit: ({ result }) => ({ subject: result.personId, detail: { by: "link" } }),
});

export function signInWithLink(given: { token: string; name?: string | undefined }): Promise<SignedInPerson> {
  return spendSignInLink(system("sign-in"), {
    token: given.token,
    ...(given.name ? { name: given.name } : {}),
  });
}
