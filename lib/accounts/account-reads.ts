import { and, asc, eq, gt, inArray, isNotNull, isNull, like, max, or } from "drizzle-orm";
import { z } from "zod";
import { invitations, memberships, people } from "@/db/schema/accounts";
import { EVERYONE, SIGNED_IN } from "@/lib/kernel/actor";
import { systemNow } from "@/lib/kernel/clock";
import { env } from "@/lib/kernel/env";
import { NotFound } from "@/lib/kernel/errors";
import { open, query } from "@/lib/kernel/verb";
import { isLive, roleOf } from "./live";
import { type Seat, seatsOf } from "./reads";
import { cameByLink } from "./set-password";
import { type Role, roleLabel } from "./states";

export interface OwnAccount {
  name: string;
  email: string;
  /** In which deadlines are written. */
  timeZone: string;
  hasPassword: boolean;
  /** Came in by a link just now, so the old password is not asked for. */
  mayReplacePassword: boolean;
  secondFactorSince: Date | null;
  isSettingUp: boolean;
  /** A person of the demonstration, whose codes the page fills in. */
  demo: boolean;
}

export const getAccount = query({
  name: "accounts.getAccount",
  who: SIGNED_IN,
  input: z.object({}),
  authorise: async ({ reader, actor }) => {
    const [row] = await reader.select().from(people).where(eq(people.id, actor.personId));
    if (!row) throw new NotFound();
    return row;
  },
  run: async ({ subject }): Promise<OwnAccount> => ({
    name: subject.name,
    email: subject.email,
    timeZone: subject.timeZone,
    hasPassword: subject.passwordHash !== null,
    mayReplacePassword: cameByLink(subject),
    secondFactorSince: subject.totpConfirmedAt,
    isSettingUp: subject.totpPendingSecret !== null,
    demo: subject.demo && env.SEDGEWREN_MODE === "demo",
  }),
});

export interface DemonstrationSignIn {
  name: string;
  email: string;
  kind: Role;
  label: string;
}

const KINDS_SHOWN: readonly Role[] = [
  "composer",
  "buyer",
  "owner",
  "moderator",
  "accountant",
  "staff",
  "auditor",
  "admin",
];

/** One person of the demonstration for each role, and for the marketplace's own. */
export const demonstrationSignIns = query({
  name: "accounts.demonstrationSignIns",
  who: EVERYONE,
  input: z.object({}),
  authorise: open("a demonstration shows its own invented people; a live installation answers with nobody"),
  run: async ({ reader }): Promise<DemonstrationSignIn[]> => {
    if (env.SEDGEWREN_MODE !== "demo") return [];
    const rows = await reader
      .select({
        personId: people.id,
        name: people.name,
        email: people.email,
        role: memberships.role,
        libraryId: memberships.libraryId,
        scopeName: memberships.scopeName,
      })
      .from(memberships)
      .innerJoin(people, eq(people.id, memberships.personId))
      .where(and(eq(people.demo, true), isNull(people.disabledAt), isLive()))
      .orderBy(asc(memberships.createdAt), asc(memberships.id));
    const shown = new Map<string, DemonstrationSignIn>();
    const seen = new Set<string>();
    for (const row of rows) {
      // Only a person's first role is promised here, because that is the one in use after a first sign-in.
      if (seen.has(row.personId)) continue;
      seen.add(row.personId);
      const kind = roleOf(row.role);
      const key = `${kind}:${row.libraryId === null}`;
      if (shown.has(key)) continue;
      shown.set(key, { name: row.name, email: row.email, kind, label: roleLabel(kind, row.scopeName) });
    }
    return [...shown.values()].sort((a, b) => KINDS_SHOWN.indexOf(a.kind) - KINDS_SHOWN.indexOf(b.kind));
  },
});

export interface PersonEntry {
  id: string;
  name: string;
  email: string;
  disabledAt: Date | null;
  hasSecondFactor: boolean;
  roles: { membershipId: string; label: string }[];
}

const PEOPLE_SHOWN = 200;

export const listPeople = query({
  name: "accounts.listPeople",
  who: ["admin"],
  input: z.object({ text: z.string().trim().max(100).default("") }),
  authorise: open("admins look after accounts and roles"),
  run: async ({
    reader,
    input,
  }): Promise<{ people: PersonEntry[]; isCut: boolean; libraries: { id: string; name: string }[] }> => {
    const wanted = `%${input.text.replace(/[\\%_]/g, "\\$&")}%`;
    const rows = await reader
      .select()
      .from(people)
      .where(or(like(people.name, wanted), like(people.email, wanted)))
      .orderBy(asc(people.name), asc(people.id))
      .limit(PEOPLE_SHOWN + 1);
    const shown = rows.slice(0, PEOPLE_SHOWN);
    const ids = shown.map((row) => row.id);
    const held =
      ids.length > 0
        ? await reader
            .select()
            .from(memberships)
            .where(and(inArray(memberships.personId, ids), isLive()))
        : [];
    const libraries = await reader
      .select({ id: memberships.libraryId, name: max(memberships.scopeName) })
      .from(memberships)
      .where(isNotNull(memberships.libraryId))
      .groupBy(memberships.libraryId)
      .orderBy(asc(max(memberships.scopeName)));
    return {
      libraries: libraries.flatMap(({ id, name }) => (id && name ? [{ id, name }] : [])),
      isCut: rows.length > PEOPLE_SHOWN,
      people: shown.map((row) => ({
        id: row.id,
        name: row.name,
        email: row.email,
        disabledAt: row.disabledAt,
        hasSecondFactor: row.totpConfirmedAt !== null,
        roles: held
          .filter((one) => one.personId === row.id)
          .map((one) => ({ membershipId: one.id, label: roleLabel(roleOf(one.role), one.scopeName) })),
      })),
    };
  },
});

export interface OpenInvitationEntry {
  id: string;
  name: string;
  email: string;
  label: string;
  expiresAt: Date;
}

export const listInvitations = query({
  name: "accounts.listInvitations",
  who: ["owner", "buyer", "admin"],
  input: z.object({}),
  authorise: async ({ actor }) => {
    if (actor.kind === "buyer" && !actor.mayApprove) throw new NotFound();
    return null;
  },
  run: async ({ reader, actor }): Promise<OpenInvitationEntry[]> => {
    const within =
      actor.kind === "owner"
        ? eq(invitations.libraryId, actor.libraryId)
        : actor.kind === "buyer"
          ? eq(invitations.companyId, actor.companyId)
          : undefined;
    const rows = await reader
      .select()
      .from(invitations)
      .where(and(isNull(invitations.acceptedAt), gt(invitations.expiresAt, systemNow()), within))
      .orderBy(asc(invitations.createdAt), asc(invitations.id));
    return rows.map((row) => ({
      id: row.id,
      name: row.name,
      email: row.email,
      label: roleLabel(roleOf(row.role), row.scopeName),
      expiresAt: row.expiresAt,
    }));
  },
});

export const listSeats = query({
  name: "accounts.listSeats",
  who: ["buyer"],
  input: z.object({}),
  authorise: open("a buyer sees the seats of the own company"),
  run: ({ reader, actor }): Promise<Seat[]> => seatsOf(reader, actor.companyId),
});
