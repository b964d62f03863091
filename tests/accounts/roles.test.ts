import "@/tests/support/database";
import { eq } from "drizzle-orm";
import { afterEach, describe, expect, test, vi } from "vitest";
import { db } from "@/db/client";
import { companies, memberships, people } from "@/db/schema/accounts";
import {
  chooseRole,
  demonstrationSignIns,
  endMembership,
  grantMembership,
  listSeats,
  peopleWithRole,
  registerCompany,
  resolveViewer,
} from "@/lib/accounts";
import { type Actor, ANONYMOUS, system } from "@/lib/kernel/actor";
import { withBusinessClock } from "@/lib/kernel/clock";
import { makeCompany, makeLibrary, makeMembership, makePerson } from "@/tests/support/make";
import { adminActor, lastMailTo, ownerOf, recently } from "./support";

afterEach(() => {
  vi.useRealTimers();
});

const confirmed = { totpConfirmedAt: new Date("2026-01-01T00:00:00Z") };
const claimOf = (personId: string, membershipId: string | null = null) => ({
  personId,
  sessionVersion: 1,
  secondFactorAt: recently(),
  membershipId,
});

describe("the role in use", () => {
  test("is the one asked for if it is theirs, else the one used last, else the first", async () => {
    const [one, two] = [await makeLibrary(), await makeLibrary()];
    const person = await makePerson(confirmed);
    const composer = await makeMembership({
      personId: person.id,
      role: "composer",
      libraryId: one,
      scopeName: "Saltmarrow Music Library",
    });
    const moderator = await makeMembership({
      personId: person.id,
      role: "moderator",
      scopeName: "the marketplace",
    });
    const stranger = await makePerson();
    const foreign = await makeMembership({ personId: stranger.id, role: "owner", libraryId: two });

    const first = await resolveViewer(claimOf(person.id));
    expect(first?.actor).toMatchObject({ kind: "composer", libraryId: one });
    expect(first?.roles.map((role) => [role.label, role.current])).toEqual([
      ["composer at Saltmarrow Music Library", true],
      ["moderator for the marketplace", false],
    ]);
    expect((await resolveViewer(claimOf(person.id, moderator)))?.actor).toMatchObject({
      kind: "moderator",
      libraryId: null,
    });
    expect((await resolveViewer(claimOf(person.id, foreign)))?.actor).toMatchObject({ kind: "composer" });

    await chooseRole(first!.actor, { membershipId: moderator });
    expect((await resolveViewer(claimOf(person.id)))?.actor).toMatchObject({ kind: "moderator" });
    await expect(chooseRole(first!.actor, { membershipId: foreign })).rejects.toMatchObject({
      code: "not_found",
    });
    expect((await resolveViewer(claimOf(person.id, composer)))?.actor).toMatchObject({ kind: "composer" });
  });

  test("carries what belongs to it: a company and whether it may approve, grants, an end", async () => {
    const companyId = await makeCompany();
    const libraryId = await makeLibrary();
    const person = await makePerson(confirmed);
    const buyer = await makeMembership({ personId: person.id, role: "buyer", companyId, mayApprove: true });
    const staff = await makeMembership({ personId: person.id, role: "staff", libraryId, granted: ["list"] });
    const endsAt = new Date("2027-06-01T00:00:00Z");
    const auditor = await makeMembership({ personId: person.id, role: "auditor", libraryId, endsAt });
    const as = async (membershipId: string) => (await resolveViewer(claimOf(person.id, membershipId)))?.actor;
    expect(await as(buyer)).toMatchObject({ kind: "buyer", companyId, mayApprove: true });
    expect(await as(staff)).toMatchObject({ kind: "staff", libraryId, granted: ["list"] });
    expect(await as(auditor)).toMatchObject({ kind: "auditor", libraryId, untilAt: endsAt.toISOString() });
  });

  test("is none for a person without roles, who acts as that person", async () => {
    const person = await makePerson();
    expect(await resolveViewer(claimOf(person.id))).toMatchObject({
      actor: { kind: "person", personId: person.id },
      roles: [],
    });
  });

  test("of an auditor is gone when the stated time has passed", async () => {
    const libraryId = await makeLibrary();
    const person = await makePerson();
    await makeMembership({
      personId: person.id,
      role: "auditor",
      libraryId,
      endsAt: new Date("2026-06-01T12:00:00Z"),
    });
    const at = (time: string) => withBusinessClock(new Date(time), () => resolveViewer(claimOf(person.id)));
    expect((await at("2026-06-01T11:00:00Z"))?.actor.kind).toBe("auditor");
    expect(await at("2026-06-01T12:00:00Z")).toMatchObject({ actor: { kind: "person" }, roles: [] });
  });
});

describe("granting a role", () => {
  test("writes it once, names its scope and tells the person", async () => {
    const libraryId = await makeLibrary();
    const person = await makePerson();
    const admin = await adminActor();
    await grantMembership(admin, {
      personId: person.id,
      role: "owner",
      libraryId,
      scopeName: "Brindlecote Cues",
    });
    const other = await makePerson();
    await grantMembership(admin, { personId: other.id, role: "moderator", libraryId });
    const [row] = await db().select().from(memberships).where(eq(memberships.personId, other.id));
    expect(row?.scopeName).toBe("Brindlecote Cues");
    expect((await lastMailTo(other.email)).props).toMatchObject({
      change: "given",
      roleInWords: "a moderator",
      organisationName: "Brindlecote Cues",
    });
    await expect(
      grantMembership(admin, { personId: other.id, role: "moderator", libraryId }),
    ).rejects.toMatchObject({ code: "conflict" });
    expect((await peopleWithRole(db(), "moderator", libraryId)).map((one) => one.id)).toEqual([other.id]);
  });

  test("asked twenty times at once gives it once", async () => {
    const libraryId = await makeLibrary();
    const person = await makePerson();
    const grant = () =>
      grantMembership(system("tests"), { personId: person.id, role: "composer", libraryId, scopeName: "x" });
    const answers = await Promise.allSettled(Array.from({ length: 20 }, grant));
    expect(answers.filter((answer) => answer.status === "fulfilled")).toHaveLength(1);
    expect(await db().select().from(memberships).where(eq(memberships.personId, person.id))).toHaveLength(1);
  });

  test.each([
    [{ role: "owner" }, "libraryId"],
    [{ role: "buyer" }, "companyId"],
    [{ role: "admin", libraryId: "lib_x" }, "libraryId"],
    [{ role: "composer", libraryId: "lib_x", companyId: "com_x" }, "companyId"],
    [{ role: "auditor" }, "endsAt"],
    [{ role: "auditor", endsAt: "2020-01-01T00:00:00Z" }, "endsAt"],
    [{ role: "owner", libraryId: "lib_nobody_has_named" }, "scopeName"],
  ] as const)("refuses a role that does not fit its scope: %j", async (fields, field) => {
    const person = await makePerson();
    await expect(grantMembership(system("tests"), { personId: person.id, ...fields })).rejects.toMatchObject({
      code: "invalid",
      fields: { [field]: expect.any(String) },
    });
  });
});

describe("ending a role", () => {
  test("takes it away at the next request and tells the person; what was is kept", async () => {
    const libraryId = await makeLibrary();
    const person = await makePerson();
    const membershipId = await makeMembership({ personId: person.id, role: "composer", libraryId });
    expect((await resolveViewer(claimOf(person.id)))?.actor.kind).toBe("composer");
    await endMembership(await ownerOf(libraryId), { membershipId });
    expect((await resolveViewer(claimOf(person.id)))?.actor.kind).toBe("person");
    expect((await lastMailTo(person.email)).props).toMatchObject({ change: "removed" });
    expect(await db().select().from(memberships).where(eq(memberships.id, membershipId))).toHaveLength(1);
    await expect(endMembership(await ownerOf(libraryId), { membershipId })).rejects.toMatchObject({
      code: "not_found",
    });
  });

  test("is for an owner in the own library, and asks for the second factor again", async () => {
    const [libraryId, otherId] = [await makeLibrary(), await makeLibrary()];
    const person = await makePerson();
    const membershipId = await makeMembership({ personId: person.id, role: "staff", libraryId });
    await expect(endMembership(await ownerOf(otherId), { membershipId })).rejects.toMatchObject({
      code: "not_found",
    });
    await expect(endMembership(await ownerOf(libraryId, null), { membershipId })).rejects.toMatchObject({
      fields: { secondFactor: "again" },
    });
    const colleague = await makeMembership({ personId: person.id, role: "owner", libraryId });
    await expect(endMembership(await ownerOf(libraryId), { membershipId: colleague })).rejects.toMatchObject({
      code: "forbidden",
    });
  });

  test("never leaves a library without an owner, even when two owners leave at once", async () => {
    const libraryId = await makeLibrary();
    const owners = await Promise.all(
      [1, 2].map(async () => {
        const person = await makePerson();
        const membershipId = await makeMembership({ personId: person.id, role: "owner", libraryId });
        const actor: Actor = {
          kind: "owner",
          libraryId,
          personId: person.id,
          name: person.name,
          secondFactorAt: recently(),
        };
        return { actor, membershipId };
      }),
    );
    const answers = await Promise.allSettled(
      owners.map(({ actor, membershipId }) => endMembership(actor, { membershipId })),
    );
    expect(answers.filter((answer) => answer.status === "fulfilled")).toHaveLength(1);
    expect(answers.find((answer) => answer.status === "rejected")).toMatchObject({
      reason: { code: "precondition" },
    });
    expect(await peopleWithRole(db(), "owner", libraryId)).toHaveLength(1);
  });
});

describe("a company", () => {
  test("registered by a person gives that person the first seat, with approval", async () => {
    const person = await makePerson();
    const actor: Actor = { kind: "person", personId: person.id, name: person.name };
    const { companyId } = await registerCompany(actor, {
      name: "Thistlemoth Pictures",
      address: "1 Quay Lane, Bristol",
      countryCode: "gb",
    });
    const viewer = await resolveViewer(claimOf(person.id));
    expect(viewer).toMatchObject({
      actor: { kind: "buyer", companyId, mayApprove: true },
      roles: [{ label: "buyer for Thistlemoth Pictures" }],
    });
    expect(await listSeats(viewer!.actor, {})).toMatchObject([{ id: person.id, mayApprove: true }]);
    const [row] = await db().select().from(companies).where(eq(companies.id, companyId));
    expect(row).toMatchObject({ countryCode: "GB", taxNumber: null });
  });

  test("keeps an approver: the last one's seat is not ended", async () => {
    const companyId = await makeCompany();
    const person = await makePerson();
    const membershipId = await makeMembership({
      personId: person.id,
      role: "buyer",
      companyId,
      mayApprove: true,
    });
    const approver: Actor = {
      kind: "buyer",
      companyId,
      mayApprove: true,
      personId: person.id,
      name: person.name,
    };
    await expect(endMembership(approver, { membershipId })).rejects.toMatchObject({ code: "precondition" });
    const proposer = await makePerson();
    const seat = await makeMembership({ personId: proposer.id, role: "buyer", companyId });
    const other: Actor = {
      kind: "buyer",
      companyId,
      mayApprove: false,
      personId: (await makePerson()).id,
      name: "x",
    };
    await expect(endMembership(other, { membershipId: seat })).rejects.toMatchObject({ code: "forbidden" });
    await endMembership(approver, { membershipId: seat });
    expect(await listSeats(approver, {})).toHaveLength(1);
  });
});

describe("the demonstration's sign-ins", () => {
  test("name one person of the demonstration for each role, and nobody else", async () => {
    const libraryId = await makeLibrary();
    const [shown, second, real] = [
      await makePerson({ demo: true }),
      await makePerson({ demo: true }),
      await makePerson(),
    ];
    vi.useFakeTimers({ toFake: ["Date"] });
    for (const person of [shown, second, real]) {
      vi.setSystemTime(Date.now() + 1000);
      await makeMembership({ personId: person.id, role: "staff", libraryId });
    }
    const staff = (await demonstrationSignIns(ANONYMOUS, {})).filter((one) => one.kind === "staff");
    expect(staff.map((one) => one.email)).toEqual([shown.email]);
    await db().update(people).set({ disabledAt: new Date() }).where(eq(people.id, shown.id));
    expect((await demonstrationSignIns(ANONYMOUS, {})).map((one) => one.email)).toContain(second.email);
  });
});
