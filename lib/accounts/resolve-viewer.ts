import { and, asc, desc, eq } from "drizzle-orm";
import { z } from "zod";
import type { Reader } from "@/db/client";
import { memberships, people } from "@/db/schema/accounts";
import { type Actor, system } from "@/lib/kernel/actor";
import { Bug, never } from "@/lib/kernel/errors";
import { open, query } from "@/lib/kernel/verb";
import { isLive, roleOf } from "./live";
import type { SessionClaim } from "./session-claim";
import { type Role, roleLabel, SECOND_FACTOR_ROLES } from "./states";

export interface RoleChoice {
  membershipId: string;
  kind: Role;
  /** "moderator for the marketplace", "composer at Saltmarrow Music Library" */
  label: string;
  current: boolean;
  /** The role waits for a second factor: its code in this session, or its set-up. */
  needs: "code" | "set-up" | null;
}

export interface ResolvedViewer {
  actor: Actor;
  person: { id: string; name: string; email: string };
  roles: RoleChoice[];
}

type Membership = typeof memberships.$inferSelect;
type PersonFields = { personId: string; name: string; secondFactorAt: string | null };

function inLibrary(membership: Membership): string {
  if (!membership.libraryId) throw new Bug(`${membership.id} is ${membership.role} of no library`);
  return membership.libraryId;
}

function actorOf(membership: Membership, person: PersonFields): Actor {
  const role = roleOf(membership.role);
  switch (role) {
    case "composer":
    case "owner":
      return { kind: role, libraryId: inLibrary(membership), ...person };
    case "staff":
      return { kind: role, libraryId: inLibrary(membership), granted: membership.granted, ...person };
    case "moderator":
    case "accountant":
      return { kind: role, libraryId: membership.libraryId, ...person };
    case "auditor": {
      if (!membership.endsAt) throw new Bug(`${membership.id} is auditor without an end`);
      return {
        kind: role,
        libraryId: membership.libraryId,
        untilAt: membership.endsAt.toISOString(),
        ...person,
      };
    }
    case "buyer":
      if (!membership.companyId) throw new Bug(`${membership.id} is buyer for no company`);
      return { kind: role, companyId: membership.companyId, mayApprove: membership.mayApprove, ...person };
    case "admin":
      return { kind: role, ...person };
    default:
      return never(role);
  }
}

/** Memberships that count now, the one used last first. */
export function liveMemberships(reader: Reader, personId: string): Promise<Membership[]> {
  return reader
    .select()
    .from(memberships)
    .where(and(eq(memberships.personId, personId), isLive()))
    .orderBy(desc(memberships.lastUsedAt), asc(memberships.createdAt), asc(memberships.id));
}

const readViewer = query({
  name: "accounts.readViewer",
  who: ["system"],
  input: z.object({
    personId: z.string(),
    sessionVersion: z.number(),
    secondFactorAt: z.string().nullable(),
    membershipId: z.string().nullable(),
  }),
  authorise: open("asked by the site itself about the session it has verified"),
  run: async ({ reader, input }): Promise<ResolvedViewer | null> => {
    const [row] = await reader.select().from(people).where(eq(people.id, input.personId));
    if (!row || row.disabledAt || row.sessionVersion !== input.sessionVersion) return null;
    const isSetUp = row.totpConfirmedAt !== null;
    const secondFactorAt = isSetUp ? input.secondFactorAt : null;
    const held = await liveMemberships(reader, row.id);
    const needsOf = (role: Role): RoleChoice["needs"] => {
      if (isSetUp) return secondFactorAt ? null : "code";
      return SECOND_FACTOR_ROLES.includes(role) ? "set-up" : null;
    };
    const usable = held.filter((membership) => needsOf(roleOf(membership.role)) === null);
    const inUse = usable.find((membership) => membership.id === input.membershipId) ?? usable[0];
    const fields: PersonFields = { personId: row.id, name: row.name, secondFactorAt };
    return {
      actor: inUse ? actorOf(inUse, fields) : { kind: "person", ...fields },
      person: { id: row.id, name: row.name, email: row.email },
      roles: held.map((membership) => {
        const kind = roleOf(membership.role);
        return {
          membershipId: membership.id,
          kind,
          label: roleLabel(kind, membership.scopeName),
          current: membership.id === inUse?.id,
          needs: needsOf(kind),
        };
      }),
    };
  },
});

/**
 * Who a session's claim stands for, in the role asked for or else the one used last. Null where the person is disabled
 * or has signed out everywhere since.
 */
export function resolveViewer(
  claim: SessionClaim & { membershipId: string | null },
): Promise<ResolvedViewer | null> {
  return readViewer(system("session"), {
    personId: claim.personId,
    sessionVersion: claim.sessionVersion,
    secondFactorAt: claim.secondFactorAt,
    membershipId: claim.membershipId,
  });
}
