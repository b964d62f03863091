import { eq, sql } from "drizzle-orm";
import { z } from "zod";
import { people } from "@/db/schema/accounts";
import { systemNow } from "@/lib/kernel/clock";
import { env } from "@/lib/kernel/env";
import { Conflict, NotFound, Precondition } from "@/lib/kernel/errors";
import { newId } from "@/lib/kernel/ids";
import { isDuplicateKey } from "@/lib/kernel/transaction";
import { command, open } from "@/lib/kernel/verb";
import { hashPassword } from "./password-hash";
import { RegisterPerson } from "./schemas";
import { requireRecentSecondFactor } from "./second-factor";
import { refuseWeakPassword } from "./set-password";

/** For commands that set an installation up. People come in by an invitation or a link. */
export const registerPerson = command({
  name: "accounts.registerPerson",
  who: ["system"],
  input: RegisterPerson,
  authorise: open("only the system's own commands call it"),
  run: async ({ tx, input }) => {
    if (input.demo && env.SEDGEWREN_MODE !== "demo") {
      throw new Precondition("A live installation knows no people of the demonstration.");
    }
    const { email, name, timeZone, demo } = input;
    if (input.password) refuseWeakPassword(input.password, { name, email, hasSecondFactor: false });
    const passwordHash = input.password ? await hashPassword(input.password) : null;
    const now = systemNow();
    const personId = newId("per");
    try {
      await tx.insert(people).values({
        id: personId,
        email,
        name,
        timeZone,
        demo,
        passwordHash,
        emailVerifiedAt: now,
        createdAt: now,
      });
    } catch (error) {
      if (isDuplicateKey(error)) throw new Conflict(`${email} has an account already.`, { cause: error });
      throw error;
    }
    return { personId };
  },
  audit: ({ result }) => ({ subject: result.personId }),
});

const PersonInput = z.object({ personId: z.string().max(40) });

/** A disabled person's sessions stop at once; what they made stays. */
export const disablePerson = command({
  name: "accounts.disablePerson",
  who: ["admin"],
  input: PersonInput,
  authorise: async ({ tx, actor, input }) => {
    requireRecentSecondFactor(actor);
    const [row] = await tx.select().from(people).where(eq(people.id, input.personId)).for("update");
    if (!row) throw new NotFound();
    if (row.id === actor.personId) throw new Precondition("You cannot disable your own account.");
    return row;
  },
  run: async ({ tx, subject }) => {
    await tx
      .update(people)
      .set({ disabledAt: systemNow(), sessionVersion: sql`${people.sessionVersion} + 1` })
      .where(eq(people.id, subject.id));
    return null;
  },
  audit: ({ input }) => ({ subject: input.personId }),
});

export const enablePerson = command({
  name: "accounts.enablePerson",
  who: ["admin"],
  input: PersonInput,
  authorise: async ({ tx, actor, input }) => {
    requireRecentSecondFactor(actor);
    const [row] = await tx.select().from(people).where(eq(people.id, input.personId)).for("update");
    if (!row) throw new NotFound();
    return row;
  },
  run: async ({ tx, subject }) => {
    await tx.update(people).set({ disabledAt: null }).where(eq(people.id, subject.id));
    return null;
  },
  audit: ({ input }) => ({ subject: input.personId }),
});

/**
 * For a lost telephone. The password goes with the factor, because it may be a short one that never stood alone: the
 * person comes in by a link and sets both again.
 */
export const resetSecondFactor = command({
  name: "accounts.resetSecondFactor",
  who: ["admin"],
  input: PersonInput,
  authorise: async ({ tx, actor, input }) => {
    requireRecentSecondFactor(actor);
    const [row] = await tx.select().from(people).where(eq(people.id, input.personId)).for("update");
    if (!row) throw new NotFound();
    return row;
  },
  run: async ({ tx, subject }) => {
    await tx
      .update(people)
      .set({
        totpSecret: null,
        totpPendingSecret: null,
        totpConfirmedAt: null,
        totpLastStep: null,
        passwordHash: null,
        sessionVersion: sql`${people.sessionVersion} + 1`,
      })
      .where(eq(people.id, subject.id));
    return null;
  },
  audit: ({ input }) => ({ subject: input.personId }),
});
