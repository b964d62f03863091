import "@/tests/support/database";
import { eq } from "drizzle-orm";
import { afterEach, describe, expect, test, vi } from "vitest";
import { db } from "@/db/client";
import { invitations, memberships } from "@/db/schema/accounts";
import { auditLog } from "@/db/schema/kernel";
import {
  acceptInvitation,
  getInvitation,
  invitePerson,
  listInvitations,
  resolveViewer,
  signInWithPassword,
  withdrawInvitation,
} from "@/lib/accounts";
import { type Actor, ANONYMOUS } from "@/lib/kernel/actor";
import { makeCompany, makeLibrary, makeMembership, makePerson } from "@/tests/support/make";
import { GOOD_PASSWORD, ownerOf, tokenMailedTo } from "./support";

const freshEmail = () => `invited-${Math.random().toString(36).slice(2)}@test.example`;

async function namedLibrary() {
  const libraryId = await makeLibrary();
  await makeMembership({
    personId: (await makePerson()).id,
    role: "owner",
    libraryId,
    scopeName: "Saltmarrow Music Library",
  });
  return libraryId;
}

afterEach(() => {
  vi.useRealTimers();
});

describe("an invitation", () => {
  test("opens an account in the role it names, once", async () => {
    const libraryId = await namedLibrary();
    const email = freshEmail();
    const owner = await ownerOf(libraryId);
    const { invitationId } = await invitePerson(owner, {
      email,
      name: "Ailsa Trevarrick-Moe",
      role: "composer",
    });
    const token = await tokenMailedTo(email);
    expect(await getInvitation(ANONYMOUS, { token })).toMatchObject({
      email,
      label: "composer at Saltmarrow Music Library",
      invitedBy: owner.name,
      hasAccount: false,
    });
    const accepted = await acceptInvitation(ANONYMOUS, {
      token,
      name: "Ailsa Trevarrick-Moe",
      password: GOOD_PASSWORD,
    });
    expect(accepted.email).toBe(email);
    const signedIn = await signInWithPassword({ email, password: GOOD_PASSWORD, address: "192.0.2.120" });
    const viewer = await resolveViewer({ ...signedIn!, secondFactorAt: null, membershipId: null });
    expect(viewer?.actor).toMatchObject({ kind: "composer", libraryId, name: "Ailsa Trevarrick-Moe" });
    await expect(acceptInvitation(ANONYMOUS, { token, name: "Again" })).rejects.toMatchObject({
      code: "not_found",
    });
    const rows = await db().select().from(auditLog).where(eq(auditLog.subject, invitationId));
    expect(rows).toHaveLength(2);
    expect(JSON.stringify(rows)).not.toContain(token);
    expect(JSON.stringify(rows)).not.toContain(GOOD_PASSWORD);
  });

  test("accepted ten times at once makes one account with one role", async () => {
    const libraryId = await namedLibrary();
    const email = freshEmail();
    await invitePerson(await ownerOf(libraryId), { email, name: "One Only", role: "composer" });
    const token = await tokenMailedTo(email);
    const accept = () => acceptInvitation(ANONYMOUS, { token, name: "One Only", password: GOOD_PASSWORD });
    const answers = await Promise.allSettled(Array.from({ length: 10 }, accept));
    const done = answers.flatMap((answer) => (answer.status === "fulfilled" ? [answer.value] : []));
    expect(done).toHaveLength(1);
    expect(
      await db().select().from(memberships).where(eq(memberships.personId, done[0]!.personId)),
    ).toHaveLength(1);
  });

  test("gives a known person the further role and changes neither name nor password", async () => {
    const libraryId = await namedLibrary();
    const person = await makePerson();
    await invitePerson(await ownerOf(libraryId), {
      email: person.email.toUpperCase(),
      name: "Another Name",
      role: "staff",
      granted: ["list"],
    });
    const token = await tokenMailedTo(person.email);
    const accepted = await acceptInvitation(ANONYMOUS, {
      token,
      name: "Another Name",
      password: GOOD_PASSWORD,
    });
    expect(accepted.personId).toBe(person.id);
    const viewer = await resolveViewer({
      personId: person.id,
      sessionVersion: 1,
      secondFactorAt: null,
      membershipId: null,
    });
    expect(viewer).toMatchObject({
      person: { name: person.name },
      actor: { kind: "staff", granted: ["list"] },
    });
    expect(
      await signInWithPassword({ email: person.email, password: GOOD_PASSWORD, address: "192.0.2.121" }),
    ).toBeNull();
  });

  test("with a weak password is refused with the reason, and can still be accepted", async () => {
    const libraryId = await namedLibrary();
    const email = freshEmail();
    await invitePerson(await ownerOf(libraryId), { email, name: "Dov Marchetti-Ruane", role: "composer" });
    const token = await tokenMailedTo(email);
    await expect(
      acceptInvitation(ANONYMOUS, { token, name: "Dov", password: "passwordpassword" }),
    ).rejects.toMatchObject({
      fields: { password: expect.stringContaining("“password”") },
    });
    await acceptInvitation(ANONYMOUS, { token, name: "Dov" });
  });

  test("ends after fourteen days, or when it is withdrawn", async () => {
    vi.useFakeTimers({ toFake: ["Date"], now: new Date("2026-12-01T10:00:00Z") });
    const libraryId = await namedLibrary();
    const owner = await ownerOf(libraryId);
    const [late, withdrawn] = [freshEmail(), freshEmail()];
    await invitePerson(owner, { email: late, name: "Late", role: "composer" });
    vi.setSystemTime(new Date("2026-12-01T10:00:01Z"));
    const { invitationId } = await invitePerson(owner, {
      email: withdrawn,
      name: "Withdrawn",
      role: "composer",
    });
    expect((await listInvitations(owner, {})).map((one) => one.email)).toEqual([late, withdrawn]);
    await expect(
      withdrawInvitation(await ownerOf(await makeLibrary()), { invitationId }),
    ).rejects.toMatchObject({ code: "not_found" });
    await withdrawInvitation(owner, { invitationId });
    await expect(
      acceptInvitation(ANONYMOUS, { token: await tokenMailedTo(withdrawn), name: "No" }),
    ).rejects.toMatchObject({ code: "not_found" });
    vi.setSystemTime(new Date("2026-12-15T10:00:00Z"));
    await expect(
      acceptInvitation(ANONYMOUS, { token: await tokenMailedTo(late), name: "No" }),
    ).rejects.toMatchObject({ code: "not_found" });
    expect(await listInvitations(owner, {})).toEqual([]);
  });

  test("is kept as a hash only", async () => {
    const libraryId = await namedLibrary();
    const email = freshEmail();
    const { invitationId } = await invitePerson(await ownerOf(libraryId), {
      email,
      name: "Hashed",
      role: "composer",
    });
    const [row] = await db().select().from(invitations).where(eq(invitations.id, invitationId));
    expect(JSON.stringify(row)).not.toContain(await tokenMailedTo(email));
  });
});

describe("who may invite", () => {
  test("an owner: composers, staff, moderators and accountants of the own library, and nobody else", async () => {
    const libraryId = await namedLibrary();
    const owner = await ownerOf(libraryId);
    const invite = (fields: object) =>
      invitePerson(owner, { email: freshEmail(), name: "Somebody", role: "composer", ...fields });
    for (const role of ["composer", "staff", "moderator", "accountant"])
      await expect(invite({ role })).resolves.toBeTruthy();
    for (const role of ["owner", "admin", "buyer", "auditor"])
      await expect(invite({ role })).rejects.toMatchObject({ code: "forbidden" });
    await expect(invite({ libraryId: await makeLibrary() })).rejects.toMatchObject({ code: "not_found" });
    const stale = await ownerOf(libraryId, null);
    await expect(
      invitePerson(stale, { email: freshEmail(), name: "Somebody", role: "composer" }),
    ).rejects.toMatchObject({
      fields: { secondFactor: "again" },
    });
  });

  test("an owner's word for the library's name is not taken", async () => {
    const libraryId = await namedLibrary();
    const email = freshEmail();
    await invitePerson(await ownerOf(libraryId), {
      email,
      name: "Somebody",
      role: "composer",
      scopeName: "Another House",
    });
    expect(await getInvitation(ANONYMOUS, { token: await tokenMailedTo(email) })).toMatchObject({
      label: "composer at Saltmarrow Music Library",
    });
  });

  test("an approver: seats in the own company; a seat that may only propose: nobody", async () => {
    const companyId = await makeCompany({ name: "Thistlemoth Pictures" });
    const person = await makePerson();
    const approver: Actor = {
      kind: "buyer",
      companyId,
      mayApprove: true,
      personId: person.id,
      name: person.name,
    };
    const email = freshEmail();
    await invitePerson(approver, { email, name: "Tobias Ekwensi-Brandt", role: "buyer" });
    const token = await tokenMailedTo(email);
    const { personId } = await acceptInvitation(ANONYMOUS, { token, name: "Tobias Ekwensi-Brandt" });
    const viewer = await resolveViewer({
      personId,
      sessionVersion: 1,
      secondFactorAt: null,
      membershipId: null,
    });
    expect(viewer?.actor).toMatchObject({ kind: "buyer", companyId, mayApprove: false });
    expect(viewer?.roles[0]?.label).toBe("buyer for Thistlemoth Pictures");
    const again = { email: freshEmail(), name: "Third", role: "buyer" as const };
    await expect(invitePerson(viewer!.actor, again)).rejects.toMatchObject({ code: "forbidden" });
    await expect(invitePerson(approver, { ...again, role: "composer" })).rejects.toMatchObject({
      code: "forbidden",
    });
    await expect(invitePerson(approver, { ...again, companyId: await makeCompany() })).rejects.toMatchObject({
      code: "not_found",
    });
  });
});
