import { eq } from "drizzle-orm";
import { z } from "zod";
import { invitations, people } from "@/db/schema/accounts";
import { EVERYONE } from "@/lib/kernel/actor";
import { systemNow } from "@/lib/kernel/clock";
import { env } from "@/lib/kernel/env";
import { Conflict, NotFound, Precondition } from "@/lib/kernel/errors";
import { newId, newSecret } from "@/lib/kernel/ids";
import { command, query } from "@/lib/kernel/verb";
import { enqueueMail } from "@/lib/mail";
import { roleOf } from "./live";
import { addMembership, tellOfRole } from "./memberships";
import { hashPassword } from "./password-hash";
import { roleWithinReach, scopeRole } from "./role-scope";
import { AcceptInvitation, InvitePerson, WithdrawInvitation } from "./schemas";
import { requireRecentSecondFactor } from "./second-factor";
import { refuseWeakPassword } from "./set-password";
import { INVITATION_DAYS, type Role, roleInWords, roleLabel, STAFF_GRANTS } from "./states";
import { tokenHash } from "./tokens";

const GONE =
  "This invitation was accepted already, was withdrawn, or is too old. Ask whoever invited you for another.";

export const invitePerson = command({
  name: "accounts.invitePerson",
  who: ["owner", "buyer", "admin", "system"],
  input: InvitePerson,
  authorise: async ({ tx, actor, input }) => {
    const { email: _email, name: _name, ...fields } = input;
    const role = roleWithinReach(actor, fields);
    if (actor.kind !== "buyer") requireRecentSecondFactor(actor);
    return scopeRole(tx, role);
  },
  run: async ({ tx, actor, input, subject: role }) => {
    const token = newSecret();
    const now = systemNow();
    const invitationId = newId("inv");
    const expiresAt = new Date(now.getTime() + INVITATION_DAYS * 86_400_000);
    await tx.insert(invitations).values({
      id: invitationId,
      email: input.email,
      name: input.name,
      ...role,
      tokenHash: tokenHash(token),
      invitedBy: "personId" in actor ? actor.personId : "system",
      expiresAt,
      createdAt: now,
    });
    await enqueueMail(tx, {
      toAddress: input.email,
      template: "invitation",
      props: {
        inviterName: "personId" in actor ? actor.name : "Sedgewren",
        organisationName: role.scopeName,
        roleInWords: roleInWords(role.role, role.mayApprove),
        url: new URL(`/invitation/${token}`, env.SITE_URL).href,
        expiresAt: expiresAt.toISOString(),
        zone: "Etc/UTC",
      },
      subjectId: invitationId,
    });
    return { invitationId };
  },
  audit: ({ subject, result }) => ({
    subject: result.invitationId,
    libraryId: subject.libraryId,
    detail: { role: subject.role, companyId: subject.companyId },
  }),
});

export const withdrawInvitation = command({
  name: "accounts.withdrawInvitation",
  who: ["owner", "buyer", "admin"],
  input: WithdrawInvitation,
  authorise: async ({ tx, actor, input }) => {
    const [row] = await tx
      .select()
      .from(invitations)
      .where(eq(invitations.id, input.invitationId))
      .for("update");
    const isTheirs =
      actor.kind === "admin" ||
      (actor.kind === "owner" && row?.libraryId === actor.libraryId) ||
      (actor.kind === "buyer" && actor.mayApprove && row?.companyId === actor.companyId);
    if (!row || !isTheirs) throw new NotFound();
    if (row.acceptedAt) throw new Precondition("This invitation was accepted already. End the role instead.");
    return row;
  },
  run: async ({ tx, input }) => {
    await tx
      .update(invitations)
      .set({ expiresAt: systemNow() })
      .where(eq(invitations.id, input.invitationId));
    return null;
  },
  audit: ({ input, subject }) => ({ subject: input.invitationId, libraryId: subject.libraryId }),
});

export interface OpenInvitation {
  email: string;
  name: string;
  role: Role;
  label: string;
  invitedBy: string;
  expiresAt: Date;
  hasAccount: boolean;
}

/** What whoever holds the link may know of it. */
export const getInvitation = query({
  name: "accounts.getInvitation",
  who: EVERYONE,
  input: z.object({ token: z.string().max(100) }),
  authorise: async ({ reader, input }) => {
    const [row] = await reader
      .select()
      .from(invitations)
      .where(eq(invitations.tokenHash, tokenHash(input.token)));
    if (!row || row.acceptedAt || row.expiresAt <= systemNow()) throw new NotFound(GONE);
    return row;
  },
  run: async ({ reader, subject }): Promise<OpenInvitation> => {
    const [inviter] = await reader
      .select({ name: people.name })
      .from(people)
      .where(eq(people.id, subject.invitedBy));
    const [known] = await reader
      .select({ id: people.id })
      .from(people)
      .where(eq(people.email, subject.email));
    const role = roleOf(subject.role);
    return {
      email: subject.email,
      name: subject.name,
      role,
      label: roleLabel(role, subject.scopeName),
      invitedBy: inviter?.name ?? "Sedgewren",
      expiresAt: subject.expiresAt,
      hasAccount: known !== undefined,
    };
  },
});

/** Whoever holds the link has the mailbox it was sent to: the role goes to that address and to no other. */
export const acceptInvitation = command({
  name: "accounts.acceptInvitation",
  who: EVERYONE,
  input: AcceptInvitation,
  guard: async ({ tx, input }) => {
    await tx
      .select({ id: invitations.id })
      .from(invitations)
      .where(eq(invitations.tokenHash, tokenHash(input.token)))
      .for("update");
  },
  authorise: async ({ tx, input }) => {
    const [row] = await tx
      .select()
      .from(invitations)
      .where(eq(invitations.tokenHash, tokenHash(input.token)));
    if (!row || row.acceptedAt || row.expiresAt <= systemNow()) throw new NotFound(GONE);
    return row;
  },
  run: async ({ tx, actor, input, subject: invitation }) => {
    const now = systemNow();
    const [known] = await tx.select().from(people).where(eq(people.email, invitation.email)).for("update");
    if (known?.disabledAt) throw new NotFound(GONE);
    const person = known ?? { id: newId("per"), name: input.name, email: invitation.email };
    if (!known) {
      if (input.password) refuseWeakPassword(input.password, { ...person, hasSecondFactor: false });
      const passwordHash = input.password ? await hashPassword(input.password) : null;
      await tx.insert(people).values({ ...person, passwordHash, emailVerifiedAt: now, createdAt: now });
    }
    await tx.update(invitations).set({ acceptedAt: now }).where(eq(invitations.id, invitation.id));
    const role = {
      role: roleOf(invitation.role),
      libraryId: invitation.libraryId,
      companyId: invitation.companyId,
      scopeName: invitation.scopeName,
      mayApprove: invitation.mayApprove,
      granted: STAFF_GRANTS.filter((grant) => invitation.granted.includes(grant)),
      endsAt: invitation.endsAt,
    };
    const membershipId = await addMembership(tx, person.id, role);
    if (!membershipId)
      throw new Conflict(`${person.name} is ${roleLabel(role.role, role.scopeName)} already.`);
    if (known) await tellOfRole(tx, known, { change: "given", role, membershipId, by: actor });
    return { personId: person.id, membershipId, email: person.email };
  },
  audit: ({ subject, result }) => ({
    subject: subject.id,
    libraryId: subject.libraryId,
    detail: { personId: result.personId, membershipId: result.membershipId },
  }),
});
