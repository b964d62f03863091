import { eq } from "drizzle-orm";
import { z } from "zod";
import type { Reader } from "@/db/client";
import { people } from "@/db/schema/accounts";
import { type Actor, SIGNED_IN, system } from "@/lib/kernel/actor";
import { systemNow } from "@/lib/kernel/clock";
import { env } from "@/lib/kernel/env";
import { Expected, Forbidden, Invalid, NotFound } from "@/lib/kernel/errors";
import { openField, sealField } from "@/lib/kernel/field-crypto";
import { command, query } from "@/lib/kernel/verb";
import { codeAddress, newCodeSecret, stepAt, stepOfCode, usableCode } from "./one-time-code";
import { ConfirmSecondFactor } from "./schemas";
import { SECOND_FACTOR_MINUTES } from "./states";
import { forgetAttempts, pause, takeAttempt } from "./throttle";

const placeOf = (personId: string) => `people.totp:${personId}`;

/** The form sends the person to give the code again and brings them back. */
export class SecondFactorNeeded extends Expected {
  constructor() {
    super(
      "precondition",
      `Money, keys and roles ask for your second factor again when it was last given more than ${SECOND_FACTOR_MINUTES} minutes ago. Nothing was changed.`,
      { secondFactor: "again" },
    );
  }
}

/** For verbs about money, keys and roles. The system acts on events that were authorised before. */
export function requireRecentSecondFactor(actor: Actor): void {
  if (actor.kind === "system") return;
  const givenAt = "personId" in actor && actor.secondFactorAt ? Date.parse(actor.secondFactorAt) : Number.NaN;
  const ageMs = systemNow().getTime() - givenAt;
  if (!(ageMs <= SECOND_FACTOR_MINUTES * 60_000)) throw new SecondFactorNeeded();
}

async function readPerson(reader: Reader, personId: string) {
  const [row] = await reader.select().from(people).where(eq(people.id, personId));
  if (!row) throw new NotFound();
  return row;
}

/** Makes a secret that waits for its first code. A factor in use stays in use until then. */
export const startSecondFactor = command({
  name: "accounts.startSecondFactor",
  who: SIGNED_IN,
  input: z.object({}),
  authorise: async ({ tx, actor }) => {
    const [row] = await tx.select().from(people).where(eq(people.id, actor.personId)).for("update");
    if (!row) throw new NotFound();
    if (row.totpConfirmedAt) requireRecentSecondFactor(actor);
    return row;
  },
  run: async ({ tx, subject }) => {
    const sealed = sealField(newCodeSecret(), placeOf(subject.id));
    await tx.update(people).set({ totpPendingSecret: sealed }).where(eq(people.id, subject.id));
    return null;
  },
  audit: ({ actor }) => ({ subject: actor.personId }),
});

/** The secret that waits, for its owner to scan or type; gone once its first code was given. */
export const pendingSecondFactor = query({
  name: "accounts.pendingSecondFactor",
  who: SIGNED_IN,
  input: z.object({}),
  authorise: ({ reader, actor }) => readPerson(reader, actor.personId),
  run: async ({ subject }) => {
    if (!subject.totpPendingSecret) return null;
    const secret = openField(subject.totpPendingSecret, placeOf(subject.id));
    return { secret, address: codeAddress(secret, subject.email) };
  },
});

const takeCode = command({
  name: "accounts.takeCode",
  who: ["system"],
  input: ConfirmSecondFactor,
  authorise: async ({ tx, input }) => {
    const [row] = await tx.select().from(people).where(eq(people.id, input.personId)).for("update");
    if (!row || row.disabledAt || row.sessionVersion !== input.sessionVersion) throw new NotFound();
    return row;
  },
  run: async ({ tx, input, subject }) => {
    const now = systemNow();
    const given = (sealed: string | null, lastStep: number | null) =>
      sealed ? stepOfCode(openField(sealed, placeOf(subject.id)), input.code, now, lastStep) : null;
    const step = given(subject.totpConfirmedAt ? subject.totpSecret : null, subject.totpLastStep);
    const pendingStep = step === null ? given(subject.totpPendingSecret, null) : null;
    if (step === null && pendingStep === null) {
      throw new Invalid(
        "This code is not right, or was used already. Wait for the next one and write that.",
        {
          code: "This code is not right, or was used already.",
        },
      );
    }
    const change =
      step !== null
        ? { totpLastStep: step }
        : {
            totpSecret: subject.totpPendingSecret,
            totpPendingSecret: null,
            totpConfirmedAt: now,
            totpLastStep: pendingStep,
          };
    await tx.update(people).set(change).where(eq(people.id, subject.id));
    await forgetAttempts(tx, "code", input.personId, input.address);
    return { at: now.toISOString(), isSetUp: pendingStep !== null };
  },
  audit: ({ input, result }) => ({ subject: input.personId, detail: { setUp: result.isSetUp } }),
});

/**
 * Takes the code of the factor in use, or the first code of one being set up, which then takes its place. Codes are
 * counted and slowed like passwords. Answers when it was given, for the session to carry.
 */
export async function confirmSecondFactor(
  given: z.input<typeof ConfirmSecondFactor>,
): Promise<{ at: string }> {
  const door = system("sign-in");
  const { waitMs } = await takeAttempt(door, {
    door: "code",
    account: given.personId,
    address: given.address,
  });
  await pause(waitMs);
  const { at } = await takeCode(door, given);
  return { at };
}

/** In a demonstration the page fills in the code of the demonstration's own people. */
export const demonstrationCode = query({
  name: "accounts.demonstrationCode",
  who: SIGNED_IN,
  input: z.object({}),
  authorise: async ({ reader, actor }) => {
    const row = await readPerson(reader, actor.personId);
    if (env.SEDGEWREN_MODE !== "demo" || !row.demo) throw new Forbidden("Codes are shown to nobody.");
    return row;
  },
  run: async ({ subject }): Promise<{ code: string | null; nextInS: number }> => {
    if (!subject.totpSecret) return { code: null, nextInS: 0 };
    const now = systemNow();
    const secret = openField(subject.totpSecret, placeOf(subject.id));
    const code = usableCode(secret, now, subject.totpLastStep);
    return { code, nextInS: 30 - (Math.floor(now.getTime() / 1000) % 30) };
  },
});

/** Gives a demonstration's person a factor that is set up, so that the first look needs no telephone. */
export const setUpDemonstrationFactor = command({
  name: "accounts.setUpDemonstrationFactor",
  who: ["system"],
  input: z.object({ personId: z.string() }),
  authorise: async ({ tx, input }) => {
    const [row] = await tx.select().from(people).where(eq(people.id, input.personId)).for("update");
    if (!row?.demo || env.SEDGEWREN_MODE !== "demo") throw new NotFound();
    return row;
  },
  run: async ({ tx, subject }) => {
    if (subject.totpConfirmedAt) return null;
    const now = systemNow();
    const totpSecret = sealField(newCodeSecret(), placeOf(subject.id));
    await tx
      .update(people)
      .set({ totpSecret, totpConfirmedAt: now, totpLastStep: stepAt(now) - 1 })
      .where(eq(people.id, subject.id));
    return null;
  },
  audit: ({ input }) => ({ subject: input.personId }),
});
