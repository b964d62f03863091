import "@/tests/support/database";
import { eq } from "drizzle-orm";
import { afterEach, describe, expect, test, vi } from "vitest";
import { db } from "@/db/client";
import { people, signInLinks } from "@/db/schema/accounts";
import { getSignInLink, requestSignInLink, signInWithLink } from "@/lib/accounts";
import { ANONYMOUS } from "@/lib/kernel/actor";
import { makePerson } from "@/tests/support/make";
import { lastMailTo, tokenMailedTo } from "./support";

const address = "192.0.2.77";
const freshEmail = () => `link-${Math.random().toString(36).slice(2)}@test.example`;

afterEach(() => {
  vi.useRealTimers();
});

describe("a link by mail", () => {
  test("works once, and opening its page uses nothing up", async () => {
    const person = await makePerson();
    await requestSignInLink(ANONYMOUS, { email: person.email, address });
    const token = await tokenMailedTo(person.email);
    for (let looked = 0; looked < 3; looked++) {
      expect(await getSignInLink(ANONYMOUS, { token })).toEqual({ email: person.email, hasAccount: true });
    }
    expect(await signInWithLink({ token })).toEqual({ personId: person.id, sessionVersion: 1 });
    await expect(signInWithLink({ token })).rejects.toMatchObject({ code: "not_found" });
    await expect(getSignInLink(ANONYMOUS, { token })).rejects.toMatchObject({ code: "not_found" });
  });

  test("pressed ten times at once signs in once", async () => {
    const person = await makePerson();
    await requestSignInLink(ANONYMOUS, { email: person.email, address });
    const token = await tokenMailedTo(person.email);
    const answers = await Promise.allSettled(Array.from({ length: 10 }, () => signInWithLink({ token })));
    expect(answers.filter((answer) => answer.status === "fulfilled")).toHaveLength(1);
  });

  test("is refused after ten minutes", async () => {
    vi.useFakeTimers({ toFake: ["Date"], now: new Date("2026-12-01T10:00:00Z") });
    const person = await makePerson();
    await requestSignInLink(ANONYMOUS, { email: person.email, address: "192.0.2.78" });
    const token = await tokenMailedTo(person.email);
    vi.setSystemTime(new Date("2026-12-01T10:09:59Z"));
    expect(await getSignInLink(ANONYMOUS, { token })).toMatchObject({ email: person.email });
    vi.setSystemTime(new Date("2026-12-01T10:10:00Z"));
    await expect(signInWithLink({ token })).rejects.toMatchObject({ code: "not_found" });
  });

  test("is sent to an address without an account just the same; there it opens one, under a name", async () => {
    const email = freshEmail();
    const person = await makePerson();
    const answers = [
      await requestSignInLink(ANONYMOUS, { email, address: "192.0.2.79" }),
      await requestSignInLink(ANONYMOUS, { email: person.email, address: "192.0.2.79" }),
    ];
    expect(answers[0]).toEqual(answers[1]);
    expect((await lastMailTo(email)).template).toBe((await lastMailTo(person.email)).template);
    const token = await tokenMailedTo(email);
    await expect(signInWithLink({ token })).rejects.toMatchObject({ fields: { name: expect.any(String) } });
    const { personId } = await signInWithLink({ token, name: "Yevgenia Sallow" });
    const [row] = await db().select().from(people).where(eq(people.id, personId));
    expect(row).toMatchObject({ email, name: "Yevgenia Sallow", passwordHash: null });
    expect(row?.emailVerifiedAt).toBeInstanceOf(Date);
  });

  test("is not for a disabled account, and its page does not say so", async () => {
    const person = await makePerson({ disabledAt: new Date() });
    await requestSignInLink(ANONYMOUS, { email: person.email, address });
    const token = await tokenMailedTo(person.email);
    expect(await getSignInLink(ANONYMOUS, { token })).toMatchObject({ hasAccount: true });
    await expect(signInWithLink({ token })).rejects.toMatchObject({ code: "not_found" });
  });

  test("is kept as a hash only", async () => {
    const email = freshEmail();
    await requestSignInLink(ANONYMOUS, { email, address: "192.0.2.80" });
    const token = await tokenMailedTo(email);
    const [row] = await db().select().from(signInLinks).where(eq(signInLinks.email, email));
    expect(JSON.stringify(row)).not.toContain(token);
  });

  test("cannot be asked for again and again to fill a mailbox", async () => {
    const email = freshEmail();
    const asked = [];
    for (let index = 0; index < 6; index++) {
      asked.push(
        await requestSignInLink(ANONYMOUS, { email, address: "192.0.2.81" }).then(
          () => "sent",
          (error) => error.code,
        ),
      );
    }
    expect(asked).toEqual(["sent", "sent", "sent", "limit", "limit", "limit"]);
  });
});
