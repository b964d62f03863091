import { and, count, eq, isNull, ne } from "drizzle-orm";
import type { Tx } from "@/db/client";
import { memberships, people } from "@/db/schema/accounts";
import type { Actor } from "@/lib/kernel/actor";
import { systemNow } from "@/lib/kernel/clock";
import { env } from "@/lib/kernel/env";
import { Conflict, Forbidden, NotFound, Precondition } from "@/lib/kernel/errors";
import { newId } from "@/lib/kernel/ids";
import { command } from "@/lib/kernel/verb";
import { enqueueMail } from "@/lib/mail";
import { isLive, roleOf } from "./live";
import { roleWithinReach, type Scoped, scopeRole } from "./role-scope";
import { ChooseRole, EndMembership, GrantMembership } from "./schemas";
import { requireRecentSecondFactor } from "./second-factor";
import { OWNER_GIVES, roleInWords, roleLabel } from "./states";

type Membership = typeof memberships.$inferSelect;

function sameScope(scope: { libraryId: string | null; companyId: string | null }) {
  return and(
    scope.libraryId ? eq(memberships.libraryId, scope.libraryId) : isNull(memberships.libraryId),
    scope.companyId ? eq(memberships.companyId, scope.companyId) : isNull(memberships.companyId),
  );
}

/** Writes a role, or returns null where the person holds it already. The person's row is the one locked. */
export async function addMembership(tx: Tx, personId: string, role: Scoped): Promise<string | null> {
  const [held] = await tx
    .select({ id: memberships.id })
    .from(memberships)
    .where(
      and(eq(memberships.personId, personId), eq(memberships.role, role.role), sameScope(role), isLive()),
    );
  if (held) return null;
  const id = newId("mem");
  await tx.insert(memberships).values({ id, personId, ...role, createdAt: systemNow() });
  return id;
}

export async function tellOfRole(
  tx: Tx,
  person: { id: string; name: string; email: string; timeZone: string },
  change: {
    change: "given" | "removed";
    role: Pick<Scoped, "role" | "mayApprove" | "scopeName">;
    membershipId: string;
    by: Actor;
  },
): Promise<void> {
  await enqueueMail(tx, {
    toAddress: person.email,
    personId: person.id,
    template: "role-changed",
    props: {
      change: change.change,
      roleInWords: roleInWords(change.role.role, change.role.mayApprove),
      organisationName: change.role.scopeName,
      byName: "personId" in change.by ? change.by.name : "Sedgewren",
      changedAt: systemNow().toISOString(),
      url: new URL("/account", env.SITE_URL).href,
      zone: person.timeZone,
    },
    subjectId: change.membershipId,
  });
}

export const grantMembership = command({
  name: "accounts.grantMembership",
  who: ["admin", "system"],
  input: GrantMembership,
  authorise: async ({ tx, actor, input }) => {
    requireRecentSecondFactor(actor);
    const [person] = await tx.select().from(people).where(eq(people.id, input.personId)).for("update");
    if (!person) throw new NotFound();
    const { personId: _personId, ...fields } = input;
    return { person, role: await scopeRole(tx, roleWithinReach(actor, fields)) };
  },
  run: async ({ tx, actor, subject: { person, role } }) => {
    const membershipId = await addMembership(tx, person.id, role);
    if (!membershipId)
      throw new Conflict(`${person.name} is ${roleLabel(role.role, role.scopeName)} already.`);
    if (actor.kind !== "system")
      await tellOfRole(tx, person, { change: "given", role, membershipId, by: actor });
    return { membershipId };
  },
  audit: ({ input, subject, result }) => ({
    subject: result.membershipId,
    libraryId: subject.role.libraryId,
    detail: { personId: input.personId, role: subject.role.role, granted: subject.role.granted },
  }),
});

function mayEnd(actor: Actor, membership: Membership): boolean {
  if (!("personId" in actor)) return actor.kind === "system";
  if (actor.kind === "admin" || actor.personId === membership.personId) return true;
  if (actor.kind === "owner") {
    if (membership.libraryId !== actor.libraryId) throw new NotFound();
    return (OWNER_GIVES as readonly string[]).includes(membership.role);
  }
  if (actor.kind === "buyer") {
    if (membership.companyId !== actor.companyId) throw new NotFound();
    return actor.mayApprove;
  }
  throw new NotFound();
}

async function refuseLast(tx: Tx, membership: Membership): Promise<void> {
  const isOwner = membership.role === "owner";
  const isAdmin = membership.role === "admin";
  const isApprover = membership.role === "buyer" && membership.mayApprove;
  if (!isOwner && !isAdmin && !isApprover) return;
  const [others] = await tx
    .select({ count: count() })
    .from(memberships)
    .where(
      and(
        eq(memberships.role, membership.role),
        sameScope(membership),
        ne(memberships.id, membership.id),
        isLive(),
        ...(isApprover ? [eq(memberships.mayApprove, true)] : []),
      ),
    );
  if (others && others.count > 0) return;
  throw new Precondition(
    `Nobody else is ${isApprover ? "an approver" : membership.role} here. Give the role to somebody else first; nothing was changed.`,
  );
}

export const endMembership = command({
  name: "accounts.endMembership",
  who: [
    "person",
    "composer",
    "owner",
    "staff",
    "moderator",
    "buyer",
    "accountant",
    "auditor",
    "admin",
    "system",
  ],
  input: EndMembership,
  guard: async ({ tx, input }) => {
    // All roles of one kind in one place are locked together, so that two cannot each leave the other as the last.
    const [row] = await tx.select().from(memberships).where(eq(memberships.id, input.membershipId));
    if (!row) return;
    await tx
      .select({ id: memberships.id })
      .from(memberships)
      .where(and(eq(memberships.role, row.role), sameScope(row)))
      .orderBy(memberships.id)
      .for("update");
  },
  authorise: async ({ tx, actor, input }) => {
    const [membership] = await tx
      .select()
      .from(memberships)
      .where(and(eq(memberships.id, input.membershipId), isLive()));
    if (!membership) throw new NotFound();
    if (!mayEnd(actor, membership)) throw new Forbidden("This role is ended by an admin.");
    if (actor.kind === "owner" || actor.kind === "admin") requireRecentSecondFactor(actor);
    await refuseLast(tx, membership);
    const [person] = await tx.select().from(people).where(eq(people.id, membership.personId));
    if (!person) throw new NotFound();
    return { membership, person };
  },
  run: async ({ tx, actor, subject: { membership, person }, now }) => {
    await tx.update(memberships).set({ endsAt: now }).where(eq(memberships.id, membership.id));
    const role = {
      role: roleOf(membership.role),
      mayApprove: membership.mayApprove,
      scopeName: membership.scopeName,
    };
    await tellOfRole(tx, person, { change: "removed", role, membershipId: membership.id, by: actor });
    return null;
  },
  audit: ({ input, subject: { membership } }) => ({
    subject: input.membershipId,
    libraryId: membership.libraryId,
    detail: { personId: membership.personId, role: membership.role },
  }),
});

/** Marks the role as the one used last. The site keeps the choice of one browser in a cookie beside it. */
export const chooseRole = command({
  name: "accounts.chooseRole",
  who: ["person", "composer", "owner", "staff", "moderator", "buyer", "accountant", "auditor", "admin"],
  input: ChooseRole,
  authorise: async ({ tx, actor, input }) => {
    const [membership] = await tx
      .select()
      .from(memberships)
      .where(and(eq(memberships.id, input.membershipId), eq(memberships.personId, actor.personId), isLive()));
    if (!membership) throw new NotFound();
    return membership;
  },
  run: async ({ tx, input, subject }) => {
    await tx
      .update(memberships)
      .set({ lastUsedAt: systemNow() })
      .where(eq(memberships.id, input.membershipId));
    return {
      membershipId: input.membershipId,
      kind: roleOf(subject.role),
      isMarketplace: subject.libraryId === null && subject.companyId === null,
    };
  },
  audit: ({ input, subject }) => ({ subject: input.membershipId, libraryId: subject.libraryId }),
});
