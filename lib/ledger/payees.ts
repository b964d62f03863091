import { and, eq } from "drizzle-orm";
import { z } from "zod";
import type { Reader, Tx } from "@/db/client";
import { payees } from "@/db/schema/ledger";
import { type PersonRef, peopleByIds, peopleWithRole, requireRecentSecondFactor } from "@/lib/accounts";
import { enqueue } from "@/lib/jobs";
import type { ActorOf } from "@/lib/kernel/actor";
import { env } from "@/lib/kernel/env";
import { NotFound, Precondition } from "@/lib/kernel/errors";
import { newId } from "@/lib/kernel/ids";
import { command, query } from "@/lib/kernel/verb";
import { enqueueMail } from "@/lib/mail";
import { StartPayee } from "./schemas";
import { BANK_HOLD_DAYS, type PayeeState } from "./states";

export type PayeeKind = "library" | "person";
type PayeeRow = typeof payees.$inferSelect;
type WhoIsPaid = ActorOf<"owner" | "accountant" | "composer">;

/** Whose payee an actor looks after: the library's for its owner and accountant, a composer's own. */
function holderOf(actor: WhoIsPaid): { kind: PayeeKind; holderId: string } {
  if (actor.kind === "composer") return { kind: "person", holderId: actor.personId };
  if (actor.libraryId === null) throw new NotFound();
  return { kind: "library", holderId: actor.libraryId };
}

async function payeeOf(reader: Reader, kind: PayeeKind, holderId: string): Promise<PayeeRow | null> {
  const [row] = await reader
    .select()
    .from(payees)
    .where(and(eq(payees.kind, kind), eq(payees.holderId, holderId)));
  return row ?? null;
}

/** Who hears of a payee's affairs: the person, or the library's owners and accountants. */
export async function contactsOf(
  reader: Reader,
  payee: { kind: string; holderId: string },
): Promise<PersonRef[]> {
  if (payee.kind === "person") return [...(await peopleByIds(reader, [payee.holderId])).values()];
  const owners = await peopleWithRole(reader, "owner", payee.holderId);
  const accountants = await peopleWithRole(reader, "accountant", payee.holderId);
  return [...new Map([...owners, ...accountants].map((person) => [person.id, person])).values()];
}

export function bankHeldUntil(payee: Pick<PayeeRow, "bankChangedAt">): Date | null {
  return payee.bankChangedAt ? new Date(payee.bankChangedAt.getTime() + BANK_HOLD_DAYS * 86_400_000) : null;
}

/** Begins to be a payee. The account at the processor is opened by a job; bank and identity are given there. */
export const startPayee = command({
  name: "ledger.startPayee",
  who: ["owner", "accountant", "composer"],
  input: StartPayee,
  authorise: async ({ actor }) => {
    const holder = holderOf(actor);
    if (holder.kind === "library") requireRecentSecondFactor(actor);
    return holder;
  },
  run: async ({ tx, input, subject, now }) => {
    const there = await payeeOf(tx, subject.kind, subject.holderId);
    if (there?.processorAccount)
      throw new Precondition("The account with the payment service is open already. Nothing was changed.");
    const payeeId = there?.id ?? newId("pay");
    if (there) await tx.update(payees).set(input).where(eq(payees.id, there.id));
    else
      await tx
        .insert(payees)
        .values({ id: payeeId, ...subject, ...input, state: "not started", createdAt: now });
    await enqueue(tx, "ledger.openPayee", { payeeId }, { key: payeeId, priority: 20 });
    return { payeeId };
  },
  audit: ({ subject, result }) => ({
    subject: result.payeeId,
    libraryId: subject.kind === "library" ? subject.holderId : null,
    detail: { kind: subject.kind },
  }),
});

export interface OwnPayee {
  kind: PayeeKind;
  state: PayeeState;
  legalName: string;
  bankLast4: string | null;
  /** True once bank and identity can be given to the payment service. */
  isOpen: boolean;
  heldUntil: Date | null;
}

/** The actor's own payee, or null where it has not begun. */
export const getOwnPayee = query({
  name: "ledger.getOwnPayee",
  who: ["owner", "accountant", "composer"],
  input: z.object({}),
  authorise: async ({ actor }) => holderOf(actor),
  run: async ({ reader, subject, now }): Promise<OwnPayee | null> => {
    const row = await payeeOf(reader, subject.kind, subject.holderId);
    if (!row) return null;
    const heldUntil = bankHeldUntil(row);
    return {
      kind: subject.kind,
      state: row.state as PayeeState,
      legalName: row.legalName,
      bankLast4: row.bankLast4,
      isOpen: row.processorAccount !== null,
      heldUntil: heldUntil && heldUntil > now ? heldUntil : null,
    };
  },
});

/** The payee's name at the processor, for asking it for the form's address. */
export const getOwnProcessorAccount = query({
  name: "ledger.getOwnProcessorAccount",
  who: ["owner", "accountant", "composer"],
  input: z.object({}),
  authorise: async ({ actor }) => holderOf(actor),
  run: async ({ reader, subject }): Promise<string> => {
    const row = await payeeOf(reader, subject.kind, subject.holderId);
    if (!row?.processorAccount) throw new NotFound();
    return row.processorAccount;
  },
});

/** What the job needs to open the account. */
export const readPayeeToOpen = query({
  name: "ledger.readPayeeToOpen",
  who: ["system"],
  input: z.object({ payeeId: z.string().max(40) }),
  authorise: async ({ reader, input }) => {
    const [row] = await reader.select().from(payees).where(eq(payees.id, input.payeeId));
    if (!row) throw new NotFound();
    return row;
  },
  run: async ({ reader, subject }) => {
    const [contact] = await contactsOf(reader, subject);
    return {
      payeeId: subject.id,
      countryCode: subject.countryCode,
      processorAccount: subject.processorAccount,
      email: contact?.email ?? null,
    };
  },
});

export const recordPayeeAccount = command({
  name: "ledger.recordPayeeAccount",
  who: ["system"],
  input: z.object({ payeeId: z.string().max(40), accountId: z.string().min(1).max(60) }),
  authorise: async ({ tx, input }) => {
    const [row] = await tx.select().from(payees).where(eq(payees.id, input.payeeId)).for("update");
    if (!row) throw new NotFound();
    return row;
  },
  run: async ({ tx, input, subject }) => {
    if (subject.processorAccount === null)
      await tx
        .update(payees)
        .set({ processorAccount: input.accountId, state: "under way" })
        .where(eq(payees.id, subject.id));
    return null;
  },
  audit: ({ input }) => ({ subject: input.payeeId, detail: { accountId: input.accountId } }),
});

async function tellOfBankChange(tx: Tx, payee: PayeeRow, last4: string, now: Date): Promise<void> {
  const heldUntil = new Date(now.getTime() + BANK_HOLD_DAYS * 86_400_000);
  for (const person of await contactsOf(tx, payee))
    await enqueueMail(tx, {
      toAddress: person.email,
      personId: person.id,
      template: "bank-change-notice",
      props: {
        payeeName: payee.legalName,
        changedAt: now.toISOString(),
        bankLast4: last4,
        heldUntil: heldUntil.toISOString(),
        url: `${env.SITE_URL}${payee.kind === "library" ? "/payouts" : "/statements"}`,
        zone: person.timeZone,
      },
      subjectId: payee.id,
    });
}

/**
 * What the processor says of a payee now: ready or not, and which bank account. Another account than before stops payouts for
 * some days and is told to everybody concerned.
 */
export const recordPayeeReady = command({
  name: "ledger.recordPayeeReady",
  who: ["system"],
  input: z.object({
    accountId: z.string().min(1).max(60),
    isReady: z.boolean(),
    bank: z.object({ ref: z.string().max(60), last4: z.string().max(4) }).nullable(),
  }),
  authorise: async ({ tx, input }) => {
    const [row] = await tx
      .select()
      .from(payees)
      .where(eq(payees.processorAccount, input.accountId))
      .for("update");
    if (!row) throw new NotFound();
    return row;
  },
  run: async ({ tx, input, subject, now }) => {
    const isOtherBank = input.bank !== null && subject.bankRef !== null && subject.bankRef !== input.bank.ref;
    await tx
      .update(payees)
      .set({
        state: input.isReady ? "ready" : "under way",
        ...(input.bank ? { bankRef: input.bank.ref, bankLast4: input.bank.last4 } : {}),
        ...(isOtherBank ? { bankChangedAt: now } : {}),
      })
      .where(eq(payees.id, subject.id));
    if (isOtherBank && input.bank) await tellOfBankChange(tx, subject, input.bank.last4, now);
    return { payeeId: subject.id, isOtherBank };
  },
  audit: ({ subject, result, input }) => ({
    subject: subject.id,
    libraryId: subject.kind === "library" ? subject.holderId : null,
    detail: { isReady: input.isReady, isOtherBank: result.isOtherBank },
  }),
});
