import "@/tests/support/database";
import type { Session } from "next-auth";
import type { JWT } from "next-auth/jwt";
import { Secret, TOTP } from "otpauth";
import { afterEach, beforeEach, describe, expect, test, vi } from "vitest";
import { authOptions, pendingSecondFactor, startSecondFactor } from "@/lib/accounts";
import { hashPassword } from "@/lib/accounts/password-hash";
import type { Actor } from "@/lib/kernel/actor";
import { makePerson } from "@/tests/support/make";
import { GOOD_PASSWORD } from "./support";

const START = new Date("2026-12-01T10:00:00Z");
type JwtCallback = NonNullable<NonNullable<typeof authOptions.callbacks>["jwt"]>;
type SessionCallback = NonNullable<NonNullable<typeof authOptions.callbacks>["session"]>;

const jwt = (given: object) => authOptions.callbacks!.jwt!(given as Parameters<JwtCallback>[0]);
const sessionOf = async (token: JWT) =>
  (await authOptions.callbacks!.session!({
    session: { expires: "" },
    token,
  } as unknown as Parameters<SessionCallback>[0])) as Session;
const authorise = (id: string, credentials: object) => {
  const provider = authOptions.providers.find((one) => one.id === id);
  if (provider?.type !== "credentials") throw new Error(`no provider ${id}`);
  return provider.authorize(
    credentials as never,
    { headers: { "x-forwarded-for": "10.0.0.1, 192.0.2.200" } } as never,
  );
};

async function signedIn() {
  const person = await makePerson();
  const token = await jwt({ token: {}, user: { id: person.id, sessionVersion: 1 }, trigger: "signIn" });
  return { person, token };
}

beforeEach(() => {
  vi.useFakeTimers({ toFake: ["Date"], now: START });
});
afterEach(() => {
  vi.useRealTimers();
});

describe("the session's token", () => {
  test("says who, in which version, and that no code was given yet", async () => {
    const { person, token } = await signedIn();
    expect((await sessionOf(token)).sedgewren).toEqual({
      personId: person.id,
      sessionVersion: 1,
      secondFactorAt: null,
    });
  });

  test("ends twelve hours after the sign-in, however often it is written anew", async () => {
    const { token } = await signedIn();
    vi.setSystemTime(new Date("2026-12-01T21:59:59Z"));
    const renewed = await jwt({ token: { ...token } });
    expect((await sessionOf(renewed)).sedgewren).toBeDefined();
    vi.setSystemTime(new Date("2026-12-01T22:00:00Z"));
    expect((await sessionOf(await jwt({ token: { ...renewed } }))).sedgewren).toBeUndefined();
  });

  test("takes a right code through an update, and only the code: nothing else of it reaches the claim", async () => {
    const { person, token } = await signedIn();
    const actor: Actor = { kind: "person", personId: person.id, name: person.name };
    await startSecondFactor(actor, {});
    const { secret } = (await pendingSecondFactor(actor, {}))!;
    const forged = {
      sedgewren: { personId: "per_other" },
      secondFactorAt: START.toISOString(),
      sessionVersion: 9,
    };
    const untouched = await jwt({ token: { ...token }, trigger: "update", session: forged });
    expect(untouched.sedgewren).toEqual(token.sedgewren);

    const wrong = await jwt({
      token: { ...token },
      trigger: "update",
      session: { secondFactorCode: "000000" },
    });
    expect(await sessionOf(wrong)).toMatchObject({
      sedgewren: { secondFactorAt: null },
      secondFactorProblem: expect.stringContaining("not right"),
    });
    const code = new TOTP({ secret: Secret.fromBase32(secret) }).generate();
    const right = await jwt({
      token: { ...wrong },
      trigger: "update",
      session: { ...forged, secondFactorCode: code },
    });
    expect(await sessionOf(right)).toEqual({
      expires: "",
      sedgewren: { personId: person.id, sessionVersion: 1, secondFactorAt: START.toISOString() },
    });
  });

  test("of a session that was signed out everywhere takes no code", async () => {
    const { token } = await signedIn();
    const stale = { ...token, sedgewren: { ...token.sedgewren!, sessionVersion: 0 } };
    const after = await jwt({ token: stale, trigger: "update", session: { secondFactorCode: "123456" } });
    expect(after.sedgewren?.secondFactorAt).toBeNull();
    expect(after.secondFactorProblem).toBeDefined();
  });
});

describe("the doors that next-auth is given", () => {
  test("answer null for a wrong password and the person for the right one", async () => {
    const person = await makePerson({ passwordHash: await hashPassword(GOOD_PASSWORD) });
    expect(
      await authorise("password", { email: person.email, password: "no such password here" }),
    ).toBeNull();
    expect(await authorise("password", { email: person.email })).toBeNull();
    expect(await authorise("password", { email: person.email, password: GOOD_PASSWORD })).toEqual({
      id: person.id,
      sessionVersion: 1,
    });
  });

  test("show the reason of a refused link", async () => {
    await expect(authorise("link", { token: "nothing" })).rejects.toThrow("used already, or is too old");
  });
});
