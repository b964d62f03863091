import { eq, lt } from "drizzle-orm";
import { z } from "zod";
import { people, signInLinks } from "@/db/schema/accounts";
import { EVERYONE } from "@/lib/kernel/actor";
import { systemNow } from "@/lib/kernel/clock";
import { env } from "@/lib/kernel/env";
import { NotFound } from "@/lib/kernel/errors";
import { newSecret } from "@/lib/kernel/ids";
import { command, open, query } from "@/lib/kernel/verb";
import { enqueueMail } from "@/lib/mail";
import { RequestSignInLink } from "./schemas";
import { LINK_MINUTES } from "./states";
import { countAttempt, tooSoon } from "./throttle";
import { tokenHash } from "./tokens";

/**
 * Sends a link to any address: one with an account signs in by it, one without opens an account by it. So neither the
 * answer nor its time can tell which addresses have one.
 */
export const requestSignInLink = command({
  name: "accounts.requestSignInLink",
  who: EVERYONE,
  input: RequestSignInLink,
  authorise: open("the link goes to the mailbox, and only the mailbox can use it"),
  run: async ({ tx, input }) => {
    const waitMs = await countAttempt(tx, "link", input.email, input.address);
    if (waitMs > 0) throw tooSoon(waitMs);
    const now = systemNow();
    const token = newSecret();
    await tx.delete(signInLinks).where(lt(signInLinks.expiresAt, now));
    const expiresAt = new Date(now.getTime() + LINK_MINUTES * 60_000);
    await tx.insert(signInLinks).values({ tokenHash: tokenHash(token), email: input.email, expiresAt });
    await enqueueMail(tx, {
      toAddress: input.email,
      template: "sign-in-link",
      props: {
        url: new URL(`/sign-in/link?token=${token}`, env.SITE_URL).href,
        expiresAt: expiresAt.toISOString(),
        zone: "Etc/UTC",
      },
      subjectId: tokenHash(token).slice(0, 40),
    });
    return null;
  },
  audit: ({ input }) => ({ subject: tokenHash(input.email).slice(0, 40) }),
});

/** For the page that the link opens. Opening it uses nothing up: mail scanners follow links. */
export const getSignInLink = query({
  name: "accounts.getSignInLink",
  who: EVERYONE,
  input: z.object({ token: z.string().max(100) }),
  authorise: async ({ reader, input }) => {
    const [row] = await reader
      .select()
      .from(signInLinks)
      .where(eq(signInLinks.tokenHash, tokenHash(input.token)));
    if (!row || row.expiresAt <= systemNow())
      throw new NotFound("This link was used already, or is too old.");
    return row;
  },
  run: async ({ reader, subject }) => {
    const [known] = await reader
      .select({ id: people.id })
      .from(people)
      .where(eq(people.email, subject.email));
    return { email: subject.email, hasAccount: known !== undefined };
  },
});
