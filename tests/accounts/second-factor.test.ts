import "@/tests/support/database";
import { eq } from "drizzle-orm";
import { Secret, TOTP } from "otpauth";
import { afterEach, beforeEach, describe, expect, test, vi } from "vitest";
import { db } from "@/db/client";
import { people } from "@/db/schema/accounts";
import { auditLog } from "@/db/schema/kernel";
import {
  confirmSecondFactor,
  demonstrationCode,
  grantMembership,
  pendingSecondFactor,
  requireRecentSecondFactor,
  resetSecondFactor,
  resolveViewer,
  setUpDemonstrationFactor,
  startSecondFactor,
} from "@/lib/accounts";
import { type Actor, system } from "@/lib/kernel/actor";
import { makeLibrary, makeMembership, makePerson } from "@/tests/support/make";
import { adminActor } from "./support";

const START = new Date("2026-12-01T10:00:00Z");
const address = "192.0.2.90";
const codeAt = (secret: string, at = Date.now()) =>
  new TOTP({ secret: Secret.fromBase32(secret) }).generate({ timestamp: at });
const laterBy = (seconds: number) => vi.setSystemTime(Date.now() + seconds * 1000);

async function withFactor(values: Parameters<typeof makePerson>[0] = {}) {
  const person = await makePerson(values);
  const actor: Actor = { kind: "person", personId: person.id, name: person.name };
  await startSecondFactor(actor, {});
  const pending = await pendingSecondFactor(actor, {});
  const secret = pending!.secret;
  const give = (code: string) =>
    confirmSecondFactor({ personId: person.id, sessionVersion: 1, code, address });
  return { person, actor, secret, give };
}

beforeEach(() => {
  vi.useFakeTimers({ toFake: ["Date"], now: START });
});
afterEach(() => {
  vi.useRealTimers();
});

describe("a second factor", () => {
  test("is in use from its first code on, and its secret is shown no more", async () => {
    const { person, actor, secret, give } = await withFactor();
    expect((await db().select().from(people).where(eq(people.id, person.id)))[0]?.totpConfirmedAt).toBeNull();
    expect(await give(codeAt(secret))).toEqual({ at: START.toISOString() });
    expect(await pendingSecondFactor(actor, {})).toBeNull();
    const [row] = await db().select().from(people).where(eq(people.id, person.id));
    expect(row?.totpConfirmedAt).toEqual(START);
    expect(row?.totpSecret).not.toContain(secret);
  });

  test("takes each code once, and the next step's code after it", async () => {
    const { secret, give } = await withFactor();
    await give(codeAt(secret));
    await expect(give(codeAt(secret))).rejects.toMatchObject({ code: "invalid" });
    laterBy(30);
    await give(codeAt(secret));
    await expect(give(codeAt(secret))).rejects.toMatchObject({ code: "invalid" });
  });

  test("takes one of two equal codes given at once", async () => {
    const { secret, give } = await withFactor();
    await give(codeAt(secret));
    laterBy(30);
    const answers = await Promise.allSettled([
      give(codeAt(secret)),
      give(codeAt(secret)),
      give(codeAt(secret)),
    ]);
    expect(answers.filter((answer) => answer.status === "fulfilled")).toHaveLength(1);
  });

  test("slows guessing in turn, from wherever the guesses come", async () => {
    const { person, give, secret } = await withFactor();
    await give(codeAt(secret));
    laterBy(30);
    const answers: string[] = [];
    for (let index = 0; index < 30; index++) {
      const guess = {
        personId: person.id,
        sessionVersion: 1,
        code: "000000",
        address: `198.51.100.${index}`,
      };
      answers.push(
        await confirmSecondFactor(guess).then(
          () => "taken",
          (error) => error.code,
        ),
      );
      if (answers.at(-1) === "limit") break;
    }
    expect(answers.at(-1)).toBe("limit");
    expect(answers.length).toBeLessThan(15);
  }, 60_000);

  test("being replaced stays in use until the new one's first code", async () => {
    const { person, secret, give } = await withFactor();
    await give(codeAt(secret));
    const actor: Actor = {
      kind: "person",
      personId: person.id,
      name: person.name,
      secondFactorAt: START.toISOString(),
    };
    await expect(startSecondFactor({ ...actor, secondFactorAt: null }, {})).rejects.toMatchObject({
      fields: { secondFactor: "again" },
    });
    await startSecondFactor(actor, {});
    laterBy(30);
    await give(codeAt(secret));
    const next = (await pendingSecondFactor(actor, {}))!.secret;
    expect(next).not.toBe(secret);
    laterBy(30);
    await give(codeAt(next));
    laterBy(30);
    await expect(give(codeAt(secret))).rejects.toMatchObject({ code: "invalid" });
  });

  test("never stands in the audit list", async () => {
    const { person, secret, give } = await withFactor();
    const code = codeAt(secret);
    await give(code);
    const rows = await db().select().from(auditLog).where(eq(auditLog.subject, person.id));
    expect(rows.length).toBeGreaterThanOrEqual(2);
    expect(JSON.stringify(rows)).not.toContain(secret);
    expect(JSON.stringify(rows)).not.toContain(code);
  });
});

describe("roles that need a second factor", () => {
  test("do not act before its code is given in the session; other roles without one do", async () => {
    const libraryId = await makeLibrary();
    const { person, secret, give } = await withFactor();
    await makeMembership({ personId: person.id, role: "owner", libraryId, scopeName: "Saltmarrow" });
    const claim = { personId: person.id, sessionVersion: 1, membershipId: null };
    const before = await resolveViewer({ ...claim, secondFactorAt: null });
    expect(before?.actor.kind).toBe("person");
    expect(before?.roles).toMatchObject([{ kind: "owner", needs: "set-up", current: false }]);

    const { at } = await give(codeAt(secret));
    expect((await resolveViewer({ ...claim, secondFactorAt: null }))?.roles).toMatchObject([
      { needs: "code" },
    ]);
    expect(await resolveViewer({ ...claim, secondFactorAt: at })).toMatchObject({
      actor: { kind: "owner", libraryId, secondFactorAt: at },
      roles: [{ label: "owner of Saltmarrow", needs: null, current: true }],
    });
  });

  test("a claim of a code counts for nothing where no factor is set up", async () => {
    const person = await makePerson();
    await makeMembership({ personId: person.id, role: "admin" });
    const viewer = await resolveViewer({
      personId: person.id,
      sessionVersion: 1,
      secondFactorAt: START.toISOString(),
      membershipId: null,
    });
    expect(viewer?.actor).toMatchObject({ kind: "person", secondFactorAt: null });
  });

  test("a composer who has set one up gives its code too, and one who has not needs none", async () => {
    const libraryId = await makeLibrary();
    const plain = await makePerson();
    await makeMembership({ personId: plain.id, role: "composer", libraryId });
    const claim = { sessionVersion: 1, membershipId: null, secondFactorAt: null };
    expect((await resolveViewer({ ...claim, personId: plain.id }))?.actor.kind).toBe("composer");
    const { person, secret, give } = await withFactor();
    await makeMembership({ personId: person.id, role: "composer", libraryId });
    await give(codeAt(secret));
    expect((await resolveViewer({ ...claim, personId: person.id }))?.actor.kind).toBe("person");
  });
});

describe("money, keys and roles", () => {
  test("ask again after ten minutes, to the second", () => {
    const actor: Actor = { kind: "admin", personId: "per_x", name: "x", secondFactorAt: START.toISOString() };
    laterBy(600);
    expect(() => requireRecentSecondFactor(actor)).not.toThrow();
    laterBy(1);
    expect(() => requireRecentSecondFactor(actor)).toThrow(/second factor again/);
    expect(() => requireRecentSecondFactor({ ...actor, secondFactorAt: null })).toThrow();
    expect(() => requireRecentSecondFactor({ ...actor, secondFactorAt: "not a time" })).toThrow();
    expect(() => requireRecentSecondFactor(system("tests"))).not.toThrow();
  });

  test("granting a role is one of them", async () => {
    const person = await makePerson();
    const admin = await adminActor(new Date(START.getTime() - 601_000).toISOString());
    await expect(grantMembership(admin, { personId: person.id, role: "admin" })).rejects.toMatchObject({
      code: "precondition",
      fields: { secondFactor: "again" },
    });
  });

  test("a lost telephone: an admin takes factor, password and sessions away together", async () => {
    const { person, secret, give } = await withFactor({ passwordHash: "$argon2id$x" });
    await give(codeAt(secret));
    await resetSecondFactor(await adminActor(START.toISOString()), { personId: person.id });
    const [row] = await db().select().from(people).where(eq(people.id, person.id));
    expect(row).toMatchObject({
      totpSecret: null,
      totpConfirmedAt: null,
      passwordHash: null,
      sessionVersion: 2,
    });
  });
});

describe("in a demonstration", () => {
  test("the page may fill in the code of its own people and of nobody else", async () => {
    const demo = await makePerson({ demo: true });
    await setUpDemonstrationFactor(system("tests"), { personId: demo.id });
    const actor: Actor = { kind: "person", personId: demo.id, name: demo.name };
    const { code } = await demonstrationCode(actor, {});
    await confirmSecondFactor({ personId: demo.id, sessionVersion: 1, code: code!, address });
    const { code: second } = await demonstrationCode(actor, {});
    expect(second).not.toBe(code);

    const real = await makePerson();
    await expect(demonstrationCode({ ...actor, personId: real.id }, {})).rejects.toMatchObject({
      code: "forbidden",
    });
    await expect(setUpDemonstrationFactor(system("tests"), { personId: real.id })).rejects.toMatchObject({
      code: "not_found",
    });
  });
});
