import { and, asc, eq, ne } from "drizzle-orm";
import { z } from "zod";
import type { Tx } from "@/db/client";
import { confirmedNames, memberships, people } from "@/db/schema/accounts";
import { env } from "@/lib/kernel/env";
import { Conflict, Invalid, NotFound } from "@/lib/kernel/errors";
import { newId } from "@/lib/kernel/ids";
import { isDuplicateKey } from "@/lib/kernel/transaction";
import { command, query } from "@/lib/kernel/verb";
import { isLive, roleOf } from "./live";
import { type ConfirmedName, confirmedNamesOf, writerOnRoster } from "./reads";
import { ConfirmName, FindWriter } from "./schemas";
import type { Role } from "./states";

/** Numbers of the demonstration begin so; they belong to nobody and are never sent to a society. */
const DEMO_IPI = /^999/;

async function refuseTakenIpi(
  tx: Tx,
  wanted: { libraryId: string; personId: string; ipi: string | null },
): Promise<void> {
  if (!wanted.ipi) return;
  const [other] = await tx
    .select({ name: confirmedNames.creditName })
    .from(confirmedNames)
    .where(
      and(
        eq(confirmedNames.libraryId, wanted.libraryId),
        eq(confirmedNames.ipi, wanted.ipi),
        ne(confirmedNames.personId, wanted.personId),
      ),
    );
  if (!other) return;
  throw new Conflict(
    `The IPI ${wanted.ipi} is confirmed for ${other.name} already. One of the two is wrong; nothing was changed.`,
  );
}

export const confirmName = command({
  name: "accounts.confirmName",
  who: ["owner", "staff", "system"],
  input: ConfirmName,
  authorise: async ({ tx, actor, input }) => {
    const libraryId = actor.kind === "system" ? input.libraryId : actor.libraryId;
    if (!libraryId || (input.libraryId !== null && input.libraryId !== libraryId)) throw new NotFound();
    const [writer] = await tx
      .select({ id: people.id })
      .from(people)
      .innerJoin(memberships, eq(memberships.personId, people.id))
      .where(
        and(
          eq(people.id, input.personId),
          eq(memberships.libraryId, libraryId),
          eq(memberships.role, "composer"),
        ),
      )
      .limit(1);
    if (!writer) throw new NotFound();
    // One writer is confirmed by one request at a time.
    await tx.select({ id: people.id }).from(people).where(eq(people.id, writer.id)).for("update");
    return { libraryId };
  },
  run: async ({ tx, actor, input, subject: { libraryId }, now }) => {
    const { personId, legalName, creditName, ipi, society } = input;
    if (ipi && DEMO_IPI.test(ipi) && env.SEDGEWREN_MODE === "live") {
      throw new Invalid("This IPI belongs to the demonstration.", {
        ipi: "This IPI belongs to the demonstration.",
      });
    }
    await refuseTakenIpi(tx, { libraryId, personId, ipi });
    const confirmedBy = "personId" in actor ? actor.personId : "system";
    const values = { legalName, creditName, ipi, society, confirmedBy, confirmedAt: now };
    // Not an upsert: it would write over the other writer's row where the IPI is the key that clashes.
    const ofWriter = and(eq(confirmedNames.libraryId, libraryId), eq(confirmedNames.personId, personId));
    const [held] = await tx.select({ id: confirmedNames.id }).from(confirmedNames).where(ofWriter);
    try {
      if (held) await tx.update(confirmedNames).set(values).where(eq(confirmedNames.id, held.id));
      else await tx.insert(confirmedNames).values({ id: newId("cfn"), libraryId, personId, ...values });
    } catch (error) {
      if (!isDuplicateKey(error)) throw error;
      await refuseTakenIpi(tx, { libraryId, personId, ipi });
      throw error;
    }
    return null;
  },
  audit: ({ input, subject }) => ({
    subject: input.personId,
    libraryId: subject.libraryId,
    detail: {
      legalName: input.legalName,
      creditName: input.creditName,
      ipi: input.ipi,
      society: input.society,
    },
  }),
});

/** A writer of this library by IPI or address, as a co-writer may know them: the credit name and what is confirmed. */
export const findWriter = query({
  name: "accounts.findWriter",
  who: ["composer", "owner", "staff"],
  input: FindWriter,
  authorise: async ({ actor, input }) => {
    if (actor.libraryId !== input.libraryId) throw new NotFound();
    return null;
  },
  run: ({ reader, input }) => writerOnRoster(reader, input),
});

export interface RosterWriter {
  personId: string;
  membershipId: string;
  name: string;
  /** For the owner and staff only. */
  email: string | null;
  since: Date;
  confirmed: ConfirmedName | null;
}

export interface RosterMember {
  membershipId: string;
  personId: string;
  name: string;
  role: Role;
  granted: string[];
  endsAt: Date | null;
}

/** A library's writers with what is confirmed of them, and its other people. */
export const listRoster = query({
  name: "accounts.listRoster",
  who: ["owner", "staff", "moderator", "accountant", "auditor"],
  input: z.object({}),
  authorise: async ({ actor }) => {
    if (actor.libraryId === null) throw new NotFound("The marketplace has no roster of its own.");
    return { libraryId: actor.libraryId };
  },
  run: async ({ reader, actor, subject: { libraryId } }) => {
    const rows = await reader
      .select({ membership: memberships, name: people.name, email: people.email })
      .from(memberships)
      .innerJoin(people, eq(people.id, memberships.personId))
      .where(and(eq(memberships.libraryId, libraryId), isLive()))
      .orderBy(asc(people.name), asc(people.id));
    const writers = rows.filter((row) => row.membership.role === "composer");
    const confirmed = await confirmedNamesOf(
      reader,
      libraryId,
      writers.map((row) => row.membership.personId),
    );
    const seesAddresses = actor.kind === "owner" || actor.kind === "staff";
    return {
      writers: writers.map(
        ({ membership, name, email }): RosterWriter => ({
          personId: membership.personId,
          membershipId: membership.id,
          name,
          email: seesAddresses ? email : null,
          since: membership.createdAt,
          confirmed: confirmed.get(membership.personId) ?? null,
        }),
      ),
      members: rows
        .filter((row) => row.membership.role !== "composer")
        .map(
          ({ membership, name }): RosterMember => ({
            membershipId: membership.id,
            personId: membership.personId,
            name,
            role: roleOf(membership.role),
            granted: membership.granted,
            endsAt: membership.endsAt,
          }),
        ),
    };
  },
});
