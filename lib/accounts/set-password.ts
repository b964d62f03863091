import { eq, sql } from "drizzle-orm";
import { z } from "zod";
import { people } from "@/db/schema/accounts";
import { SIGNED_IN } from "@/lib/kernel/actor";
import { systemNow } from "@/lib/kernel/clock";
import { Invalid, NotFound } from "@/lib/kernel/errors";
import { command } from "@/lib/kernel/verb";
import { hashPassword, passwordFits } from "./password-hash";
import { type PasswordContext, passwordProblem } from "./password-rules";
import { SetPassword } from "./schemas";
import { LINK_MINUTES } from "./states";

export function refuseWeakPassword(password: string, context: PasswordContext): void {
  const problem = passwordProblem(password, context);
  if (problem) throw new Invalid(problem, { password: problem });
}

/** Whoever has just come in by a link has shown that the mailbox is theirs, and may have forgotten the old password. */
export function cameByLink(person: { linkUsedAt: Date | null }): boolean {
  const ageMs = person.linkUsedAt
    ? systemNow().getTime() - person.linkUsedAt.getTime()
    : Number.POSITIVE_INFINITY;
  return ageMs <= LINK_MINUTES * 60_000;
}

export const setPassword = command({
  name: "accounts.setPassword",
  who: SIGNED_IN,
  input: SetPassword,
  authorise: async ({ tx, actor, input }) => {
    const [row] = await tx.select().from(people).where(eq(people.id, actor.personId)).for("update");
    if (!row) throw new NotFound();
    if (
      row.passwordHash &&
      !cameByLink(row) &&
      !(await passwordFits(row.passwordHash, input.current ?? ""))
    ) {
      const message = "This is not the password in use. If you have forgotten it, sign in by a link first.";
      throw new Invalid(message, { current: message });
    }
    return row;
  },
  run: async ({ tx, input, subject }) => {
    refuseWeakPassword(input.password, {
      hasSecondFactor: subject.totpConfirmedAt !== null,
      name: subject.name,
      email: subject.email,
    });
    await tx
      .update(people)
      .set({
        passwordHash: await hashPassword(input.password),
        linkUsedAt: null,
        sessionVersion: sql`${people.sessionVersion} + 1`,
      })
      .where(eq(people.id, subject.id));
    return null;
  },
  audit: ({ actor }) => ({ subject: actor.personId }),
});

/** Every session of this person stops at its next request, this one too. */
export const signOutEverywhere = command({
  name: "accounts.signOutEverywhere",
  who: SIGNED_IN,
  input: z.object({}),
  authorise: async ({ tx, actor }) => {
    const [row] = await tx
      .select({ id: people.id })
      .from(people)
      .where(eq(people.id, actor.personId))
      .for("update");
    if (!row) throw new NotFound();
    return row;
  },
  run: async ({ tx, subject }) => {
    await tx
      .update(people)
      .set({ sessionVersion: sql`${people.sessionVersion} + 1` })
      .where(eq(people.id, subject.id));
    return null;
  },
  audit: ({ actor }) => ({ subject: actor.personId }),
});
