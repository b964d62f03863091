import "@/tests/support/database";
import { and, eq } from "drizzle-orm";
import { afterEach, describe, expect, test, vi } from "vitest";
import { db } from "@/db/client";
import { people } from "@/db/schema/accounts";
import { auditLog } from "@/db/schema/kernel";
import {
  registerPerson,
  resolveViewer,
  setPassword,
  signInWithPassword,
  signOutEverywhere,
} from "@/lib/accounts";
import { hashPassword, passwordFits } from "@/lib/accounts/password-hash";
import { takeAttempt, waitS } from "@/lib/accounts/throttle";
import { type Actor, system } from "@/lib/kernel/actor";
import { makePerson } from "@/tests/support/make";
import { GOOD_PASSWORD } from "./support";

const door = system("tests");
let address = 0;
const freshAddress = () => `192.0.2.${++address}`;
const actorOf = (person: { id: string; name: string }): Actor => ({
  kind: "person",
  personId: person.id,
  name: person.name,
});

afterEach(() => {
  vi.useRealTimers();
});

describe("signing in by password", () => {
  test("takes the right one, in any form that NFKC makes equal, and writes it to the audit list", async () => {
    const { personId } = await registerPerson(door, {
      email: "Ones@Test.Example ",
      name: "One",
      password: "Ångström über dem Watt",
    });
    const composed = "Ångström über dem Watt".normalize("NFC");
    const decomposed = composed.normalize("NFD");
    expect(decomposed).not.toBe(composed);
    for (const password of [composed, decomposed]) {
      const signedIn = await signInWithPassword({
        email: "ones@test.example",
        password,
        address: freshAddress(),
      });
      expect(signedIn).toEqual({ personId, sessionVersion: 1 });
    }
    const rows = await db()
      .select()
      .from(auditLog)
      .where(and(eq(auditLog.subject, personId), eq(auditLog.verb, "accounts.recordPasswordSignIn")));
    expect(rows).toHaveLength(2);
  });

  test("answers alike for a wrong password, an unknown address, no password and a disabled account", async () => {
    const passwordHash = await hashPassword(GOOD_PASSWORD);
    const known = await makePerson({ passwordHash });
    const bare = await makePerson();
    const disabled = await makePerson({ passwordHash, disabledAt: new Date() });
    const tries = [
      { email: known.email, password: "another password altogether" },
      { email: "nobody-at-all@test.example", password: GOOD_PASSWORD },
      { email: bare.email, password: GOOD_PASSWORD },
      { email: disabled.email, password: GOOD_PASSWORD },
      { email: "not an address", password: GOOD_PASSWORD },
    ];
    for (const one of tries) {
      expect(await signInWithPassword({ ...one, address: freshAddress() })).toBeNull();
    }
    expect(
      await signInWithPassword({ email: known.email, password: GOOD_PASSWORD, address: freshAddress() }),
    ).not.toBeNull();
  });

  test("compares with a hash even where there is none, and no password fits that", async () => {
    expect(await passwordFits(null, "")).toBe(false);
    expect(await passwordFits(null, GOOD_PASSWORD)).toBe(false);
  });

  test("keeps Argon2id with its parameters, never the password", async () => {
    const hash = await hashPassword(GOOD_PASSWORD);
    expect(hash).toMatch(/^\$argon2id\$v=19\$m=19456,t=2,p=1\$/);
    expect(hash).not.toContain(GOOD_PASSWORD);
  });
});

describe("throttling", () => {
  const attempt = (account: string, from: string) =>
    takeAttempt(door, { door: "password", account, address: from });

  test("slows the fifth attempt on one account from one address and refuses none of the waiting longer than needed", async () => {
    vi.useFakeTimers({ toFake: ["Date"], now: new Date("2026-12-01T10:00:00Z") });
    const [account, from] = [`${Math.random()}@test.example`, freshAddress()];
    const waits: number[] = [];
    for (let index = 0; index < 6; index++) waits.push((await attempt(account, from)).waitMs);
    expect(waits).toEqual([0, 0, 0, 0, 1000, 3000]);
    await expect(attempt(account, from)).rejects.toMatchObject({
      code: "limit",
      message: expect.stringContaining("nothing is locked"),
    });
  });

  test("never locks out: after the wait that is named, the next attempt is let in, however many were refused", async () => {
    vi.useFakeTimers({ toFake: ["Date"], now: new Date("2026-12-01T10:00:00Z") });
    const [account, from] = [`${Math.random()}@test.example`, freshAddress()];
    let longestS = 0;
    for (let index = 0; index < 40; index++) {
      const refused = await attempt(account, from).then(
        () => null,
        (error: Error) => error.message,
      );
      const seconds = Number(/wait (\d+) seconds/.exec(refused ?? "")?.[1] ?? 0);
      longestS = Math.max(longestS, seconds);
      if (refused) vi.setSystemTime(Date.now() + seconds * 1000);
      if (refused) expect((await attempt(account, from)).waitMs).toBeLessThanOrEqual(3000);
    }
    expect(longestS).toBe(30);
  });

  test("a stranger's attempts cost the account's own person a few seconds at most, from another address", async () => {
    vi.useFakeTimers({ toFake: ["Date"], now: new Date("2026-12-01T10:00:00Z") });
    const account = `${Math.random()}@test.example`;
    for (let index = 0; index < 60; index++)
      await attempt(account, `198.51.100.${index % 20}`).catch(() => null);
    expect((await attempt(account, freshAddress())).waitMs).toBe(3000);
  });

  test("counts unknown and known addresses alike", async () => {
    vi.useFakeTimers({ toFake: ["Date"], now: new Date("2026-12-01T10:00:00Z") });
    const known = await makePerson();
    const counted = async (account: string) => {
      const from = freshAddress();
      const waits: number[] = [];
      for (let index = 0; index < 6; index++) waits.push((await attempt(account, from)).waitMs);
      return waits;
    };
    expect(await counted(known.email)).toEqual(await counted(`${Math.random()}@test.example`));
  });

  test("forgets an hour later, and after the right password", async () => {
    vi.useFakeTimers({ toFake: ["Date"], now: new Date("2026-12-01T10:00:00Z") });
    const person = await makePerson({ passwordHash: await hashPassword(GOOD_PASSWORD) });
    const from = freshAddress();
    for (let index = 0; index < 4; index++) await attempt(person.email, from);
    expect(
      await signInWithPassword({ email: person.email, password: GOOD_PASSWORD, address: from }),
    ).not.toBeNull();
    expect((await attempt(person.email, from)).waitMs).toBe(0);
    for (let index = 0; index < 4; index++) await attempt(person.email, from);
    vi.setSystemTime(Date.now() + 3_601_000);
    expect((await attempt(person.email, from)).waitMs).toBe(0);
  });

  test("lets attempts at the same moment in one after the other", async () => {
    vi.useFakeTimers({ toFake: ["Date"], now: new Date("2026-12-01T10:00:00Z") });
    const [account, from] = [`${Math.random()}@test.example`, freshAddress()];
    const answers = await Promise.allSettled(Array.from({ length: 12 }, () => attempt(account, from)));
    const waits = answers.flatMap((answer) => (answer.status === "fulfilled" ? [answer.value.waitMs] : []));
    expect(waits.sort((a, b) => a - b)).toEqual([0, 0, 0, 0, 1000, 3000]);
  });

  test("doubles the cost up to its bound", () => {
    const pace = { free: 2, slowestS: 30, inTurn: true };
    expect([1, 2, 3, 4, 5, 6, 7, 8, 500].map((one) => waitS(one, pace))).toEqual([
      0, 0, 1, 2, 4, 8, 16, 30, 30,
    ]);
  });
});

describe("a session", () => {
  const claim = (personId: string, sessionVersion: number) => ({
    personId,
    sessionVersion,
    secondFactorAt: null,
    membershipId: null,
  });

  test("stops at its next request after a sign-out everywhere", async () => {
    const person = await makePerson();
    expect(await resolveViewer(claim(person.id, 1))).toMatchObject({ person: { id: person.id } });
    await signOutEverywhere(actorOf(person), {});
    expect(await resolveViewer(claim(person.id, 1))).toBeNull();
    expect(await resolveViewer(claim(person.id, 2))).not.toBeNull();
  });

  test("stops when the password changes and when the person is disabled", async () => {
    const person = await makePerson();
    await setPassword(actorOf(person), { password: GOOD_PASSWORD });
    expect(await resolveViewer(claim(person.id, 1))).toBeNull();
    expect(await resolveViewer(claim(person.id, 2))).not.toBeNull();
    await db().update(people).set({ disabledAt: new Date() }).where(eq(people.id, person.id));
    expect(await resolveViewer(claim(person.id, 2))).toBeNull();
  });

  test("of nobody known stands for nobody", async () => {
    expect(await resolveViewer(claim("per_000000000000000000000000", 1))).toBeNull();
  });
});

describe("setting a password", () => {
  test("asks for the one in use, unless a link has just been used", async () => {
    const person = await makePerson({ passwordHash: await hashPassword(GOOD_PASSWORD) });
    const next = "quarry bicycle envelope moss";
    await expect(setPassword(actorOf(person), { password: next })).rejects.toMatchObject({ code: "invalid" });
    await expect(setPassword(actorOf(person), { password: next, current: "wrong" })).rejects.toMatchObject({
      fields: { current: expect.stringContaining("sign in by a link") },
    });
    await setPassword(actorOf(person), { password: next, current: GOOD_PASSWORD });
    await db().update(people).set({ linkUsedAt: new Date() }).where(eq(people.id, person.id));
    await setPassword(actorOf(person), { password: GOOD_PASSWORD });
    await expect(setPassword(actorOf(person), { password: next })).rejects.toMatchObject({ code: "invalid" });
  });

  test("names the reason of a refusal at the field, and leaves the old one in place", async () => {
    const person = await makePerson();
    await expect(setPassword(actorOf(person), { password: "too short" })).rejects.toMatchObject({
      code: "invalid",
      fields: { password: expect.stringContaining("at least 15") },
    });
    const [row] = await db().select().from(people).where(eq(people.id, person.id));
    expect(row).toMatchObject({ passwordHash: null, sessionVersion: 1 });
  });
});
